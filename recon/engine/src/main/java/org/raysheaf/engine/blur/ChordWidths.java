package org.raysheaf.engine.blur;

import java.util.Arrays;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.engine.ray.Tasks;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.RayPath;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Problems;

/**
 * How far, in the mean over all chords through a point, a recorded line misses the point, because of
 *
 * <ul>
 *   <li>acollinearity: with distances d₁, d₂ to the crystals and an angle of standard deviation σ in each transverse component, a line
 *       misses by σ d₁d₂/(d₁+d₂), most in the middle;
 *   <li>the width of crystals, each seen as the line through its middle: a box of width w at either end, of variance w²/12, scaled by the lever
 *       of the other end, makes w²/12 · (d₁²+d₂²)/(d₁+d₂)², least in the middle (a triangle of FWHM w/2).
 * </ul>
 *
 * <p>The variance holds for each direction across the chord. An isotropic kernel of that variance blurs every chord's line integral as much as
 * it must be blurred, since what happens along a chord does not change its integral. Chords tell apart places along the grid's first two axes
 * only: they are averaged along the third, which suits systems built around that axis. Distances are those to the middle of crystals and chords may
 * be oblique, so in the middle of a long ring widths are 5 to 25 % above the rule of 0.00218 times the diameter from face to face. Not in it: oblique incidence (parallax), scatter between
 * crystals. Immutable.
 */
public final class ChordWidths {
    /** Nodes along each of two axes, between which variances are interpolated; a ring's vary as the square of the radius. */
    private static final int NODES = 17;
    /** Directions per node: squared levers scatter by half their mean, so a mean of 400 is good to 3 %, a width to 1.5 %. */
    private static final int DIRECTIONS = 400;

    private static final double GOLDEN = (Math.sqrt(5) - 1) / 2;

    private final Grid grid;
    private final double[] varianceMm2;

    private ChordWidths(Grid grid, double[] varianceMm2) {
        this.grid = grid;
        this.varianceMm2 = varianceMm2;
    }

    /**
     * Looks from points of a grid in all directions.
     *
     * @param system the detectors
     * @param grid where widths are wanted
     * @param acollinearityFwhmDeg FWHM of the angle by which two photons depart from opposite directions, in each transverse component (deg);
     *     0 for none
     * @param crystalWidth whether crystals are wider than a line
     * @param pool does the work
     * @return the widths
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if no chord between two crystals crosses the grid
     */
    public static ChordWidths of(
            DetectorSystem system, Grid grid, double acollinearityFwhmDeg, boolean crystalWidth, ForkJoinPool pool) {
        double sigma = Math.toRadians(acollinearityFwhmDeg) / Mixture.FWHM_PER_SIGMA;
        double[] variances = new double[NODES * NODES];
        Tasks.forEach(
                pool,
                variances.length,
                node -> variances[node] = meanVariance(system, grid, node, sigma * sigma, crystalWidth ? 1 : 0));
        double mean =
                Arrays.stream(variances).filter(v -> !Double.isNaN(v)).average().orElse(Double.NaN);
        new Problems("blur")
                .rule(!Double.isNaN(mean), "acollinearity_fwhm_deg", "no line between two crystals crosses the grid")
                .orThrow();
        for (int node = 0; node < variances.length; node++) {
            // beyond the detectors nothing is seen, so any value will do
            variances[node] = Double.isNaN(variances[node]) ? mean : variances[node];
        }
        return new ChordWidths(grid, variances);
    }

    /** NaN if no chord meets the node's line of points. */
    private static double meanVariance(DetectorSystem system, Grid grid, int node, double sigma2, double crystalShare) {
        int column = node / NODES;
        int row = node % NODES;
        double x = column * (grid.nx() - 1.0) / (NODES - 1);
        double y = row * (grid.ny() - 1.0) / (NODES - 1);
        RayPath path = new RayPath();
        double sum = 0;
        int chords = 0;
        for (int i = 0; i < DIRECTIONS; i++) {
            Vector3 from = grid.centre(x, y, fraction(i * Math.sqrt(2)) * (grid.nz() - 1));
            double cos = (i + 0.5) / DIRECTIONS;
            double sin = Math.sqrt(1 - cos * cos);
            double phi = 2 * Math.PI * fraction(i * GOLDEN);
            Vector3 way = new Vector3(sin * Math.cos(phi), sin * Math.sin(phi), cos);
            int a = first(system, from, way, path);
            int b = first(system, from, way.times(-1), path);
            if (a >= 0 && b >= 0 && system.admits(a, b)) {
                double toA = system.centre(a).minus(from).norm();
                double toB = system.centre(b).minus(from).norm();
                double lever = toB / (toA + toB);
                sum += sigma2 * toA * toA * lever * lever
                        + crystalShare * lever * lever * faceVariance(system.size(a))
                        + crystalShare * (1 - lever) * (1 - lever) * faceVariance(system.size(b));
                chords++;
            }
        }
        return chords == 0 ? Double.NaN : sum / chords;
    }

    private static int first(DetectorSystem system, Vector3 from, Vector3 way, RayPath path) {
        system.trace(from.x(), from.y(), from.z(), way.x(), way.y(), way.z(), path);
        return path.size() > 0 && path.enter(0) > 0 ? path.element(0) : -1;
    }

    /** Mean of the variances of the two edges of the face. */
    private static double faceVariance(Vector3 size) {
        return (size.x() * size.x() + size.y() * size.y()) / 24;
    }

    private static double fraction(double value) {
        return value - Math.floor(value);
    }

    /**
     * Variance at a place of the grid.
     *
     * @param x index along the first axis, may lie between voxels
     * @param y index along the second axis
     * @return variance along each axis (mm²)
     */
    public double varianceMm2(double x, double y) {
        double u = place(x, grid.nx());
        double v = place(y, grid.ny());
        int i = Math.min(NODES - 2, (int) u);
        int j = Math.min(NODES - 2, (int) v);
        double s = u - i;
        double t = v - j;
        int at = i * NODES + j;
        return (1 - s) * ((1 - t) * varianceMm2[at] + t * varianceMm2[at + 1])
                + s * ((1 - t) * varianceMm2[at + NODES] + t * varianceMm2[at + NODES + 1]);
    }

    private static double place(double index, int voxels) {
        return voxels == 1 ? 0 : Math.max(0, Math.min(1, index / (voxels - 1))) * (NODES - 1);
    }

    /**
     * Width in the middle of the grid.
     *
     * @return FWHM along each axis (mm)
     */
    public double centralFwhmMm() {
        return Mixture.FWHM_PER_SIGMA * Math.sqrt(varianceMm2(0.5 * (grid.nx() - 1), 0.5 * (grid.ny() - 1)));
    }
}
