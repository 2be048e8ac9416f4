package org.raysheaf.geometry.response;

import org.raysheaf.geometry.detector.FieldOfView;

/**
 * Makes the line of response of a pair of elements. The ends are the mean interaction points for the direction of the line itself, and the
 * étendue is
 *
 * <pre>
 * G = A₁(s) A₂(−s) / d² · (1 + 3 (σ₁² + σ₂²) / d²),
 * </pre>
 *
 * with the effective areas A (mm²), the distance d of the ends (mm) and the variances σ² of the interaction points along the line (mm²): the last
 * factor is the second-order term of ⟨1/d²⟩ over the depths. The product holds for elements that are small against their distance; larger
 * ones are cut into n × n parts across, each of which carries its share of the effective area at its own direction, and n is doubled until
 * the étendue changes by less than a stated tolerance.
 *
 * <p>Two photons of an unordered pair and an isotropic emitter of density f give the rate G / 2π · ∫ f dl. Not safe for use by several threads.
 */
public final class PairLines {
    /** Cutting stops when the étendue changes by less than this share. */
    static final double TOLERANCE = 2e-3;

    /** A pair is cut at all when (largest width / distance)² exceeds this; the error of the product is about a sixth to a half of it. */
    private static final double NEAR = 4e-3;

    private static final int MOST_PARTS = 8;

    /** Systems of so many elements, usually large ones, keep the étendues that took cutting: 16 MB at most. */
    private static final int FEW_ELEMENTS = 2000;

    private final ElementResponse response;
    private final double viewRadius;
    private final double viewHalfLength;
    private final double marginMm;
    private final double[] frames;
    /** Étendues of pairs that had to be cut, 0 where none is known yet, shared by all twins; empty if there are too many elements. */
    private final double[] known;

    private final Response near = new Response();
    private final Response far = new Response();

    private static final int FRAME = ElementFrames.SIZE;
    private static final int HALF_U = ElementFrames.HALF;
    private static final int HALF_V = ElementFrames.HALF + 1;

    /**
     * Lines of response of a system.
     *
     * @param response the tabulated response of its elements
     */
    public PairLines(ElementResponse response) {
        this(response, ElementFrames.of(response.system()), 0);
    }

    /**
     * Lines of response of a system, also those that pass the field of view at a distance.
     *
     * @param response the tabulated response of its elements
     * @param frames where they stand
     * @param marginMm by how much the field of view is widened on all sides (mm), at least 0
     */
    PairLines(ElementResponse response, double[] frames, double marginMm) {
        this(response, frames, marginMm, new double[room(response.system().elements())]);
    }

    private static int room(int elements) {
        return elements <= FEW_ELEMENTS ? elements * (elements + 1) / 2 : 0;
    }

    private PairLines(ElementResponse response, double[] frames, double marginMm, double[] known) {
        this.known = known;
        this.response = response;
        this.frames = frames;
        this.marginMm = marginMm;
        FieldOfView view = response.system().fieldOfView();
        this.viewRadius = view.radiusMm() + marginMm;
        this.viewHalfLength = 0.5 * view.lengthMm() + marginMm;
    }

    /**
     * A second maker of the same lines, for another thread; it shares the tables.
     *
     * @return a new maker
     */
    public PairLines twin() {
        return new PairLines(response, frames, marginMm, known);
    }

    /**
     * Makes the line of a pair. The result for (b, a) is that for (a, b) with its ends exchanged, to the last bit.
     *
     * @param a one element
     * @param b the other element
     * @param line receives the ends and the étendue
     * @return true if the line crosses the field of view; otherwise the pair is not admitted and its étendue is set to 0
     */
    public boolean line(int a, int b, LineOfResponse line) {
        double product = whole(a, b, 0, 0, 0, 0, line);
        boolean crosses = crossesView(line);
        line.etendue = crosses ? refined(a, b, product, line.lengthMm()) : 0;
        return crosses;
    }

    /**
     * Makes the line of a pair without its étendue, which is left as it was.
     *
     * @param a one element
     * @param b the other element
     * @param line receives the ends
     */
    void ends(int a, int b, LineOfResponse line) {
        whole(a, b, 0, 0, 0, 0, line);
    }

    /**
     * The line of a pair whether or not it crosses the field of view.
     *
     * @param a one element
     * @param b the other element
     * @param line receives the ends and the étendue
     */
    public void lineAnywhere(int a, int b, LineOfResponse line) {
        double product = whole(a, b, 0, 0, 0, 0, line);
        line.etendue = refined(a, b, product, line.lengthMm());
    }

    private double refined(int a, int b, double product, double lengthMm) {
        double width = Math.max(
                Math.max(frames[FRAME * a + HALF_U], frames[FRAME * a + HALF_V]),
                Math.max(frames[FRAME * b + HALF_U], frames[FRAME * b + HALF_V]));
        double ratio = 2 * width / lengthMm;
        return ratio * ratio > NEAR ? known(a, b, product) : product;
    }

    /** Cutting takes up to some 0.2 ms, and events name the same few large elements again and again. */
    private double known(int a, int b, double product) {
        if (known.length == 0) {
            return divided(a, b, product);
        }
        int at = Math.max(a, b) * (Math.max(a, b) + 1) / 2 + Math.min(a, b);
        double value = known[at];
        if (value == 0) {
            value = divided(a, b, product);
            known[at] = value; // whichever thread comes first: all find the same
        }
        return value;
    }

    /**
     * The étendue of two elements cut into n × n parts across, for n doubled until it settles. The error of the midpoint rule falls as 1/n², so each
     * step is extrapolated (Richardson) before it is compared with the one before.
     */
    private double divided(int a, int b, double product) {
        double coarse = product;
        double last = product;
        for (int n = 2; n <= MOST_PARTS; n *= 2) {
            double fine = inParts(a, b, n);
            double now = fine + (fine - coarse) / 3;
            if (Math.abs(now - last) <= TOLERANCE * now) {
                return now;
            }
            coarse = fine;
            last = now;
        }
        return last;
    }

    private double inParts(int a, int b, int n) {
        LineOfResponse part = new LineOfResponse();
        double sum = 0;
        int parts = n * n;
        for (int i = 0; i < parts; i++) {
            for (int j = 0; j < parts; j++) {
                sum += whole(a, b, offset(i % n, n), offset(i / n, n), offset(j % n, n), offset(j / n, n), part);
            }
        }
        return sum / ((double) parts * parts);
    }

    /** Centre of part i of n, in half widths. */
    private static double offset(int i, int n) {
        return (2 * i + 1.0) / n - 1;
    }

    /**
     * Étendue of the product form between two points across the elements (given in half widths), with the mean interaction points as ends.
     */
    private double whole(int a, int b, double ua, double va, double ub, double vb, LineOfResponse line) {
        int fa = FRAME * a;
        int fb = FRAME * b;
        double oua = ua * frames[fa + HALF_U];
        double ova = va * frames[fa + HALF_V];
        double oub = ub * frames[fb + HALF_U];
        double ovb = vb * frames[fb + HALF_V];
        setA(line, fa, oua, ova, 0);
        setB(line, fb, oub, ovb, 0);
        double d = 0;
        // From the centres' direction to that of the mean interaction points; a third round would move them by
        // micrometres.
        for (int round = 0; round < 2; round++) {
            double x = line.bx - line.ax;
            double y = line.by - line.ay;
            double z = line.bz - line.az;
            d = Math.sqrt(x * x + y * y + z * z);
            x /= d;
            y /= d;
            z /= d;
            lookUp(b, fb, x, y, z, far);
            lookUp(a, fa, -x, -y, -z, near);
            setA(line, fa, oua + near.u, ova + near.v, near.w);
            setB(line, fb, oub + far.u, ovb + far.v, far.w);
        }
        line.depthVariance = near.variance + far.variance;
        double square = d * d;
        return near.area * far.area / square * (1 + 3 * (near.variance + far.variance) / square);
    }

    private void lookUp(int element, int f, double x, double y, double z, Response out) {
        response.lookUp(
                element,
                ElementFrames.along(frames, f + ElementFrames.U, x, y, z),
                ElementFrames.along(frames, f + ElementFrames.V, x, y, z),
                ElementFrames.along(frames, f + ElementFrames.W, x, y, z),
                out);
    }

    private void setA(LineOfResponse line, int f, double u, double v, double w) {
        line.ax = frames[f] + u * frames[f + 3] + v * frames[f + 6] + w * frames[f + 9];
        line.ay = frames[f + 1] + u * frames[f + 4] + v * frames[f + 7] + w * frames[f + 10];
        line.az = frames[f + 2] + u * frames[f + 5] + v * frames[f + 8] + w * frames[f + 11];
    }

    private void setB(LineOfResponse line, int f, double u, double v, double w) {
        line.bx = frames[f] + u * frames[f + 3] + v * frames[f + 6] + w * frames[f + 9];
        line.by = frames[f + 1] + u * frames[f + 4] + v * frames[f + 7] + w * frames[f + 10];
        line.bz = frames[f + 2] + u * frames[f + 5] + v * frames[f + 8] + w * frames[f + 11];
    }

    /** Whether a line shares a point with the field of view: the overlap of its part within the radius and its part within the length. */
    boolean crossesView(LineOfResponse line) {
        double dx = line.bx - line.ax;
        double dy = line.by - line.ay;
        double dz = line.bz - line.az;
        double from = 0;
        double to = 1;
        double across = dx * dx + dy * dy;
        double c = line.ax * line.ax + line.ay * line.ay - viewRadius * viewRadius;
        if (across > 0) {
            double half = line.ax * dx + line.ay * dy;
            double root = half * half - across * c;
            if (root < 0) {
                return false;
            }
            from = Math.max(from, (-half - Math.sqrt(root)) / across);
            to = Math.min(to, (-half + Math.sqrt(root)) / across);
        } else if (c > 0) {
            return false;
        }
        if (dz != 0) {
            double one = (-viewHalfLength - line.az) / dz;
            double other = (viewHalfLength - line.az) / dz;
            from = Math.max(from, Math.min(one, other));
            to = Math.min(to, Math.max(one, other));
        } else if (Math.abs(line.az) > viewHalfLength) {
            return false;
        }
        return from <= to;
    }
}
