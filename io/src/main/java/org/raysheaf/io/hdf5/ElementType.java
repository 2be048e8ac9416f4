package org.raysheaf.io.hdf5;

/** Types of the numbers that we write, all little-endian. */
public enum ElementType {
    /** Unsigned 8-bit integer. */
    UINT8(1),
    /** Unsigned 32-bit integer. */
    UINT32(4),
    /** Signed 64-bit integer. */
    INT64(8),
    /** IEEE 754 single precision. */
    FLOAT32(4),
    /** IEEE 754 double precision. */
    FLOAT64(8);

    private final int bytes;

    ElementType(int bytes) {
        this.bytes = bytes;
    }

    /**
     * Size of one number.
     *
     * @return the size (bytes)
     */
    public int bytes() {
        return bytes;
    }
}
