package org.raysheaf.engine.ray;

import java.util.Arrays;

/**
 * The order in which rays are visited. Neighbours in this order run through nearly the same voxels, so most of what a ray touches is
 * still in the processor's cache from the ray before; this is worth more than anything else in the engine.
 *
 * <p>A ray is a dominant axis and a point in four dimensions: its two slopes, and where it crosses the middle plane of the lattice. The
 * bits of the four are interleaved (Morton order) below the axis, so rays that share the first bits of their code are near each other
 * along their whole length.
 */
final class RayOrder {
    /** Bits per coordinate; four of them and the axis fill 30 of 32 bits. Finer cells gain nothing that could be measured. */
    private static final int BITS = 7;

    /** Bits that one round of sorting looks at: few enough for its counters to stay in the nearest cache. */
    private static final int DIGIT = 11;

    private RayOrder() {}

    /**
     * What to sort for an event: its code above its number.
     *
     * @param walks the rays of all events
     * @param event number of the event
     * @param raysPerEvent rays of each event
     * @return the code of the event's first ray that visits any plane, times 2³², plus the number of the event
     */
    static long entry(Walks walks, int event, int raysPerEvent) {
        int ray = event * raysPerEvent;
        int last = ray + raysPerEvent - 1;
        while (ray < last && walks.planes(ray) == 0) {
            ray++;
        }
        return ((long) code(walks, ray) << 32) | event;
    }

    private static int code(Walks walks, int k) {
        Lattice lattice = walks.lattice();
        int axis = walks.axis(k);
        float toMiddle = 0.5f * lattice.planes(axis) - walks.first(k);
        float u = (walks.u[k] + toMiddle * walks.du[k]) / lattice.planes(axis == 0 ? 1 : 0);
        float v = (walks.v[k] + toMiddle * walks.dv[k]) / lattice.planes(axis == 2 ? 1 : 2);
        // Slopes reach from -1 to 1; an oblique ray may cross the middle plane up to about half a grid outside.
        int slopes = (spread(cell(0.5f + 0.5f * walks.du[k])) << 1) | spread(cell(0.5f + 0.5f * walks.dv[k]));
        int places = (spread(cell(0.25f + 0.5f * v)) << 1) | spread(cell(0.25f + 0.5f * u));
        return (axis << (4 * BITS)) | (slopes << 2) | places;
    }

    private static int cell(float share) {
        int cells = 1 << BITS;
        return Math.max(0, Math.min(cells - 1, (int) (share * cells)));
    }

    /** Leaves room for three more bits above every bit. */
    private static int spread(int cell) {
        int spread = 0;
        for (int bit = 0; bit < BITS; bit++) {
            spread |= ((cell >> bit) & 1) << (4 * bit);
        }
        return spread;
    }

    /**
     * Sorts by the upper half of each entry, stably, least digit first.
     *
     * @param entries a code in the upper 32 bits, anything in the lower
     * @param from first entry
     * @param to after the last entry
     */
    static void sort(long[] entries, int from, int to) {
        long[] source = Arrays.copyOfRange(entries, from, to);
        long[] target = new long[source.length];
        for (int shift = Integer.SIZE; shift < Long.SIZE; shift += DIGIT) {
            deal(source, target, shift);
            long[] swap = source;
            source = target;
            target = swap;
        }
        System.arraycopy(source, 0, entries, from, source.length);
    }

    /** Copies entries in the order of one digit, those of equal digit in the order in which they stand. */
    private static void deal(long[] source, long[] target, int shift) {
        int mask = (1 << DIGIT) - 1;
        int[] starts = new int[mask + 2];
        for (long entry : source) {
            starts[((int) (entry >>> shift) & mask) + 1]++;
        }
        for (int digit = 0; digit < mask; digit++) {
            starts[digit + 1] += starts[digit];
        }
        for (long entry : source) {
            target[starts[(int) (entry >>> shift) & mask]++] = entry;
        }
    }
}
