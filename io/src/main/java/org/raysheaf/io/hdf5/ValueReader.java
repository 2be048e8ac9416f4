package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.util.zip.CRC32C;
import org.jspecify.annotations.Nullable;

/**
 * Reads the values of a dataset from first to last, holding one chunk at a time. With checksums, a chunk is verified before any of its
 * values is given. Not safe for use by several threads.
 */
public final class ValueReader {
    private final FileBytes file;
    private final String place;
    private final StoredType type;
    private final Segments segments;
    private final long count;
    private final int @Nullable [] checksums;
    private ByteBuffer segment = ByteBuffer.allocate(0);
    private int segmentsRead;
    private long position;

    ValueReader(FileBytes file, StoredDataset dataset, Segments segments, int @Nullable [] checksums)
            throws Hdf5Exception {
        this.file = file;
        this.place = dataset.place();
        this.type = dataset.type();
        this.segments = segments;
        this.count = dataset.count();
        this.checksums = checksums;
        if (checksums != null) {
            long chunkLength = dataset.chunkLength();
            long chunks = chunkLength == 0 ? 0 : (count + chunkLength - 1) / chunkLength;
            if (chunks != checksums.length) {
                throw file.damaged(
                        place, "expected one checksum for each of " + chunks + " chunks, found " + checksums.length);
            }
        }
    }

    /**
     * How many values have been read.
     *
     * @return the index of the next value
     */
    public long position() {
        return position;
    }

    /**
     * Reads the next values as 8-bit integers.
     *
     * @param target receives them
     * @param from where the first goes
     * @param n how many, at most as many as are left
     * @throws Hdf5Exception if one is not within 0 to 255, or they are damaged or no whole numbers
     * @throws IOException if the file cannot be read
     */
    public void read(byte[] target, int from, int n) throws IOException {
        int next = from;
        while (next < from + n) {
            int run = run(from + n - next);
            if (type.bytes() == 1 && !type.signed()) {
                segment.get(target, next, run);
            } else {
                for (int i = 0; i < run; i++) {
                    target[next + i] = (byte) whole(0, 0xff, i);
                }
            }
            position += run;
            next += run;
        }
    }

    /**
     * Reads the next values as 32-bit integers.
     *
     * @param target receives them; unsigned ones above 2³¹ − 1 come out negative
     * @param from where the first goes
     * @param n how many, at most as many as are left
     * @throws Hdf5Exception if one does not fit 32 bits, or they are damaged or no whole numbers
     * @throws IOException if the file cannot be read
     */
    public void read(int[] target, int from, int n) throws IOException {
        int next = from;
        while (next < from + n) {
            int run = run(from + n - next);
            if (type.bytes() == 4 && type.kind() == StoredType.Kind.INTEGER) {
                segment.asIntBuffer().get(target, next, run);
                segment.position(segment.position() + 4 * run);
            } else {
                for (int i = 0; i < run; i++) {
                    target[next + i] = (int) whole(Integer.MIN_VALUE, 0xffffffffL, i);
                }
            }
            position += run;
            next += run;
        }
    }

    /**
     * Reads the next values as 64-bit integers.
     *
     * @param target receives them
     * @param from where the first goes
     * @param n how many, at most as many as are left
     * @throws Hdf5Exception if one is above 2⁶³ − 1, or they are damaged or no whole numbers
     * @throws IOException if the file cannot be read
     */
    public void read(long[] target, int from, int n) throws IOException {
        int next = from;
        while (next < from + n) {
            int run = run(from + n - next);
            if (type.bytes() == 8 && type.signed() && type.kind() == StoredType.Kind.INTEGER) {
                segment.asLongBuffer().get(target, next, run);
                segment.position(segment.position() + 8 * run);
            } else {
                for (int i = 0; i < run; i++) {
                    target[next + i] = whole(Long.MIN_VALUE, Long.MAX_VALUE, i);
                }
            }
            position += run;
            next += run;
        }
    }

    /**
     * Reads the next values as single-precision numbers, rounded to the nearest.
     *
     * @param target receives them
     * @param from where the first goes
     * @param n how many, at most as many as are left
     * @throws Hdf5Exception if they are damaged
     * @throws IOException if the file cannot be read
     */
    public void read(float[] target, int from, int n) throws IOException {
        int next = from;
        while (next < from + n) {
            int run = run(from + n - next);
            if (type.bytes() == 4 && type.kind() == StoredType.Kind.REAL) {
                segment.asFloatBuffer().get(target, next, run);
                segment.position(segment.position() + 4 * run);
            } else {
                for (int i = 0; i < run; i++) {
                    target[next + i] = (float) real(i);
                }
            }
            position += run;
            next += run;
        }
    }

    /**
     * Reads the next values as double-precision numbers.
     *
     * @param target receives them
     * @param from where the first goes
     * @param n how many, at most as many as are left
     * @throws Hdf5Exception if they are damaged
     * @throws IOException if the file cannot be read
     */
    public void read(double[] target, int from, int n) throws IOException {
        int next = from;
        while (next < from + n) {
            int run = run(from + n - next);
            boolean single = type.bytes() == 4 && type.kind() == StoredType.Kind.REAL;
            for (int i = 0; i < run; i++) {
                target[next + i] = single ? segment.getFloat() : real(i);
            }
            position += run;
            next += run;
        }
    }

    /** The next value, whole or of double precision. */
    private double real(int ahead) throws Hdf5Exception {
        return type.kind() == StoredType.Kind.REAL ? segment.getDouble() : whole(Long.MIN_VALUE, Long.MAX_VALUE, ahead);
    }

    private long whole(long low, long high, int ahead) throws Hdf5Exception {
        if (type.kind() != StoredType.Kind.INTEGER) {
            throw file.unsupported(place, "expected whole numbers, found " + type);
        }
        long value = switch (type.bytes()) {
            case 1 -> type.signed() ? segment.get() : segment.get() & 0xff;
            case 2 -> type.signed() ? segment.getShort() : segment.getShort() & 0xffff;
            case 4 -> type.signed() ? segment.getInt() : segment.getInt() & 0xffffffffL;
            default -> segment.getLong();
        };
        boolean tooLarge = type.bytes() == 8 && !type.signed() && value < 0;
        if (value < low || value > high || tooLarge) {
            throw new Hdf5Exception(
                    Hdf5Exception.Kind.OUT_OF_RANGE,
                    file.path(),
                    place,
                    "expected at index " + (position + ahead) + " a whole number from " + low + " to " + high
                            + ", found " + (type.signed() ? Long.toString(value) : Long.toUnsignedString(value)));
        }
        return value;
    }

    /** Makes values available and says how many of those wanted can be taken at once. */
    private int run(int wanted) throws IOException {
        if (wanted > count - position) {
            throw new IllegalArgumentException("only " + (count - position) + " values are left, wanted " + wanted);
        }
        if (!segment.hasRemaining()) {
            ByteBuffer next = segments.next();
            if (next == null) {
                throw file.damaged(place, "expected " + count + " values, found " + position);
            }
            segment = littleEndian(next);
            verify();
            segmentsRead++;
        }
        return Math.min(wanted, segment.remaining() / type.bytes());
    }

    private void verify() throws Hdf5Exception {
        if (checksums == null) {
            return;
        }
        CRC32C crc = new CRC32C();
        crc.update(segment.duplicate());
        int expected = checksums[segmentsRead];
        if (expected != (int) crc.getValue()) {
            throw file.damaged(
                    place,
                    String.format(
                            "expected CRC-32C %08x for the chunk at index %d, found %08x",
                            expected, position, crc.getValue()));
        }
    }

    private ByteBuffer littleEndian(ByteBuffer values) {
        values.order(ByteOrder.LITTLE_ENDIAN);
        if (!type.bigEndian() || type.bytes() == 1) {
            return values;
        }
        ByteBuffer turned = Messages.buffer(values.remaining());
        int last = type.bytes() - 1;
        for (int i = values.position(); i < values.limit(); i += type.bytes()) {
            for (int place = last; place >= 0; place--) {
                turned.put(values.get(i + place));
            }
        }
        return turned.flip();
    }
}
