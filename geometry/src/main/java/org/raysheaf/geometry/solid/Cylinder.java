package org.raysheaf.geometry.solid;

import java.util.function.DoubleSupplier;
import org.raysheaf.geometry.settings.Problems;

/**
 * A circular cylinder with flat ends, its axis along z from −length/2 to +length/2.
 *
 * @param radiusMm radius (mm), greater than 0
 * @param lengthMm length along the axis (mm), greater than 0
 */
public record Cylinder(double radiusMm, double lengthMm) implements Shape {
    public Cylinder {
        new Problems("cylinder")
                .above("radius_mm", radiusMm, 0)
                .above("length_mm", lengthMm, 0)
                .orThrow();
    }

    @Override
    public boolean clip(double ox, double oy, double oz, double dx, double dy, double dz, double[] span) {
        Span.open(span);
        return Span.slab(oz, dz, 0.5 * lengthMm, span)
                && Span.disk(ox, oy, dx, dy, radiusMm, span)
                && Span.proper(span);
    }

    @Override
    public boolean contains(double x, double y, double z) {
        return Math.abs(z) <= 0.5 * lengthMm && x * x + y * y <= radiusMm * radiusMm;
    }

    @Override
    public double volumeMm3() {
        return Math.PI * radiusMm * radiusMm * lengthMm;
    }

    @Override
    public double reach(double ux, double uy, double uz) {
        return radiusMm * Math.sqrt(ux * ux + uy * uy) + 0.5 * lengthMm * Math.abs(uz);
    }

    @Override
    public void pick(DoubleSupplier uniform, double[] point) {
        Chance.disk(uniform, radiusMm, point);
        point[2] = lengthMm * (uniform.getAsDouble() - 0.5);
    }
}
