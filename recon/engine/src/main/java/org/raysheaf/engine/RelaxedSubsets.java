package org.raysheaf.engine;

import org.raysheaf.geometry.port.Snapshot;

/**
 * Penalised likelihood subset by subset, with steps that shrink so that the image comes to rest: block-sequential regularised expectation
 * maximisation (BSREM: De Pierro &amp; Yamagishi 2001, IEEE Trans. Med. Imaging 20:280) in the modified form of Ahn &amp; Fessler (2003, IEEE Trans. Med. Imaging
 * 22:613), which converges to the maximum of any concave objective,
 *
 * <pre>
 * x_j ← x_j + α_n min(x_j, U_j − x_j) / p_j · (Σ_e a_ej/q_e / φ − s_j − β ∂R/∂x_j),    α_n = α / (1 + η n)
 * </pre>
 *
 * <p>with the part φ of the events in the subset and n counting passes from 0. U_j = events / s_j is above every maximum, since there
 * Σ_j s_j x_j ≤ events: the slope of a convex penalty that is 0 for uniform images never points towards more activity as a whole. The first pass is a {@link WarmUp}.
 *
 * <p>Differences from the publication: p_j, any constants above 0 there, are s_j + 2 β x_j ∂²R/∂x_j² at the image after the warm-up, so
 * that α = 1 suits weak and strong priors; no voxel falls below 10⁻⁶ of the typical activity, in place of a threshold t.
 */
final class RelaxedSubsets implements UpdateRule {
    private static final double LEAST = 1e-6;
    private static final double FREE = 1e-2;
    private static final String IMAGE = "image";
    private static final String SCALE = "scale";

    private final Objective objective;
    private final Likelihood likelihood;
    private final Relaxation relaxation;
    private final float least;
    private final float free;
    private final float[] image;
    /** 1/p, 0 outside the support. */
    private final float[] scale;

    RelaxedSubsets(Objective objective, Relaxation relaxation, float[] start) {
        this.objective = objective;
        this.relaxation = relaxation;
        likelihood = objective.likelihood();
        least = (float) (LEAST * objective.typical());
        free = (float) (FREE * objective.typical());
        image = start.clone();
        scale = new float[image.length];
    }

    @Override
    public double pass(int number) {
        if (number == 1) {
            double logLikelihood = WarmUp.pass(objective, image, least, (subset, first, last, sums) -> {});
            objective.steps(image, free, scale);
            for (int j = 0; j < scale.length; j++) {
                scale[j] /= Math.max(image[j], free);
            }
            return logLikelihood;
        }
        double logLikelihood = 0;
        for (int subset = 0; subset < likelihood.subsets(); subset++) {
            double part = likelihood.part(subset);
            logLikelihood -= part * likelihood.expectedEvents(image);
            logLikelihood += likelihood.visit(subset, image);
            update((float) relaxation.step(number - 2), (float) (1 / part), objective.slope(image));
        }
        return logLikelihood;
    }

    private void update(float step, float perPart, float[] slope) {
        float[] sensitivity = likelihood.sensitivity();
        float events = likelihood.events();
        likelihood.collect((first, last, sums) -> {
            for (int j = first; j < last; j++) {
                if (scale[j] > 0) {
                    float upper = events / sensitivity[j];
                    float room = Math.min(image[j], upper - image[j]);
                    float rise = perPart * sums[j] - sensitivity[j] - slope[j];
                    float moved = image[j] + step * room * scale[j] * rise;
                    image[j] = Math.max(least, Math.min(upper - least, moved));
                }
            }
            return 0;
        });
    }

    @Override
    public float[] image() {
        return image;
    }

    @Override
    public void save(Snapshot snapshot) {
        snapshot.put(IMAGE, image);
        snapshot.put(SCALE, scale);
    }

    @Override
    public void restore(Snapshot snapshot) {
        System.arraycopy(snapshot.values(IMAGE, image.length), 0, image, 0, image.length);
        System.arraycopy(snapshot.values(SCALE, image.length), 0, scale, 0, image.length);
    }
}
