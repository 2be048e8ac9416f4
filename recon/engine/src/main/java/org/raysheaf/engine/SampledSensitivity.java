package org.raysheaf.engine;

import java.util.Arrays;
import java.util.Locale;
import java.util.Optional;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.sheaf.SheafCatalogue;
import org.raysheaf.geometry.sheaf.SheafSampler;

/**
 * The sensitivity image from samples, for systems whose sheaves are too many or endless, with its standard error. {@value #REPLICATES}
 * independent sequences are drawn from in rounds, each as long as all before it together; after a round the scatter of the replicates tells
 * the error of their mean (with 7 degrees of freedom in a single voxel), and sampling stops when it is small enough.
 *
 * @param mean the sensitivity per voxel (mm³ if the weights are in mm²)
 * @param standardError its standard error (same unit)
 * @param relativeError standard error over sensitivity, root mean square over the voxels of the field of view that have at least a tenth
 *     of the largest sensitivity
 * @param sheaves how many sheaves were tried
 * @param reached whether the error that was asked for was reached
 */
public record SampledSensitivity(Image mean, Image standardError, double relativeError, long sheaves, boolean reached) {
    /** Independent sequences. */
    public static final int REPLICATES = 8;

    private static final int FIRST_ROUND = 128;
    private static final double FAINT = 0.1;

    /** Numbers that a kept row has beside the voxels. */
    private static final int EXTRA = 4;

    /**
     * When to stop: whichever comes first.
     *
     * @param relativeError the relative standard error that is enough, above 0
     * @param mostSheaves no further round is begun that would go beyond this number of sheaves
     */
    public record Stop(double relativeError, long mostSheaves) {}

    /**
     * Samples until a stop.
     *
     * @param sampler draws from all sheaves of a system
     * @param grid where to compute the sensitivity
     * @param view over which the error is asked for
     * @param stop when to stop; one round is always made
     * @param pool does the work; the result does not depend on its size
     * @param progress hears of the rounds
     * @return the sensitivity with its error
     */
    public static SampledSensitivity of(
            SheafSampler sampler, Grid grid, FieldOfView view, Stop stop, ForkJoinPool pool, Progress progress) {
        double[][] sums = new double[REPLICATES][grid.voxels()];
        progress.begin("sampling the sensitivity", 0, "rounds");
        long sheaves = 0;
        int drawn = 0;
        SampledSensitivity result;
        do {
            int points = Math.max(FIRST_ROUND, drawn);
            for (int replicate = 0; replicate < REPLICATES; replicate++) {
                SheafCatalogue sample = sampler.draw(replicate, drawn, points);
                for (int part = 0; part < sample.parts(); part++) {
                    sheaves += sample.capacity(part);
                }
                add(Sensitivity.of(sample, grid, pool, Progress.SILENT), points, sums[replicate]);
            }
            drawn += points;
            result = summary(sums, drawn, grid, view, sheaves, stop.relativeError());
            progress.advance(1);
            progress.remark(percent(result.relativeError));
        } while (!result.reached && 2 * sheaves <= stop.mostSheaves() && drawn < 1 << 28);
        progress.end(percent(result.relativeError) + " standard error");
        return result;
    }

    /**
     * All numbers, to be kept and given to {@link #restore} later.
     *
     * @return mean, standard error and the rest in one row
     */
    public float[] toFloats() {
        int voxels = mean.values().length;
        float[] row = Arrays.copyOf(mean.values(), 2 * voxels + EXTRA);
        System.arraycopy(standardError.values(), 0, row, voxels, voxels);
        row[2 * voxels] = (float) relativeError;
        row[2 * voxels + 1] = sheaves >>> 24; // a float holds whole numbers of 24 bits
        row[2 * voxels + 2] = sheaves & 0xffffff;
        row[2 * voxels + 3] = reached ? 1 : 0;
        return row;
    }

    /**
     * Takes numbers that were kept.
     *
     * @param row what {@link #toFloats()} gave
     * @param grid the grid that they belong to
     * @return the sensitivity, or empty if the row has another length
     */
    public static Optional<SampledSensitivity> restore(float[] row, Grid grid) {
        int voxels = grid.voxels();
        if (row.length != 2 * voxels + EXTRA) {
            return Optional.empty();
        }
        long sheaves = ((long) row[2 * voxels + 1] << 24) + (long) row[2 * voxels + 2];
        return Optional.of(new SampledSensitivity(
                new Image(grid, Arrays.copyOf(row, voxels)),
                new Image(grid, Arrays.copyOfRange(row, voxels, 2 * voxels)),
                row[2 * voxels],
                sheaves,
                row[2 * voxels + 3] > 0));
    }

    private static String percent(double share) {
        return String.format(Locale.ROOT, "%.2f %%", 100 * share);
    }

    private static void add(Image estimate, int points, double[] sum) {
        for (int j = 0; j < sum.length; j++) {
            sum[j] += (double) points * estimate.values()[j];
        }
    }

    private static SampledSensitivity summary(
            double[][] sums, int drawn, Grid grid, FieldOfView view, long sheaves, double wanted) {
        Image mean = new Image(grid);
        Image error = new Image(grid);
        float largest = 0;
        for (int j = 0; j < grid.voxels(); j++) {
            double sum = 0;
            for (double[] one : sums) {
                sum += one[j];
            }
            double middle = sum / REPLICATES;
            double squares = 0;
            for (double[] one : sums) {
                squares += (one[j] - middle) * (one[j] - middle);
            }
            mean.values()[j] = (float) (middle / drawn);
            error.values()[j] = (float) (Math.sqrt(squares / (REPLICATES - 1) / REPLICATES) / drawn);
            largest = Math.max(largest, mean.values()[j]);
        }
        double relative = relativeError(mean, error, view, (float) (FAINT * largest));
        return new SampledSensitivity(mean, error, relative, sheaves, relative <= wanted);
    }

    private static double relativeError(Image mean, Image error, FieldOfView view, float faint) {
        Grid grid = mean.grid();
        double squares = 0;
        int counted = 0;
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    Vector3 p = grid.centre(x, y, z);
                    float value = mean.at(x, y, z);
                    if (value > faint && view.contains(p.x(), p.y(), p.z())) {
                        double ratio = error.at(x, y, z) / value;
                        squares += ratio * ratio;
                        counted++;
                    }
                }
            }
        }
        return counted == 0 ? Double.POSITIVE_INFINITY : Math.sqrt(squares / counted);
    }
}
