package org.raysheaf.engine.ray;

import java.util.Arrays;

/**
 * The order in which events are visited. Neighbours in this order run through nearly the same voxels along all their length, so most
 * of what an event touches is still in the processor's cache from those before; this is worth more than anything else in the engine.
 *
 * <p>A ray with a given dominant axis is a point in four dimensions: its two slopes, and where it crosses the middle plane of the
 * lattice. All four are measured in voxels of displacement, slopes by what they add from the middle to the end of the lattice, so that
 * points at distance 1 are rays that are nowhere much more than a voxel apart. Rays are sorted along a Hilbert curve through this space,
 * which never jumps; its index is computed as in J. Skilling, "Programming the Hilbert curve", AIP Conference Proceedings 707 (2004) 381.
 *
 * <p>A timed ray visits a short stretch only, so where that lies says more than where it points: the place of its
 * middle takes three of the four dimensions, and one of its slopes the last.
 */
final class RayOrder {
    /** Bits per coordinate, so 256 cells over twice the width of the lattice. */
    private static final int BITS = 8;

    private static final int CELLS = 1 << BITS;

    /** Bits of an entry that hold the number of the event; above them lies the code. */
    private static final int NUMBER_BITS = 30;

    /** The most events that entries can tell apart. */
    static final int MOST_EVENTS = 1 << NUMBER_BITS;

    private static final int DIGIT_BITS = 12;
    private static final int DIGITS = 1 << DIGIT_BITS;

    private RayOrder() {}

    /**
     * The number of an event, from its entry.
     *
     * @param entry made by {@link #entry}
     * @return the number
     */
    static int number(long entry) {
        return (int) entry & (MOST_EVENTS - 1);
    }

    /**
     * What to sort for an event: its place on the curve above its number.
     *
     * @param walks the rays of all events
     * @param event number of the event
     * @param raysPerEvent rays of each event; the first that visits any plane tells the place
     * @return the entry
     */
    static long entry(Walks walks, int event, int raysPerEvent) {
        int ray = event * raysPerEvent;
        int last = ray + raysPerEvent - 1;
        while (ray < last && walks.planes(ray) == 0) {
            ray++;
        }
        return (code(walks, ray) << NUMBER_BITS) | event;
    }

    private static long code(Walks walks, int k) {
        int axis = walks.axis(k);
        float half = 0.5f * walks.lattice().planes(axis);
        float toMiddle = walks.timed() ? 0.5f * walks.planes(k) : half - walks.first(k);
        float widthU = walks.lattice().planes(axis == 0 ? 1 : 0);
        float widthV = walks.lattice().planes(axis == 2 ? 1 : 2);
        int slopeU = cell(walks.du[k] * half, widthU);
        int slopeV = cell(walks.dv[k] * half, widthV);
        int placeV = cell(walks.v[k] + walks.dv[k] * toMiddle - 0.5f * widthV, widthV);
        int placeU = cell(walks.u[k] + walks.du[k] * toMiddle - 0.5f * widthU, widthU);
        if (walks.timed()) {
            // Short rays: where they are counts before where they go.
            int placeW = cell(walks.first(k) + 0.5f * walks.planes(k) - half, 2 * half);
            long place = hilbert(placeW >> 1, placeV >> 1, placeU >> 1);
            return ((long) axis << (4 * BITS)) | (place << 10) | ((slopeV >> 3) << 5) | (slopeU >> 3);
        }
        return ((long) axis << (4 * BITS)) | hilbert(slopeU, slopeV, placeV, placeU);
    }

    /** The cell of a displacement from the middle; what lies further out than the width of the lattice goes to the last cell. */
    private static int cell(float displacement, float width) {
        int cell = (int) ((0.5f + 0.5f * displacement / width) * CELLS);
        return Math.max(0, Math.min(CELLS - 1, cell));
    }

    /** The bits of a coordinate, each moved to four times its place, so that four coordinates can be interleaved. */
    private static final int[] SPREAD = spread();

    private static int[] spread() {
        int[] spread = new int[CELLS];
        for (int x = 0; x < CELLS; x++) {
            for (int bit = 0; bit < BITS; bit++) {
                spread[x] |= ((x >> bit) & 1) << (4 * bit);
            }
        }
        return spread;
    }

    /**
     * Skilling's transform of four coordinates, without branches: as many are computed as a list has events.
     *
     * @param x0 coordinate, 0 to 255
     * @param x1 coordinate, 0 to 255
     * @param x2 coordinate, 0 to 255
     * @param x3 coordinate, 0 to 255
     * @return the index on the curve, 32 bits
     */
    static long hilbert(int x0, int x1, int x2, int x3) {
        int a = x0;
        int b = x1;
        int c = x2;
        int d = x3;
        for (int place = BITS - 1; place > 0; place--) {
            int below = (1 << place) - 1;
            // Where the bit is set the lower bits of a are inverted, else they change places with those of the
            // coordinate.
            a ^= below & -((a >> place) & 1);
            int set = -((b >> place) & 1);
            int swap = (a ^ b) & below & ~set;
            a ^= (below & set) | swap;
            b ^= swap;
            set = -((c >> place) & 1);
            swap = (a ^ c) & below & ~set;
            a ^= (below & set) | swap;
            c ^= swap;
            set = -((d >> place) & 1);
            swap = (a ^ d) & below & ~set;
            a ^= (below & set) | swap;
            d ^= swap;
        }
        b ^= a;
        c ^= b;
        d ^= c;
        // Bit j is inverted if an odd number of higher bits of d are set.
        int gray = d >> 1;
        gray ^= gray >> 1;
        gray ^= gray >> 2;
        gray ^= gray >> 4;
        int index = SPREAD[a ^ gray] << 3 | SPREAD[b ^ gray] << 2 | SPREAD[c ^ gray] << 1 | SPREAD[d ^ gray];
        return Integer.toUnsignedLong(index);
    }

    /**
     * The same transform of three coordinates.
     *
     * @param x0 coordinate, 0 to 127
     * @param x1 coordinate, 0 to 127
     * @param x2 coordinate, 0 to 127
     * @return the index on the curve, 21 bits
     */
    static long hilbert(int x0, int x1, int x2) {
        int a = x0;
        int b = x1;
        int c = x2;
        for (int place = BITS - 2; place > 0; place--) {
            int below = (1 << place) - 1;
            a ^= below & -((a >> place) & 1);
            int set = -((b >> place) & 1);
            int swap = (a ^ b) & below & ~set;
            a ^= (below & set) | swap;
            b ^= swap;
            set = -((c >> place) & 1);
            swap = (a ^ c) & below & ~set;
            a ^= (below & set) | swap;
            c ^= swap;
        }
        b ^= a;
        c ^= b;
        int gray = c >> 1;
        gray ^= gray >> 1;
        gray ^= gray >> 2;
        gray ^= gray >> 4;
        long index = 0;
        for (int bit = BITS - 2; bit >= 0; bit--) {
            index = (index << 3)
                    | ((((a ^ gray) >> bit) & 1) << 2)
                    | ((((b ^ gray) >> bit) & 1) << 1)
                    | (((c ^ gray) >> bit) & 1);
        }
        return index;
    }

    /**
     * Sorts entries by their codes; equal codes keep their order. Radix sort, least digit first, without objects.
     *
     * @param entries the entries, sorted in place
     * @param from first entry to sort
     * @param to after the last entry
     */
    static void sort(long[] entries, int from, int to) {
        long[] source = Arrays.copyOfRange(entries, from, to);
        long[] target = entries;
        int sourceFrom = 0;
        int targetFrom = from;
        for (int shift = NUMBER_BITS; shift < Long.SIZE; shift += DIGIT_BITS) {
            pass(source, sourceFrom, target, targetFrom, to - from, shift);
            long[] array = source;
            source = target;
            target = array;
            int offset = sourceFrom;
            sourceFrom = targetFrom;
            targetFrom = offset;
        }
        // Three digits from a copy: the last pass wrote to where the entries belong.
    }

    private static void pass(long[] source, int from, long[] target, int targetFrom, int n, int shift) {
        int[] next = new int[DIGITS + 1];
        for (int i = from; i < from + n; i++) {
            next[digit(source[i], shift) + 1]++;
        }
        next[0] = targetFrom;
        for (int digit = 0; digit < DIGITS; digit++) {
            next[digit + 1] += next[digit];
        }
        for (int i = from; i < from + n; i++) {
            target[next[digit(source[i], shift)]++] = source[i];
        }
    }

    private static int digit(long entry, int shift) {
        return (int) (entry >>> shift) & (DIGITS - 1);
    }
}
