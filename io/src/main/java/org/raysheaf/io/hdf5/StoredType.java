package org.raysheaf.io.hdf5;

/**
 * The type of the values of a dataset or attribute.
 *
 * @param kind what a value is
 * @param bytes size of one value (bytes)
 * @param signed whether an integer has a sign
 * @param bigEndian whether the most significant byte comes first
 */
public record StoredType(Kind kind, int bytes, boolean signed, boolean bigEndian) {
    /** What a value is. */
    public enum Kind {
        /** A whole number of 1, 2, 4 or 8 bytes; also truth values and other enumerations. */
        INTEGER,
        /** An IEEE 754 number of 4 or 8 bytes. */
        REAL,
        /** A text of fixed length. */
        TEXT,
        /** A text of any length, kept elsewhere in the file. */
        LONG_TEXT,
        /** Anything else. */
        OTHER
    }

    private static final int ENUMERATION = 8;
    private static final int VARIABLE_LENGTH = 9;

    static StoredType read(Fields fields) throws Hdf5Exception {
        int first = fields.u8();
        int bits = fields.u8();
        fields.skip(2);
        long size = fields.u32();
        if (size == 0 || size > Integer.MAX_VALUE) {
            throw fields.damaged("expected a value size of 1 byte or more, found " + size);
        }
        int bytes = (int) size;
        boolean bigEndian = (bits & 1) != 0;
        return switch (first & 0x0f) {
            case 0 -> integer(fields, bytes, (bits & 8) != 0, bigEndian);
            case 1 -> real(fields, bytes, bigEndian, (bits & 0x40) != 0);
            case 3 -> new StoredType(Kind.TEXT, bytes, false, false);
            case ENUMERATION -> enumeration(fields, bytes);
            case VARIABLE_LENGTH ->
                new StoredType((bits & 0x0f) == 1 ? Kind.LONG_TEXT : Kind.OTHER, bytes, false, false);
            default -> other(bytes);
        };
    }

    private static StoredType other(int bytes) {
        return new StoredType(Kind.OTHER, bytes, false, false);
    }

    private static StoredType integer(Fields fields, int bytes, boolean signed, boolean bigEndian)
            throws Hdf5Exception {
        boolean whole = fields.u16() == 0 && fields.u16() == 8L * bytes;
        boolean known = bytes == 1 || bytes == 2 || bytes == 4 || bytes == 8;
        return whole && known ? new StoredType(Kind.INTEGER, bytes, signed, bigEndian) : other(bytes);
    }

    private static StoredType real(Fields fields, int bytes, boolean bigEndian, boolean vax) throws Hdf5Exception {
        boolean whole = fields.u16() == 0 && fields.u16() == 8L * bytes;
        int exponentPlace = fields.u8();
        int exponentBits = fields.u8();
        boolean mantissaFirst = fields.u8() == 0 && fields.u8() == exponentPlace;
        long bias = fields.u32();
        boolean single = bytes == 4 && exponentPlace == 23 && exponentBits == 8 && bias == 127;
        boolean twice = bytes == 8 && exponentPlace == 52 && exponentBits == 11 && bias == 1023;
        boolean ieee = whole && mantissaFirst && !vax && (single || twice);
        return ieee ? new StoredType(Kind.REAL, bytes, true, bigEndian) : other(bytes);
    }

    private static StoredType enumeration(Fields fields, int bytes) throws Hdf5Exception {
        int first = fields.u8();
        int bits = fields.u8();
        fields.skip(2);
        boolean integerInside = (first & 0x0f) == 0 && fields.u32() == bytes;
        return integerInside ? integer(fields, bytes, (bits & 8) != 0, (bits & 1) != 0) : other(bytes);
    }

    /**
     * Whether values are numbers.
     *
     * @return true for whole and real numbers
     */
    public boolean number() {
        return kind == Kind.INTEGER || kind == Kind.REAL;
    }

    @Override
    public String toString() {
        return switch (kind) {
            case INTEGER -> (signed ? "int" : "uint") + 8 * bytes;
            case REAL -> "float" + 8 * bytes;
            case TEXT, LONG_TEXT -> "text";
            case OTHER -> "another type of " + bytes + " bytes";
        };
    }
}
