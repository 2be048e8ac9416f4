package org.raysheaf.io.hdf5;

import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;

/** Reads the little-endian fields of a structure one after another; running over its end means damage. Not safe for several threads. */
final class Fields {
    private final FileBytes file;
    private final String place;
    private final ByteBuffer bytes;

    Fields(FileBytes file, String place, ByteBuffer bytes) {
        this.file = file;
        this.place = place;
        this.bytes = bytes.order(ByteOrder.LITTLE_ENDIAN);
    }

    private void require(long count) throws Hdf5Exception {
        if (count < 0 || count > bytes.remaining()) {
            throw damaged("expected a field of " + count + " bytes, found only " + bytes.remaining() + " more");
        }
    }

    int u8() throws Hdf5Exception {
        require(1);
        return bytes.get() & 0xff;
    }

    int u16() throws Hdf5Exception {
        require(2);
        return bytes.getShort() & 0xffff;
    }

    long u32() throws Hdf5Exception {
        require(4);
        return bytes.getInt() & 0xffffffffL;
    }

    /** A 64-bit address or length; values above 2⁶³ − 1 come out negative. */
    long i64() throws Hdf5Exception {
        require(8);
        return bytes.getLong();
    }

    /** An unsigned number of 1, 2, 4 or 8 bytes. */
    long unsigned(int size) throws Hdf5Exception {
        return switch (size) {
            case 1 -> u8();
            case 2 -> u16();
            case 4 -> u32();
            case 8 -> i64();
            default -> throw damaged("expected a number of 1, 2, 4 or 8 bytes, found " + size);
        };
    }

    void skip(long count) throws Hdf5Exception {
        require(count);
        bytes.position(bytes.position() + (int) count);
    }

    /** Splits off the next bytes as fields of their own. */
    Fields take(long count, String name) throws Hdf5Exception {
        require(count);
        ByteBuffer part = bytes.slice(bytes.position(), (int) count);
        skip(count);
        return new Fields(file, name, part);
    }

    byte[] bytes(long count) throws Hdf5Exception {
        require(count);
        byte[] copy = new byte[(int) count];
        bytes.get(copy);
        return copy;
    }

    /** The next bytes as text, up to the first zero. */
    String text(long count) throws Hdf5Exception {
        byte[] utf8 = bytes(count);
        int length = 0;
        while (length < utf8.length && utf8[length] != 0) {
            length++;
        }
        return new String(utf8, 0, length, StandardCharsets.UTF_8);
    }

    void signature(String expected) throws Hdf5Exception {
        String found = new String(bytes(expected.length()), StandardCharsets.ISO_8859_1);
        if (!found.equals(expected)) {
            throw damaged("expected the mark \"" + expected + "\", found other bytes");
        }
    }

    /** Requires the last four bytes of the whole structure to be the checksum of all before. */
    void requireChecksum() throws Hdf5Exception {
        int covered = bytes.capacity() - 4;
        if (covered < 0) {
            throw damaged("expected a checksum, found the end");
        }
        int expected = Lookup3.hash(bytes, covered);
        int found = bytes.getInt(covered);
        if (expected != found) {
            throw damaged(String.format("expected checksum %08x, found %08x", expected, found));
        }
    }

    /** The same fields, to be read again from the first. */
    Fields fromStart() {
        return new Fields(file, place, bytes.duplicate().rewind());
    }

    /** What has not been read yet, to be looked at without reading it. */
    Fields rest() {
        return new Fields(file, place, bytes.slice());
    }

    int position() {
        return bytes.position();
    }

    int remaining() {
        return bytes.remaining();
    }

    String place() {
        return place;
    }

    FileBytes file() {
        return file;
    }

    Hdf5Exception damaged(String trouble) {
        return file.damaged(place, trouble);
    }

    Hdf5Exception unsupported(String trouble) {
        return file.unsupported(place, trouble);
    }
}
