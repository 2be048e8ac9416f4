package org.raysheaf.engine.ray;

import java.util.Arrays;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafBundle.WeightLaw;

/**
 * Rays prepared for walking through a lattice, in flat arrays: 24 bytes each, 32 if they are timed. A ray visits one voxel plane after another along its
 * dominant axis, the one across which it crosses most planes. On the j-th plane that it visits, j = 0, 1, …, it stands at
 *
 * <pre>
 * plane first + j,  u = u₀ + j·du,  v = v₀ + j·dv      (lattice coordinates, |du| ≤ 1, |dv| ≤ 1)
 * </pre>
 *
 * <p>where u and v are the other two axes, in order; each plane counts with the length of the ray from plane to plane times the
 * weight of the ray. Planes lie between the two end points of the ray and within the grid. A ray that visits no plane is empty.
 *
 * <p>On a timed ray each plane also counts with a normal density (1/mm), e^(−½ ((j − centre)/width)²) / (√(2π) · width · length from plane to
 * plane), centre and width in planes. Between planes the image is taken as linear, as in Joseph's sum, so the density is smeared by a triangle of
 * one plane either way: width² = (σ / length)² + 1/6. Planes further than {@value #REACH} widths from the centre are left out, where {@link #LOSS} of the
 * density lies; what is kept is divided by 1 − LOSS, so that the weights of a plane, integrated over all times, are those of the plain ray.
 */
public final class Walks {
    /** Memory that one walk takes (bytes). */
    public static final int BYTES = 24;

    /** Memory that centre and width of a timed walk take besides (bytes). */
    public static final int TIMED_BYTES = 8;

    /** How far from its centre, in widths, the density of a timed ray is followed. */
    public static final double REACH = 3;

    /** Share of a normal density that lies further out than {@link #REACH} standard deviations: 1 − erf(3/√2). */
    public static final double LOSS = 2.699796063e-3;

    private static final double DENSITY = 1 / ((1 - LOSS) * Math.sqrt(2 * Math.PI));

    private static final float[] PLAIN = new float[0];

    /**
     * Coordinates keep this share of n − 1 away from 0 and n − 1, so that both neighbours of a sample exist. Rounding cannot undo that:
     * u + j·du in single precision, even after {@link #trim}, is off by less than 7 · 2⁻²⁴ · n, under half of what is kept free.
     */
    private static final double MARGIN = 1e-6;

    /** A sample of the support that is smaller than this (the support being 0 or 1) may be rounding, and does not count as activity. */
    private static final float TOUCH = 1e-4f;

    /** Runs that one thread copies at a time. */
    private static final int PIECE = 1 << 16;

    private static final int EMPTY = 1 << 15;
    private static final int PLANE = (1 << 15) - 1;

    private final Lattice lattice;
    private final boolean timed;
    /** Dominant axis, first and last plane, packed: axis · 2³⁰ + first · 2¹⁵ + last. */
    int[] spans;

    float[] u;
    float[] du;
    float[] v;
    float[] dv;
    /** Length from plane to plane times the weight of the ray (mm); if timed, times the density at its centre (no unit). */
    float[] steps;

    /** The plane, counted from the first, at which the density is highest; no array elements if plain. */
    float[] centres;
    /** One over the width (1/planes); no array elements if plain. */
    float[] sharpness;

    /**
     * Room for plain walks; all are empty at first.
     *
     * @param lattice what they walk through
     * @param capacity how many, at least 0
     */
    public Walks(Lattice lattice, int capacity) {
        this(lattice, capacity, WeightLaw.PLAIN);
    }

    /**
     * Room for walks; all are empty at first.
     *
     * @param lattice what they walk through
     * @param capacity how many, at least 0
     * @param law the weight along them
     */
    public Walks(Lattice lattice, int capacity, WeightLaw law) {
        this.lattice = lattice;
        spans = new int[capacity];
        u = new float[capacity];
        du = new float[capacity];
        v = new float[capacity];
        dv = new float[capacity];
        steps = new float[capacity];
        timed = law == WeightLaw.GAUSSIAN;
        centres = timed ? new float[capacity] : PLAIN;
        sharpness = timed ? new float[capacity] : PLAIN;
        Arrays.fill(spans, EMPTY);
    }

    /**
     * What the walks walk through.
     *
     * @return the lattice
     */
    public Lattice lattice() {
        return lattice;
    }

    /**
     * How many walks there is room for.
     *
     * @return the capacity
     */
    public int capacity() {
        return spans.length;
    }

    /**
     * Whether planes count with a density along the ray.
     *
     * @return false if all count alike
     */
    public boolean timed() {
        return timed;
    }

    /**
     * The dominant axis of a walk.
     *
     * @param k number of the walk
     * @return 0, 1 or 2
     */
    public int axis(int k) {
        return spans[k] >>> 30;
    }

    /**
     * The first plane that a walk visits.
     *
     * @param k number of the walk
     * @return the lattice coordinate along the dominant axis
     */
    public int first(int k) {
        return (spans[k] >>> 15) & PLANE;
    }

    /**
     * How many planes a walk visits.
     *
     * @param k number of the walk
     * @return the count; 0 if the walk is empty
     */
    public int planes(int k) {
        return (spans[k] & PLANE) - ((spans[k] >>> 15) & PLANE) + 1;
    }

    /**
     * Prepares a ray of a bundle of the same law.
     *
     * @param k number of the walk
     * @param bundle the rays
     * @param ray which ray of these
     */
    public void set(int k, SheafBundle bundle, int ray) {
        set(k, bundle.rays(), ray, bundle.weights()[ray]);
        if (timed && spans[k] != EMPTY) {
            time(k, bundle.rays(), 6 * ray, bundle.centresMm()[ray], bundle.sdsMm()[ray]);
        }
    }

    /** Gives a walk, prepared as a plain one, a density and shortens it to the reach of that. */
    private void time(int k, float[] rays, int at, double centreMm, double sdMm) {
        int axis = axis(k);
        double from = lattice.coordinate(axis, rays[at], rays[at + 1], rays[at + 2]);
        double to = lattice.coordinate(axis, rays[at + 3], rays[at + 4], rays[at + 5]);
        double length = lattice.spacingMm(axis)
                * Math.sqrt(1
                        + square(du[k], lattice.spacingMm(axis == 0 ? 1 : 0) / lattice.spacingMm(axis))
                        + square(dv[k], lattice.spacingMm(axis == 2 ? 1 : 2) / lattice.spacingMm(axis)));
        double centre = from + Math.signum(to - from) * centreMm / length;
        double width = Math.sqrt(square(sdMm, 1 / length) + 1.0 / 6);
        int first = first(k);
        int last = first + planes(k) - 1;
        int low = (int) Math.max(first, Math.ceil(centre - REACH * width));
        int high = (int) Math.min(last, Math.floor(centre + REACH * width));
        if (!(Math.abs(centre) < Double.POSITIVE_INFINITY && width < Double.POSITIVE_INFINITY && low <= high)) {
            spans[k] = EMPTY;
            return;
        }
        shorten(k, low - first, high - first);
        centres[k] = (float) (centre - low);
        sharpness[k] = (float) (1 / width);
        steps[k] *= (float) (DENSITY / (width * length));
    }

    private static double square(double value, double unit) {
        return value * unit * (value * unit);
    }

    /**
     * Prepares a plain ray. Rays of no length, with ends that are no finite numbers, or that miss the lattice become empty. Different walks
     * may be set by different threads at once.
     *
     * @param k number of the walk
     * @param rays coordinates, six per ray: start x y z, end x y z (mm)
     * @param ray which ray of these
     * @param weight weight of the ray
     */
    public void set(int k, float[] rays, int ray, double weight) {
        spans[k] = EMPTY;
        int at = 6 * ray;
        double o0 = lattice.coordinate(0, rays[at], rays[at + 1], rays[at + 2]);
        double o1 = lattice.coordinate(1, rays[at], rays[at + 1], rays[at + 2]);
        double o2 = lattice.coordinate(2, rays[at], rays[at + 1], rays[at + 2]);
        double d0 = lattice.coordinate(0, rays[at + 3], rays[at + 4], rays[at + 5]) - o0;
        double d1 = lattice.coordinate(1, rays[at + 3], rays[at + 4], rays[at + 5]) - o1;
        double d2 = lattice.coordinate(2, rays[at + 3], rays[at + 4], rays[at + 5]) - o2;
        double longest = Math.max(Math.abs(d0), Math.max(Math.abs(d1), Math.abs(d2)));
        if (!(longest > 0)) { // or no number: an infinite coordinate times 0 is none
            return;
        }
        if (Math.abs(d0) == longest) {
            set(k, 0, 1, 2, o0, d0, o1, d1 / d0, o2, d2 / d0, weight);
        } else if (Math.abs(d1) == longest) {
            set(k, 1, 0, 2, o1, d1, o0, d0 / d1, o2, d2 / d1, weight);
        } else {
            set(k, 2, 0, 1, o2, d2, o0, d0 / d2, o1, d1 / d2, weight);
        }
    }

    /** Along the dominant axis w the ray starts at ow and extends by dw; along a and b it starts at oa, ob with slopes sa, sb. */
    private void set(
            int k,
            int w,
            int a,
            int b,
            double ow,
            double dw,
            double oa,
            double sa,
            double ob,
            double sb,
            double weight) {
        double low = Math.max(1, Math.min(ow, ow + dw));
        double high = Math.min(lattice.planes(w) - 2, Math.max(ow, ow + dw));
        double endA = lattice.planes(a) - 1;
        double endB = lattice.planes(b) - 1;
        low = Math.max(low, ow + Math.max(enter(oa, sa, endA), enter(ob, sb, endB)));
        high = Math.min(high, ow + Math.min(leave(oa, sa, endA), leave(ob, sb, endB)));
        int first = (int) Math.ceil(low);
        int last = (int) Math.floor(high);
        if (!(low <= high) || last < first) {
            return;
        }
        spans[k] = span(w, first, last);
        u[k] = (float) (oa + (first - ow) * sa);
        du[k] = (float) sa;
        v[k] = (float) (ob + (first - ow) * sb);
        dv[k] = (float) sb;
        double stepA = sa * lattice.spacingMm(a);
        double stepB = sb * lattice.spacingMm(b);
        double stepW = lattice.spacingMm(w);
        steps[k] = (float) (weight * Math.sqrt(stepW * stepW + stepA * stepA + stepB * stepB));
    }

    private static int span(int axis, int first, int last) {
        return (axis << 30) | (first << 15) | last;
    }

    /** How far along the dominant axis, from the start of the ray, the coordinate o + s·t enters 0 … end, less the margins. */
    private static double enter(double o, double s, double end) {
        double low = end * MARGIN;
        double high = end - low;
        if (s == 0) {
            return o >= low && o <= high ? Double.NEGATIVE_INFINITY : Double.POSITIVE_INFINITY;
        }
        return ((s > 0 ? low : high) - o) / s;
    }

    private static double leave(double o, double s, double end) {
        return s == 0 ? Double.POSITIVE_INFINITY : -enter(o, -s, end);
    }

    /**
     * Shortens a walk to the planes on which it can meet activity; the others contribute nothing, or less than 10⁻⁴ of a sample.
     *
     * @param k number of the walk
     * @param support values on the lattice, 1 where there may be activity, else 0
     * @return false if no plane is left and the walk is now empty
     */
    public boolean trim(int k, float[] support) {
        int planes = planes(k);
        int from = 0;
        while (from < planes && !(sample(k, from, support) > TOUCH)) {
            from++;
        }
        int to = planes - 1;
        while (to > from && !(sample(k, to, support) > TOUCH)) {
            to--;
        }
        if (from > to) {
            spans[k] = EMPTY;
            return false;
        }
        shorten(k, from, to);
        if (timed) {
            centres[k] -= from;
        }
        return true;
    }

    /** Keeps only the planes from … to, counted from the first. */
    private void shorten(int k, int from, int to) {
        u[k] += from * du[k];
        v[k] += from * dv[k];
        spans[k] = span(axis(k), first(k) + from, first(k) + to);
    }

    /** The bilinear sample of an image on the j-th plane of a walk. */
    private float sample(int k, int j, float[] image) {
        int axis = axis(k);
        int su = lattice.stride(axis == 0 ? 1 : 0);
        int sv = lattice.stride(axis == 2 ? 1 : 2);
        float atU = u[k] + du[k] * j;
        float atV = v[k] + dv[k] * j;
        int low = (first(k) + j) * lattice.stride(axis) + ((int) atU) * su + ((int) atV) * sv;
        int high = low + su;
        float fv = atV - (int) atV;
        float a = image[low] + fv * (image[low + sv] - image[low]);
        float b = image[high] + fv * (image[high + sv] - image[high]);
        return a + (atU - (int) atU) * (b - a);
    }

    /**
     * Copies a walk from elsewhere.
     *
     * @param k number of the walk here
     * @param source walks of the same law through the same lattice
     * @param from number of the walk there
     */
    public void copy(int k, Walks source, int from) {
        spans[k] = source.spans[from];
        u[k] = source.u[from];
        du[k] = source.du[from];
        v[k] = source.v[from];
        dv[k] = source.dv[from];
        steps[k] = source.steps[from];
        if (timed) {
            centres[k] = source.centres[from];
            sharpness[k] = source.sharpness[from];
        }
    }

    /** The columns of single precision; shared. */
    float[][] floats() {
        return timed ? new float[][] {u, du, v, dv, steps, centres, sharpness} : new float[][] {u, du, v, dv, steps};
    }

    /**
     * Runs of walks in another order.
     *
     * @param order entries of {@link RayOrder}: the number of the run that comes to each place
     * @param run walks in a run, at least 1
     * @param last whether these walks are no longer needed; their columns are then given up one by one, so that only one exists twice
     * @param pool does the work
     * @return new walks
     */
    Walks arranged(long[] order, int run, boolean last, ForkJoinPool pool) {
        Walks result = new Walks(lattice, 0, timed ? WeightLaw.GAUSSIAN : WeightLaw.PLAIN);
        result.spans = arranged(spans, order, run, pool);
        spans = last ? result.spans : spans;
        result.u = arranged(u, order, run, pool);
        u = last ? result.u : u;
        result.du = arranged(du, order, run, pool);
        du = last ? result.du : du;
        result.v = arranged(v, order, run, pool);
        v = last ? result.v : v;
        result.dv = arranged(dv, order, run, pool);
        dv = last ? result.dv : dv;
        result.steps = arranged(steps, order, run, pool);
        steps = last ? result.steps : steps;
        if (timed) {
            result.centres = arranged(centres, order, run, pool);
            centres = last ? result.centres : centres;
            result.sharpness = arranged(sharpness, order, run, pool);
            sharpness = last ? result.sharpness : sharpness;
        }
        return result;
    }

    private static int[] arranged(int[] column, long[] order, int run, ForkJoinPool pool) {
        int[] result = new int[order.length * run];
        inPieces(pool, order.length, (from, to) -> {
            for (int i = from; i < to; i++) {
                int source = RayOrder.number(order[i]) * run;
                for (int j = 0; j < run; j++) {
                    result[i * run + j] = column[source + j];
                }
            }
        });
        return result;
    }

    private static float[] arranged(float[] column, long[] order, int run, ForkJoinPool pool) {
        float[] result = new float[order.length * run];
        inPieces(pool, order.length, (from, to) -> {
            for (int i = from; i < to; i++) {
                int source = RayOrder.number(order[i]) * run;
                for (int j = 0; j < run; j++) {
                    result[i * run + j] = column[source + j];
                }
            }
        });
        return result;
    }

    private interface Copy {
        void runs(int from, int to);
    }

    private static void inPieces(ForkJoinPool pool, int runs, Copy copy) {
        Tasks.forEach(
                pool,
                (runs + PIECE - 1) / PIECE,
                piece -> copy.runs(piece * PIECE, Math.min(runs, (piece + 1) * PIECE)));
    }
}
