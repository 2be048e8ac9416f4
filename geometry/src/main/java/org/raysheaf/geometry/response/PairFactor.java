package org.raysheaf.geometry.response;

/**
 * Something that changes how often a pair is recorded, beside its étendue: attenuation, efficiencies. The sensitivity counts with it, and
 * so do events where a background is compared with the activity on their line. Belongs to one thread.
 */
public interface PairFactor {
    /**
     * The factor of a pair.
     *
     * @param a element of one photon
     * @param b element of the other
     * @param line their line
     * @return the factor, at least 0; a pair of factor 0 does not take part
     */
    double of(int a, int b, LineOfResponse line);

    /** Makes factors for several threads. Safe for use by several threads. */
    @FunctionalInterface
    interface Maker {
        /**
         * A factor for one thread.
         *
         * @return the factor
         */
        PairFactor make();
    }
}
