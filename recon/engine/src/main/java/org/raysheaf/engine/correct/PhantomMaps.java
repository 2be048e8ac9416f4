package org.raysheaf.engine.correct;

import java.util.SplittableRandom;
import java.util.function.IntToDoubleFunction;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.KleinNishina;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.Source;
import org.raysheaf.geometry.solid.Bounds;

/** A phantom as volumes: what attenuates, and where activity is. Voxels hold the mean over 27 points. */
public final class PhantomMaps {
    private static final int SAMPLES = 3;
    private static final int MOST_VOXELS = 1 << 24;
    private static final int PICKS = 200_000;
    private static final double MM3_PER_ML = 1000;

    private PhantomMaps() {}

    /**
     * Attenuation at 511 keV, without coherent scatter.
     *
     * @param phantom what attenuates; an ideal material does not
     * @param voxelMm wanted size of a voxel (mm); larger ones are taken if there would be more than 16 million
     * @return the map (1/mm) over all of the phantom
     */
    public static Image attenuation(Phantom phantom, double voxelMm) {
        double[] mu = new double[phantom.regions()];
        for (int region = 0; region < mu.length; region++) {
            mu[region] = phantom.material(region).ideal()
                    ? 0
                    : phantom.material(region).attenuationPerMm(KleinNishina.ELECTRON_KEV, false);
        }
        return fill(phantom, grid(phantom.bounds(), voxelMm), region -> mu[region]);
    }

    /**
     * Activity concentration at the start.
     *
     * @param phantom what is radioactive; points, lines and surfaces are spread over the voxels that they cross
     * @param voxelMm wanted size of a voxel (mm)
     * @return the map (Bq/mL)
     */
    public static Image activity(Phantom phantom, double voxelMm) {
        Bounds bounds = phantom.bounds();
        double[] point = new double[3];
        SplittableRandom random = new SplittableRandom(1);
        for (Source source : phantom.description().sources()) {
            for (int i = 0; i < 100; i++) {
                source.pick(random::nextDouble, point);
                Vector3 p = new Vector3(point[0], point[1], point[2]);
                bounds = bounds.with(new Bounds(p, p));
            }
        }
        Grid grid = grid(bounds, voxelMm);
        Image map = fill(phantom, grid, phantom::concentrationBqPerMl);
        for (Source source : phantom.description().sources()) {
            double each = 1000 * source.activityKBq() / PICKS / (grid.voxelVolumeMm3() / MM3_PER_ML);
            for (int i = 0; i < PICKS; i++) {
                source.pick(random::nextDouble, point);
                Vector3 at = grid.indices(new Vector3(point[0], point[1], point[2]));
                int x = clamp(at.x(), grid.nx());
                int y = clamp(at.y(), grid.ny());
                int z = clamp(at.z(), grid.nz());
                map.values()[grid.index(x, y, z)] += (float) each;
            }
        }
        return map;
    }

    private static int clamp(double index, int count) {
        return (int) Math.max(0, Math.min(count - 1, Math.rint(index)));
    }

    private static Grid grid(Bounds bounds, double voxelMm) {
        Vector3 size = bounds.halfExtents().times(2);
        double voxel = voxelMm;
        while ((size.x() / voxel + 3) * (size.y() / voxel + 3) * (size.z() / voxel + 3) > MOST_VOXELS) {
            voxel *= 1.2;
        }
        return new Grid(
                (int) Math.ceil(size.x() / voxel) + 2,
                (int) Math.ceil(size.y() / voxel) + 2,
                (int) Math.ceil(size.z() / voxel) + 2,
                voxel,
                voxel,
                voxel,
                Pose.shift(bounds.centre()));
    }

    private static Image fill(Phantom phantom, Grid grid, IntToDoubleFunction ofRegion) {
        Image map = new Image(grid);
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    map.values()[grid.index(x, y, z)] = (float) mean(phantom, grid, x, y, z, ofRegion);
                }
            }
        }
        return map;
    }

    private static double mean(Phantom phantom, Grid grid, int x, int y, int z, IntToDoubleFunction ofRegion) {
        double sum = 0;
        for (int i = 0; i < SAMPLES * SAMPLES * SAMPLES; i++) {
            Vector3 p = grid.centre(
                    x + offset(i % SAMPLES), y + offset(i / SAMPLES % SAMPLES), z + offset(i / SAMPLES / SAMPLES));
            int region = phantom.regionAt(p.x(), p.y(), p.z());
            sum += region < 0 ? 0 : ofRegion.applyAsDouble(region);
        }
        return sum / (SAMPLES * SAMPLES * SAMPLES);
    }

    private static double offset(int i) {
        return (i + 0.5) / SAMPLES - 0.5;
    }
}
