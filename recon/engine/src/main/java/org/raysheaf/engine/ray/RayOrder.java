package org.raysheaf.engine.ray;

import java.util.Arrays;

/**
 * The order in which rays are visited. Neighbours in this order run through nearly the same voxels, so most of what a ray touches is still in
 * the processor's cache from the ray before; this is worth more than anything else in the engine.
 *
 * <p>A ray is a point in four dimensions: for each of the two axes across its dominant axis, where it crosses the middle plane of the lattice and how
 * far it drifts from there to the end. The bits of the four coordinates are interleaved (Morton order) below the dominant axis, so that rays that
 * share a prefix of the code lie close together along all their length. Coordinates along z are cut more coarsely: z runs fastest in
 * memory, and one cache line holds sixteen voxels of it.
 */
final class RayOrder {
    /** Bits of each coordinate; four of them and the axis make 30 bits. */
    private static final int BITS = 7;

    /** Voxels per cell along x and y. */
    private static final float CELL = 1;

    /** Voxels per cell along z. */
    private static final float CELL_Z = 4;

    private static final int DIGIT_BITS = 11;

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
        int a = axis == 0 ? 1 : 0;
        int b = axis == 2 ? 1 : 2;
        float half = lattice.planes(axis) * 0.5f;
        float toMiddle = half - walks.first(k);
        float cellA = CELL;
        float cellB = b == 2 ? CELL_Z : CELL;
        // Half a lattice is added so that lines whose middle lies outside still fall into cells of their own.
        int middleA = cell(walks.u[k] + walks.du[k] * toMiddle + lattice.planes(a) * 0.5f, cellA);
        int middleB = cell(walks.v[k] + walks.dv[k] * toMiddle + lattice.planes(b) * 0.5f, cellB);
        int driftA = cell(walks.du[k] * half + lattice.planes(a), cellA);
        int driftB = cell(walks.dv[k] * half + lattice.planes(b), cellB);
        int code = axis;
        for (int bit = BITS - 1; bit >= 0; bit--) {
            code = (code << 4)
                    | (bit(driftA, bit) << 3)
                    | (bit(driftB, bit) << 2)
                    | (bit(middleB, bit) << 1)
                    | bit(middleA, bit);
        }
        return code;
    }

    /** Cell of a coordinate. Beyond 2⁷ cells the numbers start again: two far places then share cells, which costs a little and is never wrong. */
    private static int cell(float coordinate, float size) {
        return Math.max(0, (int) (coordinate / size)) & ((1 << BITS) - 1);
    }

    private static int bit(int value, int bit) {
        return (value >> bit) & 1;
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
        for (int shift = 32; shift < 64; shift += DIGIT_BITS) {
            sortByDigit(source, target, shift);
            long[] swap = source;
            source = target;
            target = swap;
        }
        System.arraycopy(source, 0, entries, from, source.length);
    }

    private static void sortByDigit(long[] source, long[] target, int shift) {
        int[] starts = new int[(1 << DIGIT_BITS) + 1];
        for (long entry : source) {
            starts[digit(entry, shift) + 1]++;
        }
        for (int i = 1; i < starts.length; i++) {
            starts[i] += starts[i - 1];
        }
        for (long entry : source) {
            target[starts[digit(entry, shift)]++] = entry;
        }
    }

    private static int digit(long entry, int shift) {
        return (int) (entry >>> shift) & ((1 << DIGIT_BITS) - 1);
    }
}
