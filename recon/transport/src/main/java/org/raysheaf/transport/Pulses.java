package org.raysheaf.transport;

import java.util.Arrays;

/**
 * A growing table of pulses: what one decay leaves in one channel. Columns with a value per pulse; {@link #sort} gives an order in time.
 * Not safe for use by several threads.
 */
final class Pulses {
    /** Columns of {@link #real}. */
    static final int ENERGY = 0;

    static final int LARGEST = 1;
    static final int SUM_U = 2;
    static final int SUM_V = 3;
    static final int SUM_W = 4;
    static final int NORMAL_ENERGY = 5;
    static final int NORMAL_TIME = 6;
    static final int NORMAL_U = 7;
    static final int NORMAL_V = 8;
    static final int NORMAL_W = 9;
    static final int EMISSION = 10;
    static final int REALS = 13;

    private int size;
    long[] timePs;
    int[] channel;
    int[] element;
    long[] decay;
    byte[] objectScatters;
    byte[] detectorScatters;
    byte[] outsideView;
    byte[] source;
    float[][] real = new float[REALS][];
    private int[] order;

    Pulses(int room) {
        timePs = new long[room];
        channel = new int[room];
        element = new int[room];
        decay = new long[room];
        objectScatters = new byte[room];
        detectorScatters = new byte[room];
        outsideView = new byte[room];
        source = new byte[room];
        for (int c = 0; c < REALS; c++) {
            real[c] = new float[room];
        }
        order = new int[room];
    }

    int size() {
        return size;
    }

    void clear() {
        size = 0;
    }

    /** Adds a pulse, its columns to be filled; returns its row. */
    int append() {
        if (size == timePs.length) {
            grow(Math.max(16, size + size / 2));
        }
        return size++;
    }

    private void grow(int room) {
        timePs = Arrays.copyOf(timePs, room);
        channel = Arrays.copyOf(channel, room);
        element = Arrays.copyOf(element, room);
        decay = Arrays.copyOf(decay, room);
        objectScatters = Arrays.copyOf(objectScatters, room);
        detectorScatters = Arrays.copyOf(detectorScatters, room);
        outsideView = Arrays.copyOf(outsideView, room);
        source = Arrays.copyOf(source, room);
        for (int c = 0; c < REALS; c++) {
            real[c] = Arrays.copyOf(real[c], room);
        }
        order = Arrays.copyOf(order, room);
    }

    /** Appends a pulse of another table. */
    void append(Pulses from, int row) {
        int i = append();
        timePs[i] = from.timePs[row];
        channel[i] = from.channel[row];
        element[i] = from.element[row];
        decay[i] = from.decay[row];
        objectScatters[i] = from.objectScatters[row];
        detectorScatters[i] = from.detectorScatters[row];
        outsideView[i] = from.outsideView[row];
        source[i] = from.source[row];
        for (int c = 0; c < REALS; c++) {
            real[c][i] = from.real[c][row];
        }
    }

    /** Puts the rows into order of time. They nearly are already, so insertion takes a step or two for each. */
    void sort() {
        for (int i = 0; i < size; i++) {
            long time = timePs[i];
            int at = i;
            while (at > 0 && timePs[order[at - 1]] > time) {
                order[at] = order[at - 1];
                at--;
            }
            order[at] = i;
        }
    }

    /** The row of the pulse that comes i-th in time, after {@link #sort}. */
    int row(int i) {
        return order[i];
    }
}
