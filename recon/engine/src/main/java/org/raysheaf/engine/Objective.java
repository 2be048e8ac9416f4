package org.raysheaf.engine;

import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.prior.Penalty;
import org.raysheaf.engine.prior.Prior;

/**
 * What a penalised estimate makes as large as it can, Φ(x) = L(x) − β R(x): the {@link Likelihood} of the events less the {@link Penalty} of a
 * prior. Slopes and curvatures of the penalty stand in arrays on the lattice until they are asked for again.
 *
 * <p>Used by one thread, works on the threads of the likelihood's pool.
 */
final class Objective {
    private static final float[] NONE = {};

    private final Likelihood likelihood;
    private final @Nullable Penalty penalty;
    private final double typical;
    private final float[] slope;
    private final float[] curvature;

    Objective(Likelihood likelihood, @Nullable Prior prior) {
        this.likelihood = likelihood;
        float[] support = likelihood.support();
        double sensitivity = 0;
        double voxels = 0;
        for (int j = 0; j < support.length; j++) {
            if (support[j] > 0) {
                sensitivity += likelihood.sensitivity()[j];
                voxels++;
            }
        }
        typical = likelihood.events() / sensitivity;
        penalty =
                prior == null ? null : new Penalty(prior, likelihood.lattice(), support, typical, sensitivity / voxels);
        // Without a prior both stay 0.
        slope = new float[support.length];
        curvature = prior == null ? NONE : new float[support.length];
    }

    Likelihood likelihood() {
        return likelihood;
    }

    /** x̄, the uniform activity concentration that makes as many events expected as there are (Bq/mL). */
    double typical() {
        return typical;
    }

    /** β R(x) (counts); 0 without a prior. */
    double penalty(float[] image) {
        Penalty p = penalty;
        return p == null ? 0 : likelihood.voxels((first, last) -> p.value(image, first, last));
    }

    /** Φ(x), by a visit to all events (counts). */
    double value(float[] image) {
        return likelihood.value(image) - penalty(image);
    }

    /** β ∂R/∂x_j (counts per Bq/mL); holds good until the next call. */
    float[] slope(float[] image) {
        Penalty p = penalty;
        if (p != null) {
            likelihood.voxels((first, last) -> {
                p.gradient(image, first, last, slope);
                return 0;
            });
        }
        return slope;
    }

    /**
     * Fills an array with the steps that suit the voxels (Bq/mL per count and Bq/mL),
     *
     * <pre>
     * D_j = 1 / (s_j / max(x_j, δ) + 2 β ∂²R/∂x_j²)
     * </pre>
     *
     * <p>The first term is the curvature of the likelihood as expectation maximisation sees it. The penalty of differences has no eigenvalue
     * above twice its diagonal as far as rows of its Hessian add up to 0, so a step of D times the gradient does not overshoot.
     *
     * @param image x
     * @param least δ: below it a voxel moves as freely as at it (Bq/mL)
     * @param steps receives D, 0 outside the support
     */
    void steps(float[] image, float least, float[] steps) {
        float[] sensitivity = likelihood.sensitivity();
        float[] support = likelihood.support();
        Penalty p = penalty;
        likelihood.voxels((first, last) -> {
            if (p != null) {
                p.curvature(image, first, last, curvature);
            }
            for (int j = first; j < last; j++) {
                float bent = p == null ? 0 : 2 * curvature[j];
                steps[j] = support[j] > 0 ? 1 / (sensitivity[j] / Math.max(image[j], least) + bent) : 0;
            }
            return 0;
        });
    }
}
