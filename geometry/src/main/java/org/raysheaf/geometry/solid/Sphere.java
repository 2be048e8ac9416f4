package org.raysheaf.geometry.solid;

import java.util.function.DoubleSupplier;
import org.raysheaf.geometry.settings.Problems;

/**
 * A ball about the origin. Its chord at distance b from the centre is 2 √(r² − b²).
 *
 * @param radiusMm radius (mm), greater than 0
 */
public record Sphere(double radiusMm) implements Shape {
    public Sphere {
        new Problems("sphere").above("radius_mm", radiusMm, 0).orThrow();
    }

    @Override
    public boolean clip(double ox, double oy, double oz, double dx, double dy, double dz, double[] span) {
        Span.open(span);
        return Span.ball(ox, oy, oz, dx, dy, dz, radiusMm, span) && Span.proper(span);
    }

    @Override
    public boolean contains(double x, double y, double z) {
        return x * x + y * y + z * z <= radiusMm * radiusMm;
    }

    @Override
    public double volumeMm3() {
        return 4.0 / 3 * Math.PI * radiusMm * radiusMm * radiusMm;
    }

    @Override
    public double reach(double ux, double uy, double uz) {
        return radiusMm * Math.sqrt(ux * ux + uy * uy + uz * uz);
    }

    @Override
    public void pick(DoubleSupplier uniform, double[] point) {
        Chance.unitBall(uniform, point);
        point[0] *= radiusMm;
        point[1] *= radiusMm;
        point[2] *= radiusMm;
    }
}
