package org.raysheaf.engine.correct;

import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.KleinNishina;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.response.PairFactor;
import org.raysheaf.geometry.solid.Bounds;

/**
 * Probability that neither photon of a pair is lost in the object: exp(−∫µ dl) along the whole line, wherever on it the decay was. The same
 * rule serves events and sensitivity. Immutable, safe for use by several threads.
 */
public final class Attenuation implements PairFactor.Maker {
    private static final int SAMPLES = 3;
    private static final int MOST_VOXELS = 1 << 24;

    private final Image muPerMm;
    private final RaySums sums;

    /**
     * Takes a map of attenuation coefficients at 511 keV.
     *
     * @param muPerMm the map (1/mm), on a grid of its own; outside it nothing attenuates
     * @throws IllegalArgumentException if a value is negative or not finite
     */
    public Attenuation(Image muPerMm) {
        for (float mu : muPerMm.values()) {
            if (!(mu >= 0 && mu < Float.POSITIVE_INFINITY)) {
                throw new IllegalArgumentException("attenuation coefficients must be finite and at least 0: " + mu);
            }
        }
        this.muPerMm = muPerMm;
        this.sums = new RaySums(muPerMm);
    }

    /**
     * The map of a phantom: µ at 511 keV without coherent scatter, averaged over 27 points in each voxel.
     *
     * @param phantom what attenuates; an ideal material does not
     * @param voxelMm wanted size of a voxel (mm); larger ones are taken if there would be more than 16 million
     * @return the map (1/mm) over all of the phantom
     */
    public static Image map(Phantom phantom, double voxelMm) {
        Bounds bounds = phantom.bounds();
        Vector3 size = bounds.halfExtents().times(2);
        double voxel = voxelMm;
        while ((size.x() / voxel + 3) * (size.y() / voxel + 3) * (size.z() / voxel + 3) > MOST_VOXELS) {
            voxel *= 1.2;
        }
        Grid grid = new Grid(
                (int) Math.ceil(size.x() / voxel) + 2,
                (int) Math.ceil(size.y() / voxel) + 2,
                (int) Math.ceil(size.z() / voxel) + 2,
                voxel,
                voxel,
                voxel,
                Pose.shift(bounds.centre()));
        double[] mu = new double[phantom.regions()];
        for (int region = 0; region < mu.length; region++) {
            mu[region] = phantom.material(region).ideal()
                    ? 0
                    : phantom.material(region).attenuationPerMm(KleinNishina.ELECTRON_KEV, false);
        }
        Image map = new Image(grid);
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    map.values()[grid.index(x, y, z)] = (float) mean(phantom, grid, x, y, z, mu);
                }
            }
        }
        return map;
    }

    private static double mean(Phantom phantom, Grid grid, int x, int y, int z, double[] mu) {
        double sum = 0;
        for (int i = 0; i < SAMPLES * SAMPLES * SAMPLES; i++) {
            Vector3 p = grid.centre(
                    x + offset(i % SAMPLES), y + offset(i / SAMPLES % SAMPLES), z + offset(i / SAMPLES / SAMPLES));
            int region = phantom.regionAt(p.x(), p.y(), p.z());
            sum += region < 0 ? 0 : mu[region];
        }
        return sum / (SAMPLES * SAMPLES * SAMPLES);
    }

    private static double offset(int i) {
        return (i + 0.5) / SAMPLES - 0.5;
    }

    /**
     * The map.
     *
     * @return attenuation coefficients (1/mm), shared
     */
    public Image muPerMm() {
        return muPerMm;
    }

    @Override
    public PairFactor make() {
        RaySums mine = sums.twin();
        return (a, b, line) -> Math.exp(-mine.along(line));
    }
}
