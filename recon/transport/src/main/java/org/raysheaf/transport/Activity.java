package org.raysheaf.transport;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.function.DoubleSupplier;
import org.apache.commons.rng.UniformRandomProvider;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.Source;
import org.raysheaf.geometry.solid.Placed;

/**
 * Where decays happen. A region is chosen in proportion to concentration · volume of its whole solid, then a point in that solid, and
 * the point is dropped if a later part fills it. Candidates therefore come at the rate of all solids as if none were replaced, and what
 * is left has exactly the density that the phantom describes, without any volume of an overlap being known. Immutable.
 */
final class Activity {
    private static final double MM3_PER_ML = 1000;

    private final Phantom phantom;
    private final List<Place> places = new ArrayList<>();
    private double[] activityUpTo = new double[0];

    /** Something that holds activity. */
    private interface Place {
        /** Draws a point; false if something else fills it. */
        boolean draw(UniformRandomProvider random, double[] point);
    }

    Activity(Phantom phantom) {
        this.phantom = phantom;
        for (int part = 0; part < phantom.parts().size(); part++) {
            double concentration = phantom.concentrationBqPerMl(part);
            if (concentration > 0) {
                add(concentration / MM3_PER_ML * phantom.solid(part).volumeMm3(), solid(part));
            }
        }
        Grid grid = phantom.volumeGrid();
        if (grid != null) {
            addVoxels(grid);
        }
        for (Source source : phantom.description().sources()) {
            add(1000 * source.activityKBq(), (random, point) -> {
                DoubleSupplier uniform = random::nextDouble;
                source.pick(uniform, point);
                return true;
            });
        }
    }

    private void add(double activityBq, Place place) {
        int n = places.size();
        places.add(place);
        activityUpTo = Arrays.copyOf(activityUpTo, n + 1);
        activityUpTo[n] = activityBq + (n == 0 ? 0 : activityUpTo[n - 1]);
    }

    private Place solid(int part) {
        Placed solid = phantom.solid(part);
        return (random, point) -> {
            solid.pick(random::nextDouble, point);
            return !coveredByPart(part + 1, point);
        };
    }

    private boolean coveredByPart(int from, double[] point) {
        for (int later = phantom.parts().size() - 1; later >= from; later--) {
            if (phantom.solid(later).contains(point[0], point[1], point[2])) {
                return true;
            }
        }
        return false;
    }

    private void addVoxels(Grid grid) {
        int[] voxels = new int[grid.voxels()];
        double[] upTo = new double[grid.voxels()];
        int count = 0;
        double sum = 0;
        for (int j = 0; j < grid.voxels(); j++) {
            int region = phantom.regionOfVoxel(j);
            double concentration = region < 0 ? 0 : phantom.concentrationBqPerMl(region);
            if (concentration > 0) {
                sum += concentration / MM3_PER_ML * grid.voxelVolumeMm3();
                voxels[count] = j;
                upTo[count++] = sum;
            }
        }
        if (count > 0) {
            add(sum, voxels(grid, Arrays.copyOf(voxels, count), Arrays.copyOf(upTo, count)));
        }
    }

    private Place voxels(Grid grid, int[] voxels, double[] upTo) {
        return (random, point) -> {
            int at = Arrays.binarySearch(upTo, random.nextDouble() * upTo[upTo.length - 1]);
            int voxel = voxels[Math.min(voxels.length - 1, at >= 0 ? at + 1 : -at - 1)];
            int z = voxel % grid.nz();
            int y = voxel / grid.nz() % grid.ny();
            int x = voxel / grid.nz() / grid.ny();
            Vector3 place = grid.centre(
                    x + random.nextDouble() - 0.5, y + random.nextDouble() - 0.5, z + random.nextDouble() - 0.5);
            point[0] = place.x();
            point[1] = place.y();
            point[2] = place.z();
            return !coveredByPart(0, point);
        };
    }

    /** Activity of all candidates at the start (Bq): that of the phantom, plus what later parts replace. */
    double candidateBq() {
        return places.isEmpty() ? 0 : activityUpTo[places.size() - 1];
    }

    /**
     * Draws a candidate.
     *
     * @param random the stream to draw from
     * @param point receives the place of the decay (mm)
     * @return whether it is one: false if a later part fills the point
     */
    boolean draw(UniformRandomProvider random, double[] point) {
        double u = random.nextDouble() * candidateBq();
        int i = 0;
        while (u >= activityUpTo[i] && i < places.size() - 1) {
            i++;
        }
        return places.get(i).draw(random, point);
    }
}
