package org.raysheaf.io.records;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/**
 * What the marks of one type in a stream have said so far, and the columns by which events know it: {@code name.count} and {@code name.field}, all 0
 * before the first mark. With {@code per}, every value of that field has a state of its own. One thread.
 */
final class MarkState {
    /** Values of {@code per} run from 0 to below this. */
    private static final int SLOTS = 1 << 16;

    private final List<BitField> fields = new ArrayList<>();
    private final List<Column> seen = new ArrayList<>();
    private final List<long[]> wholes = new ArrayList<>();
    private final List<double[]> reals = new ArrayList<>();
    private final String name;
    private final FieldBlock block;
    private final Column count;
    private final long[] counts;
    private final @Nullable String per;
    private final @Nullable Column eventSlot;
    private @Nullable Column markSlot;
    private final int outside;

    private final int[] starts = new int[FieldBlock.CAPACITY];
    private final int[] before = new int[FieldBlock.CAPACITY];
    private int size;

    MarkState(BinaryFormat.RecordType type, FieldBlock block, Map<String, Column> eventFields, Reasons reasons) {
        this.name = type.name();
        this.block = block;
        this.per = type.per();
        this.eventSlot = per == null ? null : eventFields.get(per);
        this.counts = new long[per == null ? 1 : SLOTS];
        this.count = block.add(name + ".count", true);
        this.outside = per == null ? 0 : reasons.number(per + ": outside 0 to " + (SLOTS - 1));
    }

    void addField(BinaryFormat.Field field, BitPlace place) {
        boolean whole = field.type() != BinaryFormat.Coding.FLOAT;
        Column own = Column.of(field.name(), whole);
        fields.add(new BitField(place, field.type(), own));
        seen.add(block.add(name + "." + field.name(), whole));
        wholes.add(new long[whole ? counts.length : 0]);
        reals.add(new double[whole ? 0 : counts.length]);
        if (field.name().equals(per)) {
            markSlot = own;
        }
    }

    /** Forgets the marks of the block before; what they said stays. */
    void clear() {
        size = 0;
    }

    /** Notes a mark; false if no more fit into this block. */
    boolean add(int start) {
        starts[size++] = start;
        return size < FieldBlock.CAPACITY;
    }

    /** Notes that an event comes next. */
    void eventFollows(int row) {
        before[row] = size;
    }

    /** Takes in the marks of the block, and fills the columns by which its events know them. */
    void apply(byte[] buffer, int events, int[] fates) {
        for (BitField field : fields) {
            field.fill(buffer, starts, size);
        }
        int mark = 0;
        for (int row = 0; row < events; row++) {
            for (; mark < before[row]; mark++) {
                takeIn(mark);
            }
            tell(row, fates);
        }
        for (; mark < size; mark++) {
            takeIn(mark);
        }
    }

    private void takeIn(int mark) {
        long slot = markSlot == null ? 0 : markSlot.longs()[mark];
        if (slot < 0 || slot >= counts.length) {
            return; // no event can ask for it
        }
        counts[(int) slot]++;
        for (int f = 0; f < fields.size(); f++) {
            Column own = fields.get(f).column();
            if (own.whole()) {
                wholes.get(f)[(int) slot] = own.longs()[mark];
            } else {
                reals.get(f)[(int) slot] = own.doubles()[mark];
            }
        }
    }

    private void tell(int row, int[] fates) {
        long slot = eventSlot == null || !eventSlot.whole() ? 0 : eventSlot.longs()[row];
        if (slot < 0 || slot >= counts.length) {
            fates[row] = outside;
            return;
        }
        count.longs()[row] = counts[(int) slot];
        for (int f = 0; f < seen.size(); f++) {
            Column column = seen.get(f);
            if (column.whole()) {
                column.longs()[row] = wholes.get(f)[(int) slot];
            } else {
                column.doubles()[row] = reals.get(f)[(int) slot];
            }
        }
    }
}
