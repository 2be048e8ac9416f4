package org.raysheaf.engine;

import java.util.SplittableRandom;
import org.raysheaf.geometry.port.Snapshot;

/**
 * A stochastic method whose noise dies out by itself, so that its steps need not shrink and few passes are enough. Of each of S subsets it
 * remembers h_i = Σ_e a_e/q_e from the last visit, so that one subset is enough to know, without bias, the gradient of all; one update is
 *
 * <pre>
 * g = S (Σ_e a_e/q_e − h_i) + Σ_k h_k − s − β ∇R(x),    x_j ← x_j + τ_j D_j g_j,    h_i ← Σ_e a_e/q_e
 * </pre>
 *
 * <p>with the steps D of {@link Objective#steps}, which know of the prior. SAGA: Defazio, Bach &amp; Lacoste-Julien (2014); in emission
 * tomography: Twyman et al. (2023, doi 10.1109/TMI.2022.3203237); with a preconditioner that knows of the prior: Ehrhardt, Kereta &amp; Schramm
 * (2025, doi 10.3389/fnume.2025.1641215).
 *
 * <p>Step sizes follow from what is remembered. With c_j = S Σ_i h_ij² / (Σ_i h_ij)² − 1, which is 0 where all subsets say the same and S − 1 where one
 * of them has all events of a voxel,
 *
 * <pre>
 * τ_j = 1 / (1 + 2.5 c_j)
 * </pre>
 *
 * <p>Where subsets are alike one of them speaks for all, and a step of 1 is right. Where one subset has all events the others repeat what it said last time:
 * S steps on one old slope, which for S τ = t leads from pass to pass to the factors z of z² − (1 − 2t) z − t = 0, stable for t &lt; 2/3;
 * 1/2.5 is well within. D_j is proportional to x_j as it is, so that a voxel that has become faint moves in small steps: the curvature of the logarithm rises there
 * as 1/x².
 *
 * <p>The first pass is a {@link WarmUp}, which also fills the memory: there is no pass that only looks. Later passes take every subset
 * once, in an order drawn from the number of the pass alone. The rest of D, and τ, follow the image until pass {@value #FROZEN}, then stay.
 *
 * <p>Memory: S + 3 images beside those of the likelihood, and as much in a checkpoint.
 *
 * <p>Differences from the publications: step sizes τ_j per voxel; every subset is taken once per pass, not drawn with replacement; no voxel changes by more than a
 * factor of {@value #MOST} in one update, or falls below 10⁻⁶ of the typical activity. Neither limit is met by an image that has settled, save for voxels that
 * would be negative.
 */
final class VarianceReduced implements UpdateRule {
    /** D is taken from the image at the start of the passes up to this one. */
    private static final int FROZEN = 6;

    /** How much steps are cut where subsets differ; see the class comment. */
    private static final float CAUTION = 2.5f;

    private static final float MOST = 4;

    /** Lowest activity, and that up to which a voxel moves as freely as at it, in parts of the typical one. */
    private static final double LEAST = 1e-6;

    private static final double FREE = 1e-5;
    private static final String IMAGE = "image";
    private static final String STEPS = "steps";
    private static final String SUBSET = "subset_";

    private final Objective objective;
    private final Likelihood likelihood;
    private final float least;
    private final float free;
    private final float[] image;
    private final float[][] remembered;
    private final float[] total;
    /** τ D / x, 0 outside the support. */
    private final float[] steps;

    VarianceReduced(Objective objective, float[] start) {
        this.objective = objective;
        likelihood = objective.likelihood();
        least = (float) (LEAST * objective.typical());
        free = (float) (FREE * objective.typical());
        image = start.clone();
        remembered = new float[likelihood.subsets()][image.length];
        total = new float[image.length];
        steps = new float[image.length];
    }

    @Override
    public double pass(int number) {
        if (number == 1) {
            return WarmUp.pass(
                    objective,
                    image,
                    least,
                    (subset, first, last, sums) ->
                            System.arraycopy(sums, first, remembered[subset], first, last - first));
        }
        addUp(number <= FROZEN);
        double logLikelihood = 0;
        for (int subset : order(number)) {
            logLikelihood -= likelihood.part(subset) * likelihood.expectedEvents(image);
            logLikelihood += likelihood.visit(subset, image);
            update(remembered[subset], objective.slope(image));
        }
        return logLikelihood;
    }

    /** A shuffle that follows from the number of the pass, so that there is nothing to remember. */
    private int[] order(int number) {
        int[] order = new int[likelihood.subsets()];
        SplittableRandom random = new SplittableRandom(number);
        for (int i = 0; i < order.length; i++) {
            int k = random.nextInt(i + 1);
            order[i] = order[k];
            order[k] = i;
        }
        return order;
    }

    /** Σ_k h_k, anew in every pass so that rounding does not pile up; and the steps, if they still follow the image. */
    private void addUp(boolean follow) {
        if (follow) {
            objective.steps(image, free, steps);
        }
        float subsets = likelihood.subsets();
        likelihood.voxels((first, last) -> {
            for (int j = first; j < last; j++) {
                float sum = 0;
                float squares = 0;
                for (float[] own : remembered) {
                    sum += own[j];
                    squares += own[j] * own[j];
                }
                total[j] = sum;
                if (follow && steps[j] > 0) {
                    float unlike = sum > 0 ? Math.max(0, subsets * squares / (sum * sum) - 1) : 0;
                    steps[j] *= 1 / (Math.max(image[j], free) * (1 + CAUTION * unlike));
                }
            }
            return 0;
        });
    }

    private void update(float[] own, float[] slope) {
        float[] sensitivity = likelihood.sensitivity();
        float subsets = likelihood.subsets();
        likelihood.collect((first, last, sums) -> {
            for (int j = first; j < last; j++) {
                if (steps[j] > 0) {
                    float change = sums[j] - own[j];
                    float rise = subsets * change + total[j] - sensitivity[j] - slope[j];
                    total[j] += change;
                    own[j] = sums[j];
                    float x = image[j];
                    float moved = Math.min(x + Math.max(x, free) * steps[j] * rise, MOST * Math.max(x, free));
                    image[j] = Math.max(Math.max(least, x / MOST), moved);
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
        snapshot.put(STEPS, steps);
        for (int i = 0; i < remembered.length; i++) {
            snapshot.put(SUBSET + i, remembered[i]);
        }
    }

    @Override
    public void restore(Snapshot snapshot) {
        System.arraycopy(snapshot.values(IMAGE, image.length), 0, image, 0, image.length);
        System.arraycopy(snapshot.values(STEPS, image.length), 0, steps, 0, image.length);
        for (int i = 0; i < remembered.length; i++) {
            System.arraycopy(snapshot.values(SUBSET + i, image.length), 0, remembered[i], 0, image.length);
        }
    }
}
