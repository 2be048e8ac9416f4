package org.raysheaf.geometry.event;

/** Element types of the columns of a list. */
public enum ColumnType {
    /** Unsigned 8-bit integer, a {@code byte[]} in memory. */
    UINT8(1),
    /** Unsigned 32-bit integer, an {@code int[]} in memory; values above 2³¹ − 1 do not occur in a sound list. */
    UINT32(4),
    /** Signed 64-bit integer, a {@code long[]} in memory. */
    INT64(8),
    /** IEEE 754 single precision, a {@code float[]} in memory. */
    FLOAT32(4);

    private final int bytes;

    ColumnType(int bytes) {
        this.bytes = bytes;
    }

    /**
     * Size of one value.
     *
     * @return the size (bytes)
     */
    public int bytes() {
        return bytes;
    }
}
