package org.raysheaf.geometry.solid;

import java.util.function.DoubleSupplier;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Problems;

/**
 * A rectangular box about the origin, edges along the axes.
 *
 * @param edgesMm full edge lengths along x, y, z (mm), each greater than 0
 */
public record Box(Vector3 edgesMm) implements Shape {
    public Box {
        new Problems("box")
                .above("edges_mm[0]", edgesMm.x(), 0)
                .above("edges_mm[1]", edgesMm.y(), 0)
                .above("edges_mm[2]", edgesMm.z(), 0)
                .orThrow();
    }

    @Override
    public boolean clip(double ox, double oy, double oz, double dx, double dy, double dz, double[] span) {
        Span.open(span);
        return Span.slab(ox, dx, 0.5 * edgesMm.x(), span)
                && Span.slab(oy, dy, 0.5 * edgesMm.y(), span)
                && Span.slab(oz, dz, 0.5 * edgesMm.z(), span)
                && Span.proper(span);
    }

    @Override
    public boolean contains(double x, double y, double z) {
        return Math.abs(x) <= 0.5 * edgesMm.x() && Math.abs(y) <= 0.5 * edgesMm.y() && Math.abs(z) <= 0.5 * edgesMm.z();
    }

    @Override
    public double volumeMm3() {
        return edgesMm.x() * edgesMm.y() * edgesMm.z();
    }

    @Override
    public double reach(double ux, double uy, double uz) {
        return 0.5 * (Math.abs(ux) * edgesMm.x() + Math.abs(uy) * edgesMm.y() + Math.abs(uz) * edgesMm.z());
    }

    @Override
    public void pick(DoubleSupplier uniform, double[] point) {
        point[0] = edgesMm.x() * (uniform.getAsDouble() - 0.5);
        point[1] = edgesMm.y() * (uniform.getAsDouble() - 0.5);
        point[2] = edgesMm.z() * (uniform.getAsDouble() - 0.5);
    }
}
