package org.raysheaf.io.hdf5;

import org.jspecify.annotations.Nullable;

/** Where the values of a dataset are: in its header, in one piece, or in chunks. Immutable. */
final class Layout {
    private static final int COMPACT = 0;
    private static final int CONTIGUOUS = 1;
    private static final int CHUNKED = 2;

    private final byte @Nullable [] compact;
    private final long address;
    private final long bytes;
    private final long @Nullable [] chunkShape;

    private Layout(byte @Nullable [] compact, long address, long bytes, long @Nullable [] chunkShape) {
        this.compact = compact;
        this.address = address;
        this.bytes = bytes;
        this.chunkShape = chunkShape;
    }

    static Layout read(Fields fields, int rank, StoredType type) throws Hdf5Exception {
        int version = fields.u8();
        int kind = fields.u8();
        boolean known = version == 3 || (version == 4 && kind != CHUNKED);
        if (!known) {
            throw fields.unsupported("has a layout of version " + version
                    + ", expected version 3; write it without libver=\"latest\", or convert it with h5repack");
        }
        return switch (kind) {
            case COMPACT -> compact(fields.bytes(fields.u16()));
            case CONTIGUOUS -> new Layout(null, fields.i64(), fields.i64(), null);
            case CHUNKED -> chunked(fields, rank, type);
            default ->
                throw fields.unsupported("has a layout of kind " + kind + ", expected compact, contiguous or chunked");
        };
    }

    private static Layout compact(byte[] bytes) {
        return new Layout(bytes, Messages.UNDEFINED, bytes.length, null);
    }

    private static Layout chunked(Fields fields, int rank, StoredType type) throws Hdf5Exception {
        int dimensions = fields.u8();
        long address = fields.i64();
        if (dimensions != rank + 1) {
            throw fields.damaged("expected chunks of rank " + rank + ", found " + (dimensions - 1));
        }
        long[] shape = new long[rank];
        long bytes = type.bytes();
        for (int i = 0; i < rank; i++) {
            shape[i] = fields.u32();
            if (shape[i] == 0 || bytes > Integer.MAX_VALUE / shape[i]) {
                throw fields.damaged("expected chunks of 1 byte to 2 GiB, found an extent of " + shape[i] + " values");
            }
            bytes *= shape[i];
        }
        long elementBytes = fields.u32();
        if (elementBytes != type.bytes()) {
            throw fields.damaged(
                    "expected values of " + type.bytes() + " bytes, found chunks of values of " + elementBytes);
        }
        return new Layout(null, address, bytes, shape);
    }

    boolean chunked() {
        return chunkShape != null;
    }

    /** The values kept in the header, or null. */
    byte @Nullable [] compactBytes() {
        return compact;
    }

    /** Address of the values in one piece, or of the index of chunks. */
    long address() {
        return address;
    }

    /** Size of all values (bytes), or of one chunk before filters. */
    long bytes() {
        return bytes;
    }

    /** Extent of a chunk along every axis; only if chunked. */
    long[] chunkShape() {
        if (chunkShape == null) {
            throw new IllegalStateException("the dataset has no chunks");
        }
        return chunkShape;
    }
}
