package org.raysheaf.io.overview;

import org.apache.commons.math3.exception.MathIllegalArgumentException;
import org.apache.commons.math3.exception.MathIllegalStateException;
import org.apache.commons.math3.fitting.leastsquares.LeastSquaresBuilder;
import org.apache.commons.math3.fitting.leastsquares.LeastSquaresOptimizer.Optimum;
import org.apache.commons.math3.fitting.leastsquares.LevenbergMarquardtOptimizer;
import org.apache.commons.math3.linear.Array2DRowRealMatrix;
import org.apache.commons.math3.linear.ArrayRealVector;
import org.apache.commons.math3.linear.DiagonalMatrix;
import org.apache.commons.math3.util.Pair;
import org.jspecify.annotations.Nullable;

/**
 * The photopeak of a spectrum: a Gaussian on a level ground, fitted by weighted least squares (Levenberg–Marquardt).
 *
 * <pre>
 * n(x) = a · exp(−(x − m)² / 2s²) + b
 * </pre>
 *
 * <p>The peak is looked for where the smoothed counts times x are largest: the weight x keeps the foot of noise and scattered photons at low energies from
 * being taken for it. The fit reaches from 1.3 s below to 2.5 s above, since scattered photons lie below. The counts are smoothed
 * first, by steps of (¼, ½, ¼), which move no peak and add ½ bin² each to its variance; that is taken off again. So energies in coarse steps, which leave bins empty,
 * do no harm. The weight of a bin is 1 / max(n, 1).
 * A sloping ground would fit no better and, with the few counts of a single channel, pull the
 * peak by a quarter of its width.
 *
 * @param position where the peak is (in the units of the spectrum)
 * @param positionError its standard error, s / √counts
 * @param fwhm full width at half maximum
 * @param counts counts in the Gaussian
 */
public record Photopeak(double position, double positionError, double fwhm, double counts) {
    private static final double FWHM_PER_SIGMA = 2 * Math.sqrt(2 * Math.log(2));
    /** A standard deviation of a fifth of the energy, FWHM 47 %: no detector of photons is worse, but a heap of noise is. */
    private static final double WIDEST = 0.2;

    /** Three standard deviations below a photopeak there is a valley; below the end of a heap of noise there is none. */
    private static final double VALLEY = 0.7;

    private static final int LEAST_BINS = 7;
    private static final double LEAST_COUNTS = 50;
    private static final int MOST_ROUNDS = 100;

    /**
     * Finds and fits the peak.
     *
     * @param spectrum counts
     * @return the peak, or null if there is none that a fit finds
     */
    public static @Nullable Photopeak of(Spectrum spectrum) {
        return of(spectrum.counts(), spectrum.low(), spectrum.step());
    }

    static @Nullable Photopeak of(long[] counts, double low, double step) {
        double[] smooth = smooth(counts);
        int top = 0;
        double best = 0;
        for (int i = 0; i < smooth.length; i++) {
            double weighted = smooth[i] * (low + (i + 0.5) * step);
            if (weighted > best) {
                best = weighted;
                top = i;
            }
        }
        if (best == 0) {
            return null;
        }
        int right = top;
        while (right + 1 < smooth.length && smooth[right] > 0.5 * smooth[top]) {
            right++;
        }
        // Half the width above the peak, where nothing is scattered, tells the standard deviation.
        double sigma = Math.max(1, (right - top) / (0.5 * FWHM_PER_SIGMA));
        double centre = top;
        Photopeak peak = null;
        for (int round = 0; round < 3; round++) {
            double[] fit = fit(smooth, centre, sigma);
            if (fit.length == 0) {
                return null;
            }
            centre = fit[1];
            sigma = Math.abs(fit[2]);
            double area = fit[0] * sigma * Math.sqrt(2 * Math.PI);
            boolean sound = centre > 0
                    && centre < counts.length
                    && sigma < WIDEST * (centre + low / step)
                    && fit[0] > 0
                    && smooth[(int) Math.max(0, centre - 3 * sigma)] < VALLEY * (fit[0] + fit[3])
                    && area > LEAST_COUNTS;
            if (!sound) {
                return null;
            }
            double own = Math.sqrt(Math.max(0.25, sigma * sigma - 0.5 * passes(counts.length)));
            peak = new Photopeak(
                    low + (centre + 0.5) * step, own / Math.sqrt(area) * step, FWHM_PER_SIGMA * own * step, area);
        }
        return peak;
    }

    /** The width of smoothing grows with the square root of the steps. */
    private static int passes(int bins) {
        return Math.max(4, bins / 64);
    }

    private static double[] smooth(long[] counts) {
        double[] from = new double[counts.length];
        for (int i = 0; i < from.length; i++) {
            from[i] = counts[i];
        }
        for (int pass = passes(counts.length); pass > 0; pass--) {
            double[] to = new double[from.length];
            for (int i = 0; i < from.length; i++) {
                double before = from[Math.max(0, i - 1)];
                double after = from[Math.min(from.length - 1, i + 1)];
                to[i] = 0.25 * before + 0.5 * from[i] + 0.25 * after;
            }
            from = to;
        }
        return from;
    }

    /** Fits in units of bins; returns a, m, s, b, or nothing. */
    private static double[] fit(double[] smooth, double centre, double sigma) {
        int from = (int) Math.max(0, Math.floor(centre - 1.3 * sigma));
        int to = (int) Math.min(smooth.length - 1.0, Math.ceil(centre + 2.5 * sigma));
        int half = LEAST_BINS / 2 + 1;
        from = Math.max(0, Math.min(from, (int) centre - half));
        to = Math.min(smooth.length - 1, Math.max(to, (int) centre + half));
        int n = to - from + 1;
        if (n < LEAST_BINS) {
            return new double[0];
        }
        double[] target = new double[n];
        double[] weights = new double[n];
        double highest = 0;
        for (int i = 0; i < n; i++) {
            target[i] = smooth[from + i];
            weights[i] = 1 / Math.max(1, target[i]);
            highest = Math.max(highest, target[i]);
        }
        double ground = Math.min(target[n - 1], highest);
        int first = from;
        LeastSquaresBuilder problem = new LeastSquaresBuilder()
                .start(new double[] {highest - 0.5 * ground, centre, sigma, 0.5 * ground})
                .model(point -> model(point.toArray(), first, n))
                .target(target)
                .weight(new DiagonalMatrix(weights))
                .maxEvaluations(MOST_ROUNDS)
                .maxIterations(MOST_ROUNDS);
        try {
            Optimum optimum = new LevenbergMarquardtOptimizer().optimize(problem.build());
            return optimum.getPoint().toArray();
        } catch (MathIllegalStateException | MathIllegalArgumentException e) {
            return new double[0]; // it does not converge, or the counts tell nothing of some parameter
        }
    }

    private static Pair<org.apache.commons.math3.linear.RealVector, org.apache.commons.math3.linear.RealMatrix> model(
            double[] p, int first, int n) {
        double[] value = new double[n];
        double[][] slope = new double[n][4];
        for (int i = 0; i < n; i++) {
            double x = first + i;
            double u = (x - p[1]) / p[2];
            double bell = Math.exp(-0.5 * u * u);
            value[i] = p[0] * bell + p[3];
            slope[i][0] = bell;
            slope[i][1] = p[0] * bell * u / p[2];
            slope[i][2] = p[0] * bell * u * u / p[2];
            slope[i][3] = 1;
        }
        return new Pair<>(new ArrayRealVector(value, false), new Array2DRowRealMatrix(slope, false));
    }
}
