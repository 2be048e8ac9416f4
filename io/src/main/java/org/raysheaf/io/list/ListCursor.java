package org.raysheaf.io.list;

import java.io.IOException;
import java.nio.file.Path;
import java.util.EnumMap;
import java.util.Map;
import java.util.OptionalLong;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.io.hdf5.Hdf5Exception;
import org.raysheaf.io.hdf5.Hdf5File;
import org.raysheaf.io.hdf5.ValueReader;
import org.raysheaf.io.list.ListFileException.Kind;

/** Reads the columns of a list side by side, one chunk of each in memory. A failure leaves the block empty and the cursor of no
 * further use. Not safe for several threads. */
final class ListCursor implements EventSource.Cursor {
    private final Path path;
    private final Hdf5File file;
    private final Map<Attribute, ColumnsReader.Column> columns;
    private final Map<Attribute, ValueReader> readers = new EnumMap<>(Attribute.class);
    private final long events;
    private final int elements;
    private long position;
    private @Nullable ListFileException failure;

    private ListCursor(
            Path path, Hdf5File file, Map<Attribute, ColumnsReader.Column> columns, long events, int elements) {
        this.path = path;
        this.file = file;
        this.columns = columns;
        this.events = events;
        this.elements = elements;
    }

    static ListCursor open(Path path, ListKind kind, long events, int elements) throws IOException {
        Hdf5File file = openFile(path);
        try {
            Map<Attribute, ColumnsReader.Column> columns =
                    new ColumnsReader(path, file.root(), kind).read(OptionalLong.of(events));
            return new ListCursor(path, file, columns, events, elements);
        } catch (Hdf5Exception e) {
            file.close();
            throw new ListFileException(e);
        } catch (IOException | RuntimeException e) {
            file.close();
            throw e;
        }
    }

    private static Hdf5File openFile(Path path) throws IOException {
        try {
            return Hdf5File.open(path);
        } catch (Hdf5Exception e) {
            throw new ListFileException(e);
        }
    }

    @Override
    public boolean next(EventBlock block) throws IOException {
        block.resize(0);
        if (failure != null) {
            throw failure;
        }
        int count = (int) Math.min(block.capacity(), events - position);
        try {
            for (Attribute attribute : block.attributes()) {
                read(reader(attribute), block, attribute, count);
            }
        } catch (Hdf5Exception e) {
            failure = new ListFileException(e);
            throw failure;
        }
        block.resize(count);
        for (Attribute attribute : block.attributes()) {
            requirePossible(block, attribute);
        }
        position += count;
        return count > 0;
    }

    private ValueReader reader(Attribute attribute) throws IOException {
        ValueReader reader = readers.get(attribute);
        if (reader == null) {
            ColumnsReader.Column column = columns.get(attribute);
            if (column == null) {
                throw new IllegalArgumentException(
                        "the list has no " + attribute.columnName() + ", only " + columns.keySet());
            }
            reader = column.dataset.values(column.checksums);
            readers.put(attribute, reader);
        }
        if (reader.position() != position) {
            throw new IllegalArgumentException("all blocks given to a cursor must have the same columns: "
                    + attribute.columnName() + " was left out before");
        }
        return reader;
    }

    private static void read(ValueReader reader, EventBlock block, Attribute attribute, int count) throws IOException {
        switch (attribute.type()) {
            case UINT8 -> reader.read(block.bytes(attribute), 0, count);
            case UINT32 -> reader.read(block.ints(attribute), 0, count);
            case INT64 -> reader.read(block.longs(attribute), 0, count);
            case FLOAT32 -> reader.read(block.floats(attribute), 0, count);
        }
    }

    private void requirePossible(EventBlock block, Attribute attribute) throws ListFileException {
        int bad = EventRules.firstImpossible(block, attribute, elements);
        if (bad == EventRules.NONE) {
            return;
        }
        boolean element = EventRules.namesElements(attribute);
        String found = EventRules.found(block, attribute, bad);
        block.resize(0);
        failure = new ListFileException(
                element ? Kind.ELEMENT_OUT_OF_RANGE : Kind.IMPOSSIBLE_VALUE,
                path,
                attribute.columnName() + ", event " + (position + bad),
                "expected " + EventRules.expected(attribute, elements) + ", found " + found
                        + (element
                                ? "; does the list belong to another system?"
                                : "; the list was recorded or converted wrongly"));
        throw failure;
    }

    @Override
    public void close() throws IOException {
        file.close();
    }
}
