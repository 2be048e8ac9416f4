package org.raysheaf.app;

import java.io.IOException;
import java.util.ArrayList;
import java.util.List;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.settings.Problems;

/**
 * What an image of a known, uniform phantom must be multiplied with ({@code raysheaf: calibration/1}): 1 for a perfect model. Measured once,
 * applied to later images of the same system.
 *
 * @param factor true over found concentration
 * @param relativeError relative standard error of the factor, from the scatter of its slices
 * @param system name of the system
 */
record Calibration(double factor, double relativeError, String system) {
    /** Voxels nearer than this to the edge of their region do not count (mm): resolution mixes them with what is beside. */
    private static final double EDGE_MM = 3;

    private static final int FEWEST_SLICES = 4;

    Calibration {
        new Problems("calibration")
                .above("factor", factor, 0)
                .atLeast("relative_error", relativeError, 0)
                .orThrow();
    }

    /**
     * Compares an image with its phantom.
     *
     * @param activityBqPerMl the image
     * @param phantom what was in the field of view; its activity holds at the start of the list
     * @param viewHalfLengthMm only slices within three quarters of this count
     * @param system name of the system
     * @throws IOException if the phantom has too few voxels well inside something radioactive
     */
    static Calibration of(Image activityBqPerMl, Phantom phantom, double viewHalfLengthMm, String system)
            throws IOException {
        Grid grid = activityBqPerMl.grid();
        List<Double> slices = new ArrayList<>();
        for (int z = 0; z < grid.nz(); z++) {
            double found = 0;
            double known = 0;
            for (int x = 0; x < grid.nx(); x++) {
                for (int y = 0; y < grid.ny(); y++) {
                    Vector3 p = grid.centre(x, y, z);
                    if (Math.abs(p.z()) < 0.75 * viewHalfLengthMm && wellInside(phantom, p)) {
                        found += activityBqPerMl.at(x, y, z);
                        known += phantom.concentrationBqPerMlAt(p.x(), p.y(), p.z());
                    }
                }
            }
            if (known > 0 && found > 0) {
                slices.add(known / found);
            }
        }
        if (slices.size() < FEWEST_SLICES) {
            throw new IOException("the reference phantom "
                    + phantom.description().name()
                    + ": expected a radioactive part that reaches " + EDGE_MM + " mm around some voxels in at least "
                    + FEWEST_SLICES + " slices, found " + slices.size() + " such slices");
        }
        double mean = slices.stream().mapToDouble(Double::doubleValue).average().orElseThrow();
        double squares =
                slices.stream().mapToDouble(s -> (s - mean) * (s - mean)).sum();
        double error = Math.sqrt(squares / (slices.size() - 1) / slices.size());
        return new Calibration(mean, error / mean, system);
    }

    private static boolean wellInside(Phantom phantom, Vector3 p) {
        int region = phantom.regionAt(p.x(), p.y(), p.z());
        if (region < 0 || !(phantom.concentrationBqPerMl(region) > 0)) {
            return false;
        }
        for (int i = 0; i < 6; i++) {
            double d = i % 2 == 0 ? EDGE_MM : -EDGE_MM;
            double x = p.x() + (i / 2 == 0 ? d : 0);
            double y = p.y() + (i / 2 == 1 ? d : 0);
            double z = p.z() + (i / 2 == 2 ? d : 0);
            if (phantom.regionAt(x, y, z) != region) {
                return false;
            }
        }
        return true;
    }
}
