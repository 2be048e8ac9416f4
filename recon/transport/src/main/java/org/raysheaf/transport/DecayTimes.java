package org.raysheaf.transport;

import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.sampling.distribution.PoissonSampler;
import org.apache.commons.rng.sampling.distribution.ZigguratSampler;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.matter.Nuclide;

/**
 * When decays happen: a Poisson process whose rate falls exponentially, cut into slices of equal expected number.
 *
 * <p>Times are held as <em>shares</em>: the share of all expected decays that come earlier, F(t) = (1 − e^(−λt))/(1 −
 * e^(−λT)), in which the process is uniform from 0 to 1. Slice k of n is the range k/n to (k + 1)/n. How many slices
 * there are follows from the expected number alone, so they are the same on every machine. Immutable.
 */
final class DecayTimes {
    /** Few enough that a slice is small in memory, many enough that starting one costs nothing: about 0.1 s of work. */
    private static final double DECAYS_PER_SLICE = 1 << 16;

    private static final double PS_PER_S = 1e12;

    private final double durationS;
    private final double lambda;
    private final double decayed;
    private final long slices;
    private final double meanPerSlice;

    /**
     * Plans the slices.
     *
     * @param expected expected number of decays, greater than 0
     * @param durationS length of the acquisition T (s)
     * @param nuclide gives λ; null for a constant rate
     */
    DecayTimes(double expected, double durationS, @Nullable Nuclide nuclide) {
        this.durationS = durationS;
        this.lambda = nuclide == null ? 0 : Math.log(2) / nuclide.halfLifeS();
        this.decayed = -Math.expm1(-lambda * durationS);
        this.slices = (long) Math.ceil(expected / DECAYS_PER_SLICE);
        this.meanPerSlice = expected / slices;
    }

    long slices() {
        return slices;
    }

    /**
     * Draws the decays of a slice, in order.
     *
     * <p>Given their number N, the decays of a Poisson process are N sorted uniform numbers; and the first N of N + 1
     * sums of exponential numbers, divided by the last sum, are just that, without any sorting.
     *
     * @param slice the slice, from 0
     * @param random its stream
     * @return the shares of its decays, rising
     */
    double[] draw(long slice, UniformRandomProvider random) {
        int count = PoissonSampler.of(random, meanPerSlice).sample();
        ZigguratSampler.Exponential exponential = ZigguratSampler.Exponential.of(random);
        double[] shares = new double[count];
        double sum = 0;
        for (int i = 0; i < count; i++) {
            sum += exponential.sample();
            shares[i] = sum;
        }
        sum += exponential.sample();
        for (int i = 0; i < count; i++) {
            shares[i] = (slice + shares[i] / sum) / slices;
        }
        return shares;
    }

    /**
     * The time that belongs to a share: the inverse of F.
     *
     * @param share from 0 to 1
     * @return time since the start (ps)
     */
    long timePs(double share) {
        double seconds = lambda * durationS < 1e-15 ? share * durationS : -Math.log1p(-share * decayed) / lambda;
        return Math.round(PS_PER_S * seconds);
    }
}
