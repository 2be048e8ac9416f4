package org.raysheaf.io.hdf5;

/** The shape of a dataset or attribute. Immutable. */
final class Dataspace {
    private static final int LARGEST_RANK = 32;
    private static final int NULL_SPACE = 2;

    private final long[] shape;
    private final long count;

    private Dataspace(long[] shape, long count) {
        this.shape = shape;
        this.count = count;
    }

    static Dataspace read(Fields fields) throws Hdf5Exception {
        int version = fields.u8();
        int rank = fields.u8();
        fields.skip(1);
        int type = fields.u8();
        if (version < 1 || version > 2 || rank > LARGEST_RANK) {
            throw fields.damaged(
                    "expected a shape of version 1 or 2 and rank 0 to 32, found " + version + " and " + rank);
        }
        fields.skip(version == 1 ? 4 : 0);
        long[] shape = new long[rank];
        long count = version == 2 && type == NULL_SPACE ? 0 : 1;
        for (int i = 0; i < rank; i++) {
            shape[i] = fields.i64();
            boolean fits = shape[i] >= 0 && (shape[i] == 0 || count <= Long.MAX_VALUE / shape[i]);
            if (!fits) {
                throw fields.damaged(
                        "expected a possible shape, found an extent of " + Long.toUnsignedString(shape[i]));
            }
            count *= shape[i];
        }
        return new Dataspace(shape, count);
    }

    long[] shape() {
        return shape.clone();
    }

    /** The number of values. */
    long count() {
        return count;
    }
}
