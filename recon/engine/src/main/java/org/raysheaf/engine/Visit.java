package org.raysheaf.engine;

import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.ray.EventPage;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.engine.ray.Joseph;
import org.raysheaf.engine.ray.Walks;

/**
 * The inner loop of every estimator: visits a run of events, and for each goes forward through the image, takes the reciprocal of
 * what it should have counted, and goes back into an accumulator. Reads the store and the image, writes only the accumulator.
 */
final class Visit {
    /** The running product of means is turned into a logarithm before it, times one more float, can leave the range of a double. */
    private static final double LARGE = 1e200;

    private static final double SMALL = 1e-200;

    private final Joseph joseph;
    private final int rays;
    private final float[] image;
    private final float @Nullable [] accumulator;
    // Σ ln q is kept as a sum and a product, over all pages of the run, so that pages leave no trace in the last bits.
    private double sum;
    private double product = 1;

    private Visit(EventStore store, float[] image, float @Nullable [] accumulator) {
        this.joseph = new Joseph(store.lattice());
        this.rays = store.raysPerEvent();
        this.image = image;
        this.accumulator = accumulator;
    }

    /**
     * Adds Σ_e a_ej / q_e to the accumulator, with q_e = Σ_j a_ej x_j + b_e/c_e.
     *
     * @param store the events
     * @param from first event of the run
     * @param to after the last event
     * @param image x on the lattice
     * @param accumulator added to; null if only the sum is wanted
     * @return Σ_e ln q_e
     */
    static double events(EventStore store, int from, int to, float[] image, float @Nullable [] accumulator) {
        Visit visit = new Visit(store, image, accumulator);
        store.each(from, to, visit::page);
        return visit.sum + Math.log(visit.product);
    }

    private void page(EventPage page) {
        float[] background = page.background();
        int first = page.first() - page.offset();
        int end = page.end() - page.offset();
        if (rays > 1) {
            sheaves(page.walks(), background, first, end);
        } else {
            lines(page.walks(), background, first, end);
        }
    }

    /** The rays of events that have one each: a ray is aimed once, and goes there and back. */
    private void lines(Walks walks, float @Nullable [] background, int first, int end) {
        float[] target = accumulator;
        double logs = sum;
        double means = product;
        for (int k = first; k < end; k++) {
            joseph.aim(walks, k);
            float mean = (background == null ? 0 : background[k]) + joseph.forward(image);
            if (target != null) {
                joseph.back(1 / mean, target);
            }
            means *= mean;
            if (!(means > SMALL && means < LARGE)) {
                logs += Math.log(means);
                means = 1;
            }
        }
        sum = logs;
        product = means;
    }

    private void sheaves(Walks walks, float @Nullable [] background, int first, int end) {
        for (int event = first; event < end; event++) {
            float mean = background == null ? 0 : background[event];
            for (int k = event * rays; k < (event + 1) * rays; k++) {
                joseph.aim(walks, k);
                mean += joseph.forward(image);
            }
            float ratio = 1 / mean;
            for (int k = event * rays; accumulator != null && k < (event + 1) * rays; k++) {
                joseph.aim(walks, k);
                joseph.back(ratio, accumulator);
            }
            product *= mean;
            if (!(product > SMALL && product < LARGE)) {
                sum += Math.log(product);
                product = 1;
            }
        }
    }
}
