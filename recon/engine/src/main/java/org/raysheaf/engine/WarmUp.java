package org.raysheaf.engine;

/**
 * The first pass of methods with a prior: quick, and near enough for their own steps. Each subset moves every voxel to where a separable
 * stand-in for the objective is largest (De Pierro 1995, IEEE Trans. Med. Imaging 14:132): with the subset's part φ of the events,
 * y_j = x_j/φ · Σ_e a_ej/q_e, the penalty's slope p_j and c_j at x,
 *
 * <pre>
 * c_j z² + (s_j + p_j − c_j x_j) z − y_j = 0,    z ≥ 0,    c_j = 2 β ∂²R/∂x_j²
 * </pre>
 *
 * <p>Without a prior this is a pass of ordered-subsets expectation maximisation.
 *
 * <p>Difference from the publication: c_j is taken where the image is, which bounds a quadratic penalty everywhere, but others only nearby. So this
 * alone would end near the most likely image, not at it.
 */
final class WarmUp {
    private WarmUp() {}

    /** Is told Σ_e a_ej/q_e of a subset, for runs of voxels, by several threads. */
    @FunctionalInterface
    interface Keeper {
        void keep(int subset, int first, int last, float[] sums);
    }

    /**
     * Visits every event once.
     *
     * @param objective what to improve
     * @param image x, above 0 in the support; changed
     * @param least lowest value within the support (Bq/mL)
     * @param keeper is told what the subsets found
     * @return the log-likelihood as found on the way
     */
    static double pass(Objective objective, float[] image, float least, Keeper keeper) {
        Likelihood likelihood = objective.likelihood();
        float[] sensitivity = likelihood.sensitivity();
        float[] steps = new float[image.length];
        double logLikelihood = 0;
        for (int subset = 0; subset < likelihood.subsets(); subset++) {
            int now = subset;
            double part = likelihood.part(subset);
            logLikelihood -= part * likelihood.expectedEvents(image);
            logLikelihood += likelihood.visit(subset, image);
            float[] slope = objective.slope(image);
            objective.steps(image, least, steps);
            likelihood.collect((first, last, sums) -> {
                keeper.keep(now, first, last, sums);
                for (int j = first; j < last; j++) {
                    if (steps[j] > 0) {
                        double x = image[j];
                        // D holds s/x and the curvature; the latter alone is wanted, without what rounding leaves of
                        // nothing.
                        double bent = Math.max(0, 1.0 / steps[j] - sensitivity[j] / Math.max(x, least));
                        double linear = sensitivity[j] + slope[j] - bent * x;
                        image[j] = (float) Math.max(least, root(bent, linear, x * sums[j] / part));
                    }
                }
                return 0;
            });
        }
        return logLikelihood;
    }

    /** The root z ≥ 0 of a z² + b z − c for a, c ≥ 0, in the form that loses no digits. */
    private static double root(double a, double b, double c) {
        double reach = Math.sqrt(b * b + 4 * a * c);
        return b > 0 ? 2 * c / (b + reach) : (reach - b) / (2 * a);
    }
}
