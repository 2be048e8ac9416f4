package org.raysheaf.io.overview;

import java.util.Arrays;

/** Counts over time in bins that double their width as time goes on, so that any length fits. One thread. */
final class TimeCourse {
    private static final int BINS = 512;
    private static final long FIRST_STEP_PS = 1_000_000_000; // 1 ms

    private final long[] counts = new long[BINS];
    private long stepPs = FIRST_STEP_PS;

    void add(long timePs) {
        long bin = timePs / stepPs;
        while (bin >= BINS) {
            for (int i = 0; i < BINS / 2; i++) {
                counts[i] = counts[2 * i] + counts[2 * i + 1];
            }
            Arrays.fill(counts, BINS / 2, BINS, 0);
            stepPs *= 2;
            bin = timePs / stepPs;
        }
        counts[(int) Math.max(0, bin)]++;
    }

    long[] counts() {
        return counts;
    }

    long stepPs() {
        return stepPs;
    }
}
