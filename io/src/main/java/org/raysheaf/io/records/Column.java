package org.raysheaf.io.records;

/**
 * One value of every record of a block: either whole numbers of 64 bits or real numbers. The array is shared and filled again for every block. One
 * thread.
 */
final class Column {
    private final String name;
    private final long[] longs;
    private final double[] doubles;

    private Column(String name, long[] longs, double[] doubles) {
        this.name = name;
        this.longs = longs;
        this.doubles = doubles;
    }

    static Column of(String name, boolean whole) {
        int capacity = FieldBlock.CAPACITY;
        return whole
                ? new Column(name, new long[capacity], new double[0])
                : new Column(name, new long[0], new double[capacity]);
    }

    String name() {
        return name;
    }

    boolean whole() {
        return longs.length > 0;
    }

    /** The whole numbers; empty for a column of real numbers. */
    long[] longs() {
        return longs;
    }

    /** The real numbers; empty for a column of whole numbers. */
    double[] doubles() {
        return doubles;
    }

    /** A value in words. */
    String text(int index) {
        return whole() ? Long.toString(longs[index]) : Double.toString(doubles[index]);
    }
}
