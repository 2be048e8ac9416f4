package org.raysheaf.transport;

import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.sampling.distribution.PoissonSampler;
import org.apache.commons.rng.sampling.distribution.ZigguratSampler;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.matter.Nuclide;

/**
 * When decays happen: a Poisson process whose rate falls exponentially, cut into slices of equal expected number.
 *
 * <p>Times are held as <em>shares</em>: the share of all expected decays that come earlier, F(t) = (1 − e^(−λt))/(1 − e^(−λT)), in which the
 * process is uniform from 0 to 1. Slice k of n is the range k/n to (k + 1)/n. How many slices there are follows from the expected number
 * alone, so they are the same on every machine. Immutable.
 */
final class DecayTimes {
    /** Few enough that a slice is small in memory, many enough that starting one costs nothing: about 0.1 s of work. */
    private static final double DECAYS_PER_SLICE = 1 << 16;

    private static final double PS_PER_S = 1e12;

    private final double expected;
    private final double durationS;
    private final double lambda;
    private final double decayed;
    private final long slices;

    /**
     * Plans the slices.
     *
     * @param expected expected number of decays, at least 0
     * @param background expected number of other, steady decays, at least 0
     * @param durationS length of the acquisition T (s)
     * @param nuclide gives λ; null for a constant rate
     */
    DecayTimes(double expected, double background, double durationS, @Nullable Nuclide nuclide) {
        this.expected = expected;
        this.durationS = durationS;
        this.lambda = nuclide == null || expected == 0 ? 0 : Math.log(2) / nuclide.halfLifeS();
        this.decayed = -Math.expm1(-lambda * durationS);
        this.slices = (long) Math.max(1, Math.ceil((expected + background) / DECAYS_PER_SLICE));
    }

    long slices() {
        return slices;
    }

    /**
     * Draws the decays of a slice, in order.
     *
     * @param perDecay draw so many times the expected number
     * @param slice the slice, from 0
     * @param random its stream
     * @return the times of its decays since the start (ps), rising
     */
    long[] draw(double perDecay, long slice, UniformRandomProvider random) {
        double[] places = uniform(perDecay * expected / slices, random);
        long[] times = new long[places.length];
        for (int i = 0; i < times.length; i++) {
            times[i] = timePs((slice + places[i]) / slices);
        }
        return times;
    }

    /** The same for a steady process, which does not follow the decay. */
    long[] drawSteady(double ratePerS, long slice, UniformRandomProvider random) {
        long from = startPs(slice);
        long to = startPs(slice + 1);
        double[] places = uniform(ratePerS * (to - from) / PS_PER_S, random);
        long[] times = new long[places.length];
        for (int i = 0; i < times.length; i++) {
            times[i] = from + (long) (places[i] * (to - from));
        }
        return times;
    }

    /**
     * A Poisson number of rising uniform numbers. Given their number N they are N sorted uniform numbers; and the first N of N + 1 sums of
     * exponential numbers, divided by the last sum, are just that, without any sorting.
     */
    private static double[] uniform(double mean, UniformRandomProvider random) {
        int count = mean > 0 ? PoissonSampler.of(random, mean).sample() : 0;
        ZigguratSampler.Exponential exponential = ZigguratSampler.Exponential.of(random);
        double[] places = new double[count];
        double sum = 0;
        for (int i = 0; i < count; i++) {
            sum += exponential.sample();
            places[i] = sum;
        }
        sum += exponential.sample();
        for (int i = 0; i < count; i++) {
            places[i] /= sum;
        }
        return places;
    }

    /** When a slice begins (ps). */
    long startPs(long slice) {
        return timePs((double) slice / slices);
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
