package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.util.Arrays;

/**
 * The start of an HDF5 file: says where the file ends and where its root group is. Versions 0 and 1 have no checksum, 2 and 3 have.
 *
 * @param rootAddress address of the root group's header
 */
record Superblock(long rootAddress) {
    private static final int ADDRESS_BYTES = 8;

    static byte[] signature() {
        return new byte[] {(byte) 0x89, 'H', 'D', 'F', '\r', '\n', 0x1a, '\n'};
    }

    static Superblock read(FileBytes file) throws IOException {
        String place = "superblock";
        long known = Math.min(file.size(), 9);
        byte[] start = file.read(0, known, place).bytes(known);
        byte[] signature = signature();
        if (!Arrays.equals(start, 0, Math.min(start.length, 8), signature, 0, Math.min(start.length, 8))
                || start.length == 0) {
            throw new Hdf5Exception(
                    Hdf5Exception.Kind.NOT_HDF5,
                    file.path(),
                    "",
                    "expected an HDF5 file, found other bytes at its start; is this the right file?");
        }
        if (start.length < 9) {
            throw truncated(file, "more than 8");
        }
        int version = start[8];
        return switch (version) {
            case 0, 1 -> readOld(file, version);
            case 2, 3 -> readNew(file);
            default -> throw file.unsupported(place, "expected version 0 to 3, found " + version);
        };
    }

    private static Superblock readOld(FileBytes file, int version) throws IOException {
        int size = version == 0 ? 96 : 100;
        if (file.size() < size) {
            throw truncated(file, Integer.toString(size));
        }
        Fields fields = file.read(0, size, "superblock");
        fields.skip(13);
        requireWideAddresses(fields, fields.u8(), fields.u8());
        fields.skip(version == 0 ? 9 : 13);
        long base = fields.i64();
        fields.skip(8);
        long end = fields.i64();
        fields.skip(8 + 8);
        return checked(fields, base, end, fields.i64());
    }

    private static Superblock readNew(FileBytes file) throws IOException {
        if (file.size() < 48) {
            throw truncated(file, "48");
        }
        Fields fields = file.read(0, 48, "superblock");
        fields.requireChecksum();
        fields.skip(9);
        requireWideAddresses(fields, fields.u8(), fields.u8());
        fields.skip(1);
        long base = fields.i64();
        fields.skip(8);
        long end = fields.i64();
        return checked(fields, base, end, fields.i64());
    }

    private static void requireWideAddresses(Fields fields, int addressBytes, int lengthBytes) throws Hdf5Exception {
        if (addressBytes != ADDRESS_BYTES || lengthBytes != ADDRESS_BYTES) {
            throw fields.unsupported(
                    "expected addresses and lengths of 8 bytes, found " + addressBytes + " and " + lengthBytes);
        }
    }

    private static Superblock checked(Fields fields, long base, long end, long root) throws Hdf5Exception {
        FileBytes file = fields.file();
        if (base != file.start()) {
            throw fields.unsupported("expected the base address " + file.start() + ", found " + base);
        }
        if (end - base < fields.position()) {
            throw fields.damaged("expected an end of the file behind the superblock, found " + end);
        }
        if (end - base > file.size()) {
            throw truncated(file, Long.toString(end));
        }
        file.requireInside(root, 1, "root group");
        return new Superblock(root);
    }

    private static Hdf5Exception truncated(FileBytes file, String expected) {
        return new Hdf5Exception(
                Hdf5Exception.Kind.TRUNCATED,
                file.path(),
                "",
                "expected " + expected + " bytes, found only " + file.size()
                        + "; the copy or the recording was cut short, take the file again from its source");
    }
}
