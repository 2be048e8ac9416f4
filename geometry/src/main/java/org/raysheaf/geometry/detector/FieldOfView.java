package org.raysheaf.geometry.detector;

import org.raysheaf.geometry.settings.Problems;

/**
 * The cylinder around the z axis, centred on the origin, in which activity is looked for.
 *
 * @param radiusMm radius (mm), greater than 0
 * @param lengthMm length along z (mm), greater than 0
 */
public record FieldOfView(double radiusMm, double lengthMm) {
    public FieldOfView {
        new Problems("field of view")
                .above("radius_mm", radiusMm, 0)
                .above("length_mm", lengthMm, 0)
                .orThrow();
    }

    /**
     * Whether a point lies inside, the surface included.
     *
     * @param x coordinate (mm)
     * @param y coordinate (mm)
     * @param z coordinate (mm)
     * @return true if it does
     */
    public boolean contains(double x, double y, double z) {
        return x * x + y * y <= radiusMm * radiusMm && Math.abs(z) <= 0.5 * lengthMm;
    }
}
