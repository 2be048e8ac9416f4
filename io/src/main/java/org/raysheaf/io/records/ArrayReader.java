package org.raysheaf.io.records;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/**
 * Reads records from arrays of equal length that stand side by side: the datasets of an HDF5 file, the arrays of a folder. Each array gives
 * values of a fixed size, and fields take their bytes out of them just as out of binary records. One thread.
 */
final class ArrayReader implements RecordReader {
    private final Opener opener;
    private final FieldBlock block = new FieldBlock();
    private Path file = Path.of("");
    private @Nullable OpenArrays arrays;
    private final List<BitField> columns = new ArrayList<>();
    private final int[] starts = new int[FieldBlock.CAPACITY];
    private long done;
    private long bytes;

    /** Opens the arrays of a data file. */
    interface Opener {
        OpenArrays open(Path file) throws IOException;
    }

    /** The open arrays of a data file. */
    interface OpenArrays extends AutoCloseable {
        /** The arrays that fields are taken from. */
        List<ValueArray> arrays();

        /** For every field in order: which array, and where in a value. */
        List<Slot> slots();

        /** Names of what no field reads. */
        List<String> unread();

        @Override
        void close() throws IOException;
    }

    /** Where a field is. */
    record Slot(String name, int array, BitPlace place, BinaryFormat.Coding number) {}

    /** One array as a stream of values. */
    abstract static class ValueArray {
        final String place;
        final int valueBytes;
        final long count;
        byte[] buffer = new byte[0];

        ValueArray(String place, int valueBytes, long count) {
            this.place = place;
            this.valueBytes = valueBytes;
            this.count = count;
        }

        /** Reads the next bytes. */
        abstract void read(byte[] into, int offset, int length) throws IOException;
    }

    ArrayReader(Opener opener) {
        this.opener = opener;
    }

    @Override
    public void open(Path next) throws IOException {
        close();
        file = next;
        done = 0;
        bytes = 0;
        OpenArrays opened = opener.open(next);
        arrays = opened;
        long count = opened.arrays().get(0).count;
        for (ValueArray array : opened.arrays()) {
            if (array.count != count) {
                throw new RecordException(file + ": expected arrays of one length, found "
                        + opened.arrays().get(0).place + " with " + count + " values and " + array.place + " with "
                        + array.count);
            }
            array.buffer = new byte[array.valueBytes * FieldBlock.CAPACITY + 2 * BitPlace.MARGIN];
        }
        boolean first = columns.isEmpty();
        List<BitField> found = new ArrayList<>();
        for (int i = 0; i < opened.slots().size(); i++) {
            Slot slot = opened.slots().get(i);
            boolean whole = slot.number() != BinaryFormat.Coding.FLOAT;
            Column column =
                    first ? block.add(slot.name(), whole) : columns.get(i).column();
            if (column.whole() != whole) {
                throw new RecordException(file + ", " + slot.name() + ": expected "
                        + (column.whole() ? "whole" : "real")
                        + " numbers as in the file before, found the other kind; import these files one by one");
            }
            found.add(new BitField(slot.place(), slot.number(), column));
        }
        columns.clear();
        columns.addAll(found);
    }

    @Override
    public FieldBlock block() {
        return block;
    }

    @Override
    public boolean next(int most) throws IOException {
        if (arrays == null) {
            return false;
        }
        long left = arrays.arrays().get(0).count - done;
        int size = (int) Math.min(Math.min(most, FieldBlock.CAPACITY), left);
        Arrays.fill(block.fates(), 0, size, 0);
        for (ValueArray array : arrays.arrays()) {
            array.read(array.buffer, BitPlace.MARGIN, size * array.valueBytes);
            bytes += (long) size * array.valueBytes;
        }
        for (int i = 0; i < columns.size(); i++) {
            ValueArray array = arrays.arrays().get(arrays.slots().get(i).array());
            for (int r = 0; r < size; r++) {
                starts[r] = BitPlace.MARGIN + r * array.valueBytes;
            }
            columns.get(i).fill(array.buffer, starts, size);
        }
        block.set(size, done);
        done += size;
        return size > 0;
    }

    @Override
    public long position() {
        return bytes;
    }

    @Override
    public Map<String, Long> marks() {
        return Map.of();
    }

    @Override
    public List<String> unread() {
        return arrays == null ? List.of() : arrays.unread();
    }

    @Override
    public void close() throws IOException {
        if (arrays != null) {
            arrays.close();
            arrays = null;
        }
    }
}
