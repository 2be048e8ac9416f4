package org.raysheaf.engine;

import java.util.Arrays;
import java.util.SplittableRandom;
import org.raysheaf.geometry.port.Snapshot;

/**
 * A stochastic method whose noise dies out by itself, so that its steps need not shrink and few passes are enough. Of each of S subsets it
 * remembers h_i = Σ_e a_e/q_e from the last visit, so that one subset is enough to know, without bias, the gradient of all; one update is
 *
 * <pre>
 * g = S (Σ_e a_e/q_e − h_i) + Σ_k h_k − s − β ∇R(x),    x ← x + τ D g,    h_i ← Σ_e a_e/q_e
 * </pre>
 *
 * <p>with the steps D of {@link Objective#steps}, which know of the prior. SAGA: Defazio, Bach &amp; Lacoste-Julien (2014); in emission
 * tomography: Twyman et al. (2023, doi 10.1109/TMI.2022.3203237); with a preconditioner that knows of the prior: Ehrhardt, Kereta &amp; Schramm
 * (2025, doi 10.3389/fnume.2025.1641215).
 *
 * <p>The first pass is a {@link WarmUp}, which also fills the memory: there is no pass that only looks. Later passes take every subset
 * once, in an order drawn from the number of the pass alone. D follows the image until pass {@value #FROZEN}, then stays.
 *
 * <p>Memory: S + 3 images beside those of the likelihood, and as much in a checkpoint.
 *
 * <p>Differences from the publications: every subset is taken once per pass, not drawn with replacement; no voxel changes by more than a
 * factor of {@value #MOST} in one update, or falls below 10⁻⁶ of the typical activity. Neither limit is met by an image that has settled, save for voxels that
 * would be negative.
 */
final class VarianceReduced implements UpdateRule {
    /** D is taken from the image at the start of the passes up to this one. */
    private static final int FROZEN = 6;

    private static final float MOST = 4;

    /** Lowest activity, and that up to which a voxel moves as freely as at it, in parts of the typical one. */
    private static final double LEAST = 1e-6;

    private static final double FREE = 1e-2;
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
        addUp();
        if (number <= FROZEN) {
            objective.steps(image, free, steps);
        }
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

    /** Σ_k h_k, anew in every pass so that rounding does not pile up. */
    private void addUp() {
        likelihood.voxels((first, last) -> {
            Arrays.fill(total, first, last, 0);
            for (float[] own : remembered) {
                for (int j = first; j < last; j++) {
                    total[j] += own[j];
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
                    float moved = Math.min(x + steps[j] * rise, MOST * Math.max(x, free));
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
