package org.raysheaf.quality;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.phantom.Phantom;

/**
 * What an image of a known, uniform phantom must be multiplied with: 1 for a perfect model.
 *
 * @param factor true over found concentration
 * @param relativeError relative standard error of the factor, from the scatter of its slices
 */
public record ReferenceFactor(double factor, double relativeError) {
    /** Voxels nearer than this to the edge of their region do not count (mm): resolution mixes them with what is beside. */
    public static final double EDGE_MM = 3;

    /** An error cannot be told from fewer slices. */
    public static final int FEWEST_SLICES = 4;

    /** Slices beyond this share of the field of view are seen too badly to count. */
    private static final double WELL_SEEN = 0.75;

    /**
     * Compares an image with its phantom.
     *
     * @param activityBqPerMl the image
     * @param phantom what was in the field of view; its activity holds at the time of the image
     * @param viewHalfLengthMm half the length of the field of view (mm); slices within three quarters of it count
     * @return the factor, or nothing if fewer than {@value #FEWEST_SLICES} slices have voxels well inside something radioactive
     */
    public static Optional<ReferenceFactor> of(Image activityBqPerMl, Phantom phantom, double viewHalfLengthMm) {
        Grid grid = activityBqPerMl.grid();
        List<Double> slices = new ArrayList<>();
        for (int z = 0; z < grid.nz(); z++) {
            double found = 0;
            double known = 0;
            for (int x = 0; x < grid.nx(); x++) {
                for (int y = 0; y < grid.ny(); y++) {
                    Vector3 p = grid.centre(x, y, z);
                    if (Math.abs(p.z()) < WELL_SEEN * viewHalfLengthMm && wellInside(phantom, p)) {
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
            return Optional.empty();
        }
        double mean = slices.stream().mapToDouble(Double::doubleValue).average().orElseThrow();
        double squares =
                slices.stream().mapToDouble(s -> (s - mean) * (s - mean)).sum();
        double error = Math.sqrt(squares / (slices.size() - 1) / slices.size());
        return Optional.of(new ReferenceFactor(mean, error / mean));
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
