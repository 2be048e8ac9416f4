package org.raysheaf.engine.correct;

import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.response.PairFactor;

/**
 * Probability that neither photon of a pair is lost in the object: exp(−∫µ dl) along the whole line, wherever on it the decay was. The same
 * rule serves events and sensitivity. Immutable, safe for use by several threads.
 */
public final class Attenuation implements PairFactor.Maker {
    private final Image muPerMm;
    private final RaySums sums;

    /**
     * Takes a map of attenuation coefficients at 511 keV.
     *
     * @param muPerMm the map (1/mm), on a grid of its own; outside it nothing attenuates
     * @throws IllegalArgumentException if a value is negative or not finite
     */
    public Attenuation(Image muPerMm) {
        for (float mu : muPerMm.values()) {
            if (!(mu >= 0 && mu < Float.POSITIVE_INFINITY)) {
                throw new IllegalArgumentException("attenuation coefficients must be finite and at least 0: " + mu);
            }
        }
        this.muPerMm = muPerMm;
        this.sums = new RaySums(muPerMm);
    }

    /**
     * The map.
     *
     * @return attenuation coefficients (1/mm), shared
     */
    public Image muPerMm() {
        return muPerMm;
    }

    @Override
    public PairFactor make() {
        RaySums mine = sums.twin();
        return (a, b, line) -> Math.exp(-mine.along(line));
    }
}
