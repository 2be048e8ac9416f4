package org.raysheaf.geometry.solid;

import java.util.function.DoubleSupplier;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Problems;

/**
 * An ellipsoid about the origin, x²/a² + y²/b² + z²/c² ≤ 1: the unit ball after stretching each axis. Stretching keeps
 * lines straight and their parameters unchanged, so everything is asked of the unit ball.
 *
 * @param semiAxesMm the semi-axes a, b, c (mm), each greater than 0
 */
public record Ellipsoid(Vector3 semiAxesMm) implements Shape {
    public Ellipsoid {
        new Problems("ellipsoid")
                .above("semi_axes_mm[0]", semiAxesMm.x(), 0)
                .above("semi_axes_mm[1]", semiAxesMm.y(), 0)
                .above("semi_axes_mm[2]", semiAxesMm.z(), 0)
                .orThrow();
    }

    @Override
    public boolean clip(double ox, double oy, double oz, double dx, double dy, double dz, double[] span) {
        double a = semiAxesMm.x();
        double b = semiAxesMm.y();
        double c = semiAxesMm.z();
        Span.open(span);
        return Span.ball(ox / a, oy / b, oz / c, dx / a, dy / b, dz / c, 1, span) && Span.proper(span);
    }

    @Override
    public boolean contains(double x, double y, double z) {
        double px = x / semiAxesMm.x();
        double py = y / semiAxesMm.y();
        double pz = z / semiAxesMm.z();
        return px * px + py * py + pz * pz <= 1;
    }

    @Override
    public double volumeMm3() {
        return 4.0 / 3 * Math.PI * semiAxesMm.x() * semiAxesMm.y() * semiAxesMm.z();
    }

    @Override
    public double reach(double ux, double uy, double uz) {
        return new Vector3(ux * semiAxesMm.x(), uy * semiAxesMm.y(), uz * semiAxesMm.z()).norm();
    }

    @Override
    public void pick(DoubleSupplier uniform, double[] point) {
        Chance.unitBall(uniform, point);
        point[0] *= semiAxesMm.x();
        point[1] *= semiAxesMm.y();
        point[2] *= semiAxesMm.z();
    }
}
