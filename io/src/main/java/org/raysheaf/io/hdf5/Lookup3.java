package org.raysheaf.io.hdf5;

import java.nio.ByteBuffer;
import java.nio.ByteOrder;

/**
 * The checksum that HDF5 puts at the end of its newer structures: the hash function {@code hashlittle} of Bob Jenkins, "lookup3"
 * (2006, public domain), with initial value 0. A checksum against accident, not against intent.
 */
final class Lookup3 {
    private static final int BLOCK = 12;

    private Lookup3() {}

    /**
     * Hashes the first bytes of a buffer.
     *
     * @param bytes holds the data, from index 0 on; its position is left alone
     * @param length how many of them count
     * @return the checksum
     */
    static int hash(ByteBuffer bytes, int length) {
        int a = 0xdeadbeef + length;
        int b = a;
        int c = a;
        if (length == 0) {
            return c;
        }
        // Zeros after the end do not change the sum, so the last block needs no special case.
        int blocks = (length + BLOCK - 1) / BLOCK;
        ByteBuffer words = ByteBuffer.allocate(blocks * BLOCK).order(ByteOrder.LITTLE_ENDIAN);
        words.put(bytes.slice(0, length)).rewind();
        for (int block = 1; block < blocks; block++) {
            a += words.getInt();
            b += words.getInt();
            c += words.getInt();
            a = (a - c) ^ Integer.rotateLeft(c, 4);
            c += b;
            b = (b - a) ^ Integer.rotateLeft(a, 6);
            a += c;
            c = (c - b) ^ Integer.rotateLeft(b, 8);
            b += a;
            a = (a - c) ^ Integer.rotateLeft(c, 16);
            c += b;
            b = (b - a) ^ Integer.rotateLeft(a, 19);
            a += c;
            c = (c - b) ^ Integer.rotateLeft(b, 4);
            b += a;
        }
        a += words.getInt();
        b += words.getInt();
        c += words.getInt();
        c = (c ^ b) - Integer.rotateLeft(b, 14);
        a = (a ^ c) - Integer.rotateLeft(c, 11);
        b = (b ^ a) - Integer.rotateLeft(a, 25);
        c = (c ^ b) - Integer.rotateLeft(b, 16);
        a = (a ^ c) - Integer.rotateLeft(c, 4);
        b = (b ^ a) - Integer.rotateLeft(a, 14);
        c = (c ^ b) - Integer.rotateLeft(b, 24);
        return c;
    }
}
