package org.raysheaf.geometry.solid;

import java.util.function.DoubleSupplier;
import org.raysheaf.geometry.settings.Problems;

/**
 * A circular cone or frustum with flat ends, its axis along z from −length/2 to +length/2. Between the ends the radius
 * changes linearly.
 *
 * @param lowRadiusMm radius at the −z end (mm), at least 0
 * @param highRadiusMm radius at the +z end (mm), at least 0; at most one of the two is 0
 * @param lengthMm length along the axis (mm), greater than 0
 */
public record Cone(double lowRadiusMm, double highRadiusMm, double lengthMm) implements Shape {
    public Cone {
        new Problems("cone")
                .atLeast("low_radius_mm", lowRadiusMm, 0)
                .atLeast("high_radius_mm", highRadiusMm, 0)
                .above("length_mm", lengthMm, 0)
                .rule(
                        lowRadiusMm != 0 || highRadiusMm != 0,
                        "low_radius_mm, high_radius_mm",
                        "expected at least one radius > 0, found 0 and 0; a cone needs a base")
                .orThrow();
    }

    private double radiusAt(double z) {
        return 0.5 * (lowRadiusMm + highRadiusMm) + z * (highRadiusMm - lowRadiusMm) / lengthMm;
    }

    /**
     * {@inheritDoc}
     *
     * <p>Between the end planes the mantle is crossed at the roots of f(t) = x² + y² − r(z)². The roots cut the line's
     * part between the planes into at most three pieces, and since the frustum is convex just one of them is inside.
     * Asking each piece by its midpoint needs no distinction between steep and shallow lines, parallels to the mantle,
     * or the mirror cone beyond the tip.
     */
    @Override
    public boolean clip(double ox, double oy, double oz, double dx, double dy, double dz, double[] span) {
        Span.open(span);
        double around = Math.max(lowRadiusMm, highRadiusMm) + lengthMm;
        if (!Span.ball(ox, oy, oz, dx, dy, dz, around, span)) {
            return false;
        }
        double near = 0.5 * (span[0] + span[1]); // start close by, so that nothing below cancels
        double x = ox + near * dx;
        double y = oy + near * dy;
        double z = oz + near * dz;
        span[0] -= near;
        span[1] -= near;
        if (!Span.slab(z, dz, 0.5 * lengthMm, span)) {
            return false;
        }
        double slope = dz * (highRadiusMm - lowRadiusMm) / lengthMm;
        double radius = radiusAt(z);
        double a = dx * dx + dy * dy - slope * slope;
        double b = x * dx + y * dy - radius * slope;
        double c = x * x + y * y - radius * radius;
        boolean inside = keepInside(a, b, c, span);
        span[0] += near;
        span[1] += near;
        return inside && Span.proper(span);
    }

    /** Narrows a finite span to its piece with a t² + 2 b t + c < 0, of which there is at most one. */
    private static boolean keepInside(double a, double b, double c, double[] span) {
        double q = -(b + Math.copySign(Math.sqrt(Math.max(0, b * b - a * c)), b));
        double t1 = cut(q / a, span);
        double t2 = cut(c / q, span);
        double first = Math.min(t1, t2);
        double second = Math.max(t1, t2);
        double start = span[0];
        double end = span[1];
        return piece(a, b, c, first, second, span)
                || piece(a, b, c, start, first, span)
                || piece(a, b, c, second, end, span);
    }

    /** A root, moved into the span; 0/0 stands for a root that does not exist. */
    private static double cut(double root, double[] span) {
        return Double.isNaN(root) ? span[0] : Math.min(Math.max(root, span[0]), span[1]);
    }

    private static boolean piece(double a, double b, double c, double from, double to, double[] span) {
        double middle = 0.5 * (from + to);
        if (to > from && (a * middle + 2 * b) * middle + c < 0) {
            span[0] = from;
            span[1] = to;
            return true;
        }
        return false;
    }

    @Override
    public boolean contains(double x, double y, double z) {
        double radius = radiusAt(z);
        return Math.abs(z) <= 0.5 * lengthMm && x * x + y * y <= radius * radius;
    }

    @Override
    public double volumeMm3() {
        return Math.PI / 3 * lengthMm * squares();
    }

    private double squares() {
        return lowRadiusMm * lowRadiusMm + lowRadiusMm * highRadiusMm + highRadiusMm * highRadiusMm;
    }

    @Override
    public double reach(double ux, double uy, double uz) {
        double across = Math.sqrt(ux * ux + uy * uy);
        return Math.max(
                lowRadiusMm * across - 0.5 * lengthMm * uz, //
                highRadiusMm * across + 0.5 * lengthMm * uz);
    }

    /**
     * {@inheritDoc}
     *
     * <p>The volume below height z grows like r(z)³ − r₁³, so r³ is uniform between r₁³ and r₂³. The share of the
     * length below r, (r − r₁)/(r₂ − r₁), is written as u (r₁² + r₁r₂ + r₂²)/(r² + r r₁ + r₁²), which also holds for
     * equal radii.
     */
    @Override
    public void pick(DoubleSupplier uniform, double[] point) {
        double u = 1 - uniform.getAsDouble(); // above 0, so that a tip at the low end divides by no zero
        double low3 = lowRadiusMm * lowRadiusMm * lowRadiusMm;
        double high3 = highRadiusMm * highRadiusMm * highRadiusMm;
        double r = Math.cbrt(low3 + u * (high3 - low3));
        double share = u * squares() / (r * r + r * lowRadiusMm + lowRadiusMm * lowRadiusMm);
        Chance.disk(uniform, r, point);
        point[2] = lengthMm * (Math.min(share, 1) - 0.5);
    }
}
