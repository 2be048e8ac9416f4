package org.raysheaf.engine.ray;

/**
 * The order in which rays are visited. Neighbours in this order run through nearly the same voxels, so most of what a ray touches is
 * still in the processor's cache from the ray before; this is worth more than anything else in the engine.
 *
 * <p>A ray is a point in four dimensions: where it crosses the planes a quarter of the way in from both ends of its dominant axis. The bits of the four coordinates are interleaved (Morton order), with the
 * dominant axis on top, so that rays that share a prefix of the code lie close together along all their length.
 */
final class RayOrder {
    private static final int BITS = 8;

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
        return (long) code(walks, ray) << 32 | event;
    }

    static int code(Walks walks, int k) {
        Lattice lattice = walks.lattice();
        int axis = walks.axis(k);
        return code(walks, k, lattice, axis);
    }
    static final int MODE = Integer.getInteger("order", 2);
    static final float CELL = Float.parseFloat(System.getProperty("cell", "1"));
    static final float ZF = Float.parseFloat(System.getProperty("zf", "4"));
    static final int ZB = Integer.getInteger("zb", 6);

    private static int code(Walks w, int k, Lattice lattice, int axis) {
        int nw = lattice.planes(axis);
        float mid = nw * .5f - w.first(k);
        int a = axis == 0 ? 1 : 0, b = axis == 2 ? 1 : 2;
        float na = lattice.planes(a), nb = lattice.planes(b);
        float uc = w.u[k] + w.du[k] * mid + na * .5f, vc = w.v[k] + w.dv[k] * mid + nb * .5f;
        float ua = w.du[k] * nw * .5f + na, va = w.dv[k] * nw * .5f + nb;
        if (MODE == 0) return 0;
        if (MODE == 1) { // yardstick like
            int kp = clamp((w.du[k] + 1) * 16, 32), kz = clamp(vc / 4, 512), ks = clamp(uc / 4, 512);
            return axis << 30 | kp << 18 | kz << 9 | ks;
        }
        float zc = b == 2 ? ZF : 1, yc = a == 2 ? ZF : 1;
        int i0 = clamp(uc / (CELL * yc), 256), i1 = clamp(ua / (CELL * yc), 256), i2 = clamp(vc / (CELL * zc), 256), i3 = clamp(va / (CELL * zc), 256);
        if (MODE == 2) return morton(axis, i0, i1, i2, i3);
        if (MODE == 3) return hilbert(axis, new int[] {i1, i3, i2, i0}, 7);
        if (MODE == 5) return hilbert(axis, new int[] {i0, i1, i2, i3}, 7);
        if (MODE == 4) { // direction bins, then snake
            int kp = clamp(ua / 4, 128), kq = clamp(va / 16, 64), iv = clamp(vc / 8, 64), iu = clamp(uc, 512);
            if ((kp & 1) == 1) kq = 63 - kq;
            if ((kq & 1) == 1) iv = 63 - iv;
            if ((iv & 1) == 1) iu = 511 - iu;
            return axis << 28 | kp << 21 | kq << 15 | iv << 9 | iu;
        }
        throw new IllegalStateException();
    }
    private static int clamp(float x, int n) { return Math.max(0, Math.min(n - 1, (int) x)); }
    private static int morton(int axis, int a, int b, int c, int d) {
        int code = axis;
        for (int bit = 6; bit >= 0; bit--) code = code << 4 | (b >> bit & 1) << 3 | (d >> bit & 1) << 2 | (c >> bit & 1) << 1 | (a >> bit & 1);
        return code;
    }
    static int hilbert(int axis, int[] x, int bits) {
        int n = x.length;
        for (int i = 0; i < n; i++) x[i] = Math.min(x[i], (1 << bits) - 1);
        for (int q = 1 << bits - 1; q > 1; q >>= 1) {
            int p = q - 1;
            for (int i = 0; i < n; i++) {
                if ((x[i] & q) != 0) x[0] ^= p;
                else { int t = (x[0] ^ x[i]) & p; x[0] ^= t; x[i] ^= t; }
            }
        }
        for (int i = 1; i < n; i++) x[i] ^= x[i - 1];
        int t = 0;
        for (int q = 1 << bits - 1; q > 1; q >>= 1) if ((x[n - 1] & q) != 0) t ^= q - 1;
        for (int i = 0; i < n; i++) x[i] ^= t;
        int code = axis;
        for (int bit = bits - 1; bit >= 0; bit--) for (int i = 0; i < n; i++) code = code << 1 | (x[i] >> bit & 1);
        return code;
    }

    /**
     * Sorts by the upper half of each entry, stably, least digit first.
     *
     * @param entries a code in the upper 32 bits, anything in the lower
     * @param from first entry
     * @param to after the last entry
     */
    static void sort(long[] entries, int from, int to) {
        int n = to - from;
        long[] a = entries;
        int aFrom = from;
        long[] b = new long[n];
        int bFrom = 0;
        int[] starts = new int[1 << 11];
        for (int shift = 32; shift < 64; shift += 11) {
            java.util.Arrays.fill(starts, 0);
            for (int i = aFrom; i < aFrom + n; i++) starts[(int) (a[i] >>> shift) & 2047]++;
            int sum = bFrom;
            for (int i = 0; i < 2048; i++) { int c = starts[i]; starts[i] = sum; sum += c; }
            for (int i = aFrom; i < aFrom + n; i++) b[starts[(int) (a[i] >>> shift) & 2047]++] = a[i];
            long[] t = a; a = b; b = t; int f = aFrom; aFrom = bFrom; bFrom = f;
        }
        if (a != entries) System.arraycopy(a, aFrom, entries, from, n);
    }
}
