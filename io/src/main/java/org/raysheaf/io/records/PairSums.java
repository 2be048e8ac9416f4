package org.raysheaf.io.records;

import java.util.Arrays;

/** Number and sum of the time differences of every pair of channels that occurred, in a table of open addresses. One thread. */
final class PairSums {
    private static final double FULLEST = 0.6;

    private long[] keys = new long[1 << 12];
    private int[] counts = new int[1 << 12];
    private double[] sums = new double[1 << 12];
    private int size;

    /** Adds the difference t_b − t_a of a pair of channel indices. */
    void add(int a, int b, double difference) {
        if (size > FULLEST * keys.length) {
            grow();
        }
        // Each pair has one entry, the smaller index first.
        long key = a < b ? ((long) a << 32 | b) + 1 : ((long) b << 32 | a) + 1; // 0 means free
        int at = find(key);
        if (keys[at] == 0) {
            keys[at] = key;
            size++;
        }
        counts[at]++;
        sums[at] += a < b ? difference : -difference;
    }

    private int find(long key) {
        long mixed = key * 0x9E3779B97F4A7C15L;
        int mask = keys.length - 1;
        int at = (int) (mixed >>> 40) & mask;
        while (keys[at] != 0 && keys[at] != key) {
            at = at + 1 & mask;
        }
        return at;
    }

    private void grow() {
        long[] oldKeys = keys;
        int[] oldCounts = counts;
        double[] oldSums = sums;
        keys = new long[2 * oldKeys.length];
        counts = new int[keys.length];
        sums = new double[keys.length];
        for (int i = 0; i < oldKeys.length; i++) {
            if (oldKeys[i] != 0) {
                int at = find(oldKeys[i]);
                keys[at] = oldKeys[i];
                counts[at] = oldCounts[i];
                sums[at] = oldSums[i];
            }
        }
    }

    /** Takes a pair: channels, number of differences, their sum. */
    interface Visitor {
        void pair(int a, int b, int count, double sum);
    }

    void forEach(Visitor visitor) {
        for (int i = 0; i < keys.length; i++) {
            if (keys[i] != 0) {
                long key = keys[i] - 1;
                visitor.pair((int) (key >>> 32), (int) key, counts[i], sums[i]);
            }
        }
    }

    void clear() {
        Arrays.fill(keys, 0);
        Arrays.fill(counts, 0);
        Arrays.fill(sums, 0);
        size = 0;
    }
}
