package org.raysheaf.engine;

import java.util.concurrent.ForkJoinPool;
import org.raysheaf.engine.ray.Joseph;
import org.raysheaf.engine.ray.Lattice;
import org.raysheaf.engine.ray.Walks;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafCatalogue;

/**
 * The sensitivity image, as the exact sum over everything that a system can record:
 *
 * <pre>
 * S_j = Σ_rays weight · (length of the ray in voxel j)      (mm³, with weights in mm²)
 * </pre>
 *
 * <p>in the same projector as the events, so that the two belong together. Times 10⁻³ mL/mm³ and the pairs emitted per becquerel it is in counts per Bq/mL.
 *
 * <p>The rays are dealt to lanes in rounds of about a million per lane. Within a round single precision is good enough (a voxel receives
 * some hundreds of contributions of similar size); between rounds the lanes are added to a sum in double precision, so the error does not
 * grow with the size of the catalogue.
 */
public final class Sensitivity {
    private static final long RAYS_PER_TURN = 1 << 20;

    /** What a part costs beyond its rays, in rays. */
    private static final int FIXED_COST = 16;

    private final SheafCatalogue catalogue;
    private final Lattice lattice;
    private final Lanes lanes;
    private final int turns;
    private final double[] sum;

    private Sensitivity(SheafCatalogue catalogue, Grid grid, ForkJoinPool pool) {
        this.catalogue = catalogue;
        lattice = new Lattice(grid);
        long rays = 0;
        for (int part = 0; part < catalogue.parts(); part++) {
            rays += cost(part);
        }
        lanes = new Lanes(Lanes.suited(rays * longestWalk(grid) / 2, grid.voxels()), lattice, pool);
        long perRound = RAYS_PER_TURN * lanes.count();
        turns = (int) ((rays + perRound - 1) / perRound) * lanes.count();
        sum = new double[lattice.size()];
    }

    private static int longestWalk(Grid grid) {
        return Math.max(grid.nx(), Math.max(grid.ny(), grid.nz()));
    }

    /**
     * Sums over a catalogue.
     *
     * @param catalogue all sheaves of a system
     * @param grid where to compute the sensitivity
     * @param pool does the work; the result does not depend on its size
     * @param progress hears of the parts done
     * @return the sensitivity per voxel (mm³ if the weights are in mm²)
     */
    public static Image of(SheafCatalogue catalogue, Grid grid, ForkJoinPool pool, Progress progress) {
        Sensitivity sensitivity = new Sensitivity(catalogue, grid, pool);
        progress.begin("summing the sensitivity", catalogue.parts(), "parts");
        int[] starts = sensitivity.starts();
        for (int turn = 0; turn < sensitivity.turns; turn += sensitivity.lanes.count()) {
            sensitivity.round(starts, turn, progress);
        }
        progress.end("");
        return sensitivity.image();
    }

    private long cost(int part) {
        return (long) catalogue.capacity(part) * catalogue.raysPerSheaf() + FIXED_COST;
    }

    /** Where each turn of a lane starts: parts in order, cut by cost. */
    private int[] starts() {
        long total = 0;
        for (int part = 0; part < catalogue.parts(); part++) {
            total += cost(part);
        }
        int[] starts = new int[turns + 1];
        long done = 0;
        int part = 0;
        for (int turn = 0; turn < turns; turn++) {
            starts[turn] = part;
            long goal = (long) ((double) total * (turn + 1) / turns);
            while (part < catalogue.parts() && done < goal) {
                done += cost(part++);
            }
        }
        starts[turns] = catalogue.parts();
        return starts;
    }

    private void round(int[] starts, int turn, Progress progress) {
        lanes.each(lane -> {
            Joseph joseph = new Joseph(lattice);
            for (int part = starts[turn + lane]; part < starts[turn + lane + 1]; part++) {
                add(part, joseph, lanes.accumulator(lane));
                progress.advance(1);
            }
        });
        lanes.collect((first, last, sums) -> {
            for (int j = first; j < last; j++) {
                sum[j] += sums[j];
            }
            return 0;
        });
    }

    private void add(int part, Joseph joseph, float[] accumulator) {
        SheafBundle bundle = new SheafBundle(catalogue.raysPerSheaf(), Math.max(1, catalogue.capacity(part)));
        catalogue.fill(part, bundle);
        int rays = bundle.size() * bundle.raysPerSheaf();
        Walks walk = new Walks(lattice, 1);
        for (int ray = 0; ray < rays; ray++) {
            walk.set(0, bundle.rays(), ray, bundle.weights()[ray]);
            joseph.aim(walk, 0);
            joseph.back(1, accumulator);
        }
    }

    private Image image() {
        float[] values = new float[sum.length];
        for (int j = 0; j < values.length; j++) {
            values[j] = (float) sum[j];
        }
        return lattice.toImage(values);
    }
}
