package org.raysheaf.io.records;

/** A field of binary records: where its bits are, how they are a number, and the column that receives it. One thread. */
final class BitField {
    private final BitPlace place;
    private final BinaryFormat.Coding number;
    private final Column column;
    private final long[] scratch;

    BitField(BitPlace place, BinaryFormat.Coding number, Column column) {
        this.place = place;
        this.number = number;
        this.column = column;
        this.scratch = column.whole() ? column.longs() : new long[FieldBlock.CAPACITY];
    }

    Column column() {
        return column;
    }

    /** Fills the first entries of the column. */
    void fill(byte[] buffer, int[] starts, int count) {
        place.readAll(buffer, starts, count, scratch);
        int unused = 64 - place.bits();
        switch (number) {
            case UNSIGNED -> {}
            case SIGNED -> {
                for (int i = 0; i < count; i++) {
                    scratch[i] = (scratch[i] << unused) >> unused;
                }
            }
            case FLOAT -> {
                floats(count);
                return;
            }
        }
        if (!column.whole()) {
            double[] to = column.doubles();
            for (int i = 0; i < count; i++) {
                to[i] = scratch[i];
            }
        }
    }

    private void floats(int count) {
        double[] to = column.doubles();
        if (place.bits() == 32) {
            for (int i = 0; i < count; i++) {
                to[i] = Float.intBitsToFloat((int) scratch[i]);
            }
        } else {
            for (int i = 0; i < count; i++) {
                to[i] = Double.longBitsToDouble(scratch[i]);
            }
        }
    }
}
