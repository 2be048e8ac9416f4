package org.raysheaf.engine;

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

    private Visit() {}

    /**
     * Adds Σ_e a_ej / q_e to the accumulator, with q_e = Σ_j a_ej x_j + b_e/c_e.
     *
     * @param store the events
     * @param from first event of the run
     * @param to after the last event
     * @param image x on the lattice
     * @param accumulator added to
     * @return Σ_e ln q_e
     */
    static double events(EventStore store, int from, int to, float[] image, float[] accumulator) {
        return store.raysPerEvent() == 1 && store.background() == null
                ? lines(store.walks(), from, to, image, accumulator)
                : sheaves(store, from, to, image, accumulator);
    }

    private static double lines(Walks walks, int from, int to, float[] image, float[] accumulator) {
        Joseph joseph = new Joseph(walks.lattice());
        double sum = 0;
        double product = 1;
        for (int k = from; k < to; k++) {
            joseph.aim(walks, k);
            float mean = joseph.forward(image);
            joseph.back(1 / mean, accumulator);
            product *= mean;
            if (!(product > SMALL && product < LARGE)) {
                sum += Math.log(product);
                product = 1;
            }
        }
        return sum + Math.log(product);
    }

    private static double sheaves(EventStore store, int from, int to, float[] image, float[] accumulator) {
        Walks walks = store.walks();
        Joseph joseph = new Joseph(walks.lattice());
        int rays = store.raysPerEvent();
        float[] background = store.background();
        double sum = 0;
        for (int event = from; event < to; event++) {
            float mean = background == null ? 0 : background[event];
            for (int k = event * rays; k < (event + 1) * rays; k++) {
                joseph.aim(walks, k);
                mean += joseph.forward(image);
            }
            float ratio = 1 / mean;
            for (int k = event * rays; k < (event + 1) * rays; k++) {
                joseph.aim(walks, k);
                joseph.back(ratio, accumulator);
            }
            sum += Math.log(mean);
        }
        return sum;
    }
}
