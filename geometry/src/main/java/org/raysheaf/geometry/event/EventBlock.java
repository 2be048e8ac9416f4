package org.raysheaf.geometry.event;

import java.util.Collections;
import java.util.EnumMap;
import java.util.EnumSet;
import java.util.Map;
import java.util.Set;

/**
 * A run of events as columns: one primitive array per attribute, all of the same capacity, of which the first {@link #size()} entries
 * count. Blocks are filled, handed on and filled again; arrays are shared, never copied. Not safe for use by several threads.
 */
public final class EventBlock {
    private final Map<Attribute, Object> columns = new EnumMap<>(Attribute.class);
    private final int capacity;
    private int size;

    /**
     * An empty block.
     *
     * @param attributes the attributes that it has columns for
     * @param capacity the most events it holds, at least 1
     */
    public EventBlock(Set<Attribute> attributes, int capacity) {
        if (capacity < 1) {
            throw new IllegalArgumentException("a block holds at least one event: capacity=" + capacity);
        }
        this.capacity = capacity;
        for (Attribute attribute : attributes) {
            columns.put(attribute, allocate(attribute.type(), capacity));
        }
    }

    private static Object allocate(ColumnType type, int capacity) {
        return switch (type) {
            case UINT8 -> new byte[capacity];
            case UINT32 -> new int[capacity];
            case INT64 -> new long[capacity];
            case FLOAT32 -> new float[capacity];
        };
    }

    /**
     * The attributes that the block has columns for.
     *
     * @return an unmodifiable set, in declaration order
     */
    public Set<Attribute> attributes() {
        return columns.isEmpty() ? Set.of() : Collections.unmodifiableSet(EnumSet.copyOf(columns.keySet()));
    }

    /**
     * Whether the block has a column for an attribute.
     *
     * @param attribute the attribute
     * @return true if it has
     */
    public boolean has(Attribute attribute) {
        return columns.containsKey(attribute);
    }

    /**
     * The most events that the block holds.
     *
     * @return the length of every column
     */
    public int capacity() {
        return capacity;
    }

    /**
     * The number of events in the block.
     *
     * @return how many entries of every column count
     */
    public int size() {
        return size;
    }

    /**
     * Sets the number of events, after the columns were filled.
     *
     * @param events the new size, 0 to {@link #capacity()}
     */
    public void resize(int events) {
        if (events < 0 || events > capacity) {
            throw new IllegalArgumentException("size must be within 0 to capacity=" + capacity + ": size=" + events);
        }
        size = events;
    }

    /**
     * A block that holds these events and has room for more.
     *
     * @param events how many it must hold
     * @return this, or a larger copy
     */
    public EventBlock withRoomFor(int events) {
        if (events <= capacity) {
            return this;
        }
        EventBlock larger = new EventBlock(attributes(), Math.max(events, capacity + capacity / 2));
        larger.append(this, 0, size);
        return larger;
    }

    /**
     * Appends events of another block; columns of it that this block does not have are left out.
     *
     * @param from a block with all columns of this one
     * @param first the first event to take
     * @param count how many
     */
    public void append(EventBlock from, int first, int count) {
        int before = size;
        resize(before + count);
        columns.forEach((attribute, column) -> System.arraycopy(from.column(attribute), first, column, before, count));
    }

    /**
     * Appends events of another block in an order of their own.
     *
     * @param from a block with all columns of this one
     * @param rows the events to take
     * @param first where in rows to begin
     * @param count how many
     */
    public void append(EventBlock from, int[] rows, int first, int count) {
        int before = size;
        resize(before + count);
        columns.forEach((attribute, column) -> {
            Object source = from.column(attribute);
            switch (attribute.type()) {
                case UINT8 -> {
                    for (int i = 0; i < count; i++) {
                        ((byte[]) column)[before + i] = ((byte[]) source)[rows[first + i]];
                    }
                }
                case UINT32 -> {
                    for (int i = 0; i < count; i++) {
                        ((int[]) column)[before + i] = ((int[]) source)[rows[first + i]];
                    }
                }
                case INT64 -> {
                    for (int i = 0; i < count; i++) {
                        ((long[]) column)[before + i] = ((long[]) source)[rows[first + i]];
                    }
                }
                case FLOAT32 -> {
                    for (int i = 0; i < count; i++) {
                        ((float[]) column)[before + i] = ((float[]) source)[rows[first + i]];
                    }
                }
            }
        });
    }

    /**
     * Forgets the first events; the others move up.
     *
     * @param count how many to forget
     */
    public void removeFirst(int count) {
        int rest = size - count;
        columns.values().forEach(column -> System.arraycopy(column, count, column, 0, rest));
        size = rest;
    }

    /**
     * A column of 8-bit values.
     *
     * @param attribute an attribute of type UINT8
     * @return the shared array
     */
    public byte[] bytes(Attribute attribute) {
        return (byte[]) column(attribute);
    }

    /**
     * A column of 32-bit integers.
     *
     * @param attribute an attribute of type UINT32
     * @return the shared array
     */
    public int[] ints(Attribute attribute) {
        return (int[]) column(attribute);
    }

    /**
     * A column of 64-bit integers.
     *
     * @param attribute an attribute of type INT64
     * @return the shared array
     */
    public long[] longs(Attribute attribute) {
        return (long[]) column(attribute);
    }

    /**
     * A column of single-precision values.
     *
     * @param attribute an attribute of type FLOAT32
     * @return the shared array
     */
    public float[] floats(Attribute attribute) {
        return (float[]) column(attribute);
    }

    /**
     * A column as it is, for code that copies columns whatever their type.
     *
     * @param attribute an attribute of this block
     * @return the shared array: {@code byte[]}, {@code int[]}, {@code long[]} or {@code float[]}
     * @throws IllegalArgumentException if the block has no such column
     */
    public Object column(Attribute attribute) {
        Object column = columns.get(attribute);
        if (column == null) {
            throw new IllegalArgumentException(
                    "the events have no " + attribute.columnName() + ", only " + attributes());
        }
        return column;
    }
}
