package org.raysheaf.io.hdf5;

import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.zip.DataFormatException;
import java.util.zip.Inflater;

/** The filters that a chunk went through when it was written, and how to undo them. Safe for use by several threads. */
final class Filters {
    /** No filter at all. */
    static final Filters NONE = new Filters(List.of());

    /** The number under which h5py registered LZF. */
    private static final int LZF = 32000;

    /** Deflate never packs more than this into one byte. */
    private static final int LARGEST_RATIO = 1032;

    private final List<Filter> filters;

    /** One filter: which it is, and for shuffle the size of an element. */
    private record Filter(int id, int elementBytes) {}

    private Filters(List<Filter> filters) {
        this.filters = filters;
    }

    static Filters read(Fields fields, StoredType type) throws Hdf5Exception {
        int version = fields.u8();
        int count = fields.u8();
        if (version < 1 || version > 2) {
            throw fields.damaged("expected filters of version 1 or 2, found " + version);
        }
        fields.skip(version == 1 ? 6 : 0);
        List<Filter> filters = new ArrayList<>();
        for (int i = 0; i < count; i++) {
            int id = fields.u16();
            int nameBytes = version == 1 || id >= 256 ? fields.u16() : 0;
            fields.skip(2); // whether it may be left out: the chunk says whether it was
            int settings = fields.u16();
            fields.skip(nameBytes);
            fields.skip(4L * settings + (version == 1 && settings % 2 != 0 ? 4 : 0));
            if (id != Messages.DEFLATE && id != Messages.SHUFFLE && id != Messages.FLETCHER32 && id != LZF) {
                throw fields.unsupported("is stored with filter " + id
                        + ", expected none, gzip (deflate), shuffle, lzf or fletcher32; write it with one of these");
            }
            filters.add(new Filter(id, type.bytes()));
        }
        return new Filters(List.copyOf(filters));
    }

    boolean isEmpty() {
        return filters.isEmpty();
    }

    /**
     * Undoes the filters of one chunk.
     *
     * @param stored the bytes as stored
     * @param leftOut bit i is set if filter i was left out for this chunk
     * @param expected the size of the chunk (bytes)
     * @param file the file, for messages
     * @param place the chunk, for messages
     * @return its bytes, exactly as many as expected
     * @throws Hdf5Exception if that does not work out
     */
    byte[] decode(byte[] stored, long leftOut, int expected, FileBytes file, String place) throws Hdf5Exception {
        byte[] bytes = stored;
        for (int i = filters.size() - 1; i >= 0; i--) {
            Filter filter = filters.get(i);
            if ((leftOut >> i & 1) == 0) {
                bytes = switch (filter.id) {
                    case Messages.DEFLATE -> inflate(bytes, expected + checksumsBefore(i, leftOut), file, place);
                    case LZF -> unpack(bytes, expected + checksumsBefore(i, leftOut), file, place);
                    case Messages.SHUFFLE -> unshuffle(bytes, filter.elementBytes);
                    default -> withoutChecksum(bytes, file, place);
                };
            }
        }
        if (bytes.length != expected) {
            throw file.damaged(place, "expected a chunk of " + expected + " bytes, found " + bytes.length);
        }
        return bytes;
    }

    private int checksumsBefore(int end, long leftOut) {
        int bytes = 0;
        for (int i = 0; i < end; i++) {
            bytes += filters.get(i).id == Messages.FLETCHER32 && (leftOut >> i & 1) == 0 ? 4 : 0;
        }
        return bytes;
    }

    private static byte[] unpack(byte[] stored, int expected, FileBytes file, String place) throws Hdf5Exception {
        byte[] bytes = Lzf.decode(stored, expected);
        if (bytes.length != expected) {
            throw file.damaged(place, "expected " + expected + " bytes when uncompressed, found unsound lzf data");
        }
        return bytes;
    }

    private static byte[] inflate(byte[] stored, int expected, FileBytes file, String place) throws Hdf5Exception {
        if (expected > (long) LARGEST_RATIO * stored.length) {
            throw file.damaged(
                    place,
                    "expected a chunk of " + expected + " bytes, found only " + stored.length + " compressed bytes");
        }
        Inflater inflater = new Inflater();
        try {
            inflater.setInput(stored);
            byte[] bytes = new byte[expected + 1]; // one more, to notice data that does not end
            int length = 0;
            int more = inflater.inflate(bytes);
            while (more > 0) {
                length += more;
                more = inflater.inflate(bytes, length, bytes.length - length);
            }
            if (length != expected || !inflater.finished()) {
                throw file.damaged(place, "expected " + expected + " bytes when uncompressed, found " + length);
            }
            return Arrays.copyOf(bytes, expected);
        } catch (DataFormatException e) {
            throw file.damaged(place, "expected compressed data, found " + e.getMessage());
        } finally {
            inflater.end();
        }
    }

    private static byte[] unshuffle(byte[] shuffled, int elementBytes) {
        int count = shuffled.length / elementBytes;
        byte[] bytes = shuffled.clone(); // bytes beyond the last whole element were not shuffled
        for (int place = 0; place < elementBytes; place++) {
            int from = place * count;
            int to = place;
            for (int i = 0; i < count; i++, to += elementBytes) {
                bytes[to] = shuffled[from + i];
            }
        }
        return bytes;
    }

    private static byte[] withoutChecksum(byte[] bytes, FileBytes file, String place) throws Hdf5Exception {
        int length = bytes.length - 4;
        if (length < 0) {
            throw file.damaged(place, "expected a checksum, found the end");
        }
        int sum = fletcher32(bytes, length);
        int found = ByteBuffer.wrap(bytes).order(ByteOrder.LITTLE_ENDIAN).getInt(length);
        if (found != sum) {
            throw file.damaged(place, String.format("expected the Fletcher checksum %08x, found %08x", sum, found));
        }
        return Arrays.copyOf(bytes, length);
    }

    /** Fletcher's checksum over 16-bit big-endian words (Fletcher 1982, IEEE Trans. Commun. 30:247), an odd last byte being a high byte. */
    private static int fletcher32(byte[] bytes, int length) {
        long low = 0;
        long high = 0;
        for (int i = 0; i < length; i += 2) {
            int word = (bytes[i] & 0xff) << 8 | (i + 1 < length ? bytes[i + 1] & 0xff : 0);
            low += word;
            high += low;
            if (i % 512 == 510) { // long before either can overflow
                low = fold(low);
                high = fold(high);
            }
        }
        return (int) (fold(high) << 16 | fold(low));
    }

    /** Reduces to 16 bits; a sum that is not zero never becomes zero. */
    private static long fold(long sum) {
        return sum == 0 ? 0 : (sum - 1) % 0xffff + 1;
    }
}
