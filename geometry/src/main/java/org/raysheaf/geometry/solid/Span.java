package org.raysheaf.geometry.solid;

/**
 * Pieces of line clipping that several solids share. Each narrows a span {t₀, t₁} of line parameters to its part inside
 * some convex region.
 *
 * <p>{@link Math#max} and {@link Math#min} hand NaN on, and {@link #proper} refuses it, so a NaN anywhere ends in "no".
 * Quadratic surfaces are solved from the point of the line that is nearest to their centre: from a far origin the usual
 * discriminant b² − ac would lose all its digits.
 */
final class Span {
    private Span() {}

    /** Starts with the whole line. */
    static void open(double[] span) {
        span[0] = Double.NEGATIVE_INFINITY;
        span[1] = Double.POSITIVE_INFINITY;
    }

    /** Whether the span has a length: above 0, finite, a number. */
    static boolean proper(double[] span) {
        double length = span[1] - span[0];
        return length > 0 && length < Double.POSITIVE_INFINITY;
    }

    /** Narrows to |o + t d| < half, one coordinate. */
    static boolean slab(double o, double d, double half, double[] span) {
        if (d == 0) {
            return Math.abs(o) < half;
        }
        double t1 = (-half - o) / d;
        double t2 = (half - o) / d;
        return narrow(Math.min(t1, t2), Math.max(t1, t2), span);
    }

    /** Narrows to the disk x² + y² < radius² in the plane, which in space is the inside of a cylinder. */
    static boolean disk(double ox, double oy, double dx, double dy, double radius, double[] span) {
        double dd = dx * dx + dy * dy;
        if (dd < Double.MIN_NORMAL) {
            return ox * ox + oy * oy < radius * radius;
        }
        double nearest = -(ox * dx + oy * dy) / dd;
        double px = ox + nearest * dx;
        double py = oy + nearest * dy;
        return around(nearest, radius * radius - (px * px + py * py), dd, span);
    }

    /** Narrows to the ball x² + y² + z² < radius². */
    static boolean ball(
            double ox, double oy, double oz, double dx, double dy, double dz, double radius, double[] span) {
        double dd = dx * dx + dy * dy + dz * dz;
        double nearest = -(ox * dx + oy * dy + oz * dz) / dd;
        double px = ox + nearest * dx;
        double py = oy + nearest * dy;
        double pz = oz + nearest * dz;
        return around(nearest, radius * radius - (px * px + py * py + pz * pz), dd, span);
    }

    private static boolean around(double nearest, double room, double dd, double[] span) {
        if (!(room > 0)) {
            return false;
        }
        double half = Math.sqrt(room / dd);
        return narrow(nearest - half, nearest + half, span);
    }

    private static boolean narrow(double from, double to, double[] span) {
        span[0] = Math.max(span[0], from);
        span[1] = Math.min(span[1], to);
        return span[1] > span[0];
    }
}
