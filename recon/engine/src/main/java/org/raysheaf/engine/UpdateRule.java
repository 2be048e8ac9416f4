package org.raysheaf.engine;

import org.raysheaf.geometry.port.Snapshot;

/**
 * How an image gets better: one way of using the {@link Likelihood}. A rule owns its image and whatever it remembers between passes.
 * Belongs to one thread.
 */
interface UpdateRule {
    /**
     * Visits every event once.
     *
     * @param number of the pass, from 1
     * @return Σ_e ln q_e − Σ_j s_j x_j as found on the way, as {@link PassReport#logLikelihood} says
     */
    double pass(int number);

    /** The image as it is, on the lattice; shared. */
    float[] image();

    /**
     * Writes down all that the next pass depends on.
     *
     * @param snapshot receives it
     */
    void save(Snapshot snapshot);

    /**
     * Takes up what {@link #save} wrote, so that the next pass gives the same bits as if there had been no break.
     *
     * @param snapshot as written
     */
    void restore(Snapshot snapshot);
}
