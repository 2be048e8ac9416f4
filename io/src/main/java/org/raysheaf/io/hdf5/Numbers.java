package org.raysheaf.io.hdf5;

/** Reads single numbers of any stored type. */
final class Numbers {
    private Numbers() {}

    /** The bits of the next value, least significant first, extended by zeros. */
    private static long bits(Fields data, StoredType type) throws Hdf5Exception {
        long bits = data.unsigned(type.bytes());
        return type.bigEndian() ? Long.reverseBytes(bits) >>> (64 - 8 * type.bytes()) : bits;
    }

    /** The next whole number; unsigned 64-bit values above 2⁶³ − 1 come out negative. */
    static long whole(Fields data, StoredType type) throws Hdf5Exception {
        long bits = bits(data, type);
        int unused = 64 - 8 * type.bytes();
        return type.signed() ? bits << unused >> unused : bits;
    }

    /** The next real number. */
    static double real(Fields data, StoredType type) throws Hdf5Exception {
        long bits = bits(data, type);
        return type.bytes() == 4 ? Float.intBitsToFloat((int) bits) : Double.longBitsToDouble(bits);
    }
}
