package org.raysheaf.io.hdf5;

import java.util.ArrayList;
import java.util.List;

/**
 * A member of the compound values of a dataset.
 *
 * @param name its name
 * @param offset where it begins in a value (bytes)
 * @param type its type
 */
public record Member(String name, int offset, StoredType type) {
    private static final int COMPOUND = 6;
    private static final int LARGEST_COUNT = 4096;

    /**
     * Reads the members of a compound type; the sizes of other types are needed to find the next member, so a member of a type that has parts of its own
     * (an array, another compound) is refused in the versions of the format where it cannot be skipped.
     *
     * <pre>
     * version 1   name, padded to 8 bytes; offset, 4; dimensions, 28 bytes; type
     * version 2   name, padded to 8 bytes; offset, 4; type
     * version 3   name with closing zero; offset, 1 to 4 bytes as the size of a value needs; type
     * </pre>
     */
    static List<Member> read(Fields fields) throws Hdf5Exception {
        int first = fields.u8();
        int version = first >> 4;
        if ((first & 0x0f) != COMPOUND) {
            return List.of();
        }
        int count = fields.u16();
        fields.skip(1);
        long size = fields.u32();
        if (version < 1 || version > 3 || count > LARGEST_COUNT) {
            throw fields.damaged("expected a compound type of version 1 to 3 with at most " + LARGEST_COUNT
                    + " members, found version " + version + " with " + count);
        }
        int offsetBytes = version < 3 ? 4 : size < 1L << 8 ? 1 : size < 1L << 16 ? 2 : size < 1L << 24 ? 3 : 4;
        List<Member> members = new ArrayList<>();
        for (int i = 0; i < count; i++) {
            String name = name(fields, version < 3);
            long offset = 0;
            for (int b = 0; b < offsetBytes; b++) {
                offset |= (long) fields.u8() << (8 * b);
            }
            fields.skip(version == 1 ? 28 : 0);
            StoredType type = type(fields, name);
            if (offset + type.bytes() > size) {
                throw fields.damaged("expected member " + name + " inside values of " + size + " bytes, found it at "
                        + offset + " with " + type.bytes());
            }
            members.add(new Member(name, (int) offset, type));
        }
        return members;
    }

    private static String name(Fields fields, boolean padded) throws Hdf5Exception {
        StringBuilder name = new StringBuilder();
        int length = 1;
        for (int c = fields.u8(); c != 0; c = fields.u8()) {
            name.append((char) c);
            length++;
        }
        fields.skip(padded ? (8 - length % 8) % 8 : 0);
        return name.toString();
    }

    /** A type, and past it: whole and real numbers and texts, which have no parts, and enumerations of whole numbers. */
    private static StoredType type(Fields fields, String name) throws Hdf5Exception {
        Fields ahead = fields.rest();
        int first = ahead.u8();
        int bits = ahead.u16();
        int typeClass = first & 0x0f;
        StoredType type = StoredType.read(fields.rest());
        switch (typeClass) {
            case 0 -> fields.skip(8 + 4);
            case 1 -> fields.skip(8 + 12);
            case 3 -> fields.skip(8);
            case 8 -> {
                StoredType base = StoredType.read(skipped(fields.rest(), 8));
                fields.skip(8 + 8 + 4);
                for (int i = 0; i < bits; i++) {
                    name(fields, first >> 4 < 3);
                }
                fields.skip((long) bits * base.bytes());
            }
            default ->
                throw fields.unsupported("has the member " + name + " of a type with parts (class " + typeClass
                        + "), expected numbers; store it as a dataset of its own");
        }
        return type;
    }

    private static Fields skipped(Fields fields, int bytes) throws Hdf5Exception {
        fields.skip(bytes);
        return fields;
    }
}
