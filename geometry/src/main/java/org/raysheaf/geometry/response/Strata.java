package org.raysheaf.geometry.response;

import org.apache.commons.math3.distribution.NormalDistribution;

/**
 * How the rays of a sheaf share out the laws of its six coordinates (three at either end): each law is cut into as many strata as there are
 * rays, and every ray takes one stratum of each, no stratum twice. Which goes with which differs from pair to pair, by a hash of the pair
 * alone, so that a pair has the same rays wherever it turns up and what few rays miss in one pair evens out over many. Immutable, safe for use
 * by several threads.
 */
final class Strata {
    private static final int AXES = 6;

    private final double[] shares;
    private final double[] normals;
    private final int[] strides;

    Strata(int rays) {
        shares = new double[rays];
        normals = new double[rays];
        NormalDistribution law = new NormalDistribution();
        double squares = 0;
        for (int k = 0; k < rays; k++) {
            shares[k] = (k + 0.5) / rays;
            normals[k] = law.inverseCumulativeProbability(shares[k]);
            squares += normals[k] * normals[k];
        }
        for (int k = 0; k < rays && squares > 0; k++) {
            normals[k] *= Math.sqrt(rays / squares); // the middles of strata alone would vary less than the law
        }
        strides = java.util.stream.IntStream.rangeClosed(1, rays)
                .filter(stride -> coprime(stride, rays))
                .toArray();
    }

    private static boolean coprime(int a, int b) {
        return b == 0 ? a == 1 : coprime(b, a % b);
    }

    int rays() {
        return shares.length;
    }

    /** The share of a law below the middle of a stratum. */
    double share(int stratum) {
        return shares[stratum];
    }

    /** The middle of a stratum of the normal law, all strata together scaled to variance 1. */
    double normal(int stratum) {
        return normals[stratum];
    }

    /**
     * Deals the strata of a pair.
     *
     * @param a one element
     * @param b the other, above a
     * @param out receives the strata of ray k at 6 k: u, v, w of element a, then of b
     */
    void deal(int a, int b, int[] out) {
        long state = ((long) a << 32) | b;
        int rays = shares.length;
        for (int axis = 0; axis < AXES; axis++) {
            state += 0x9e3779b97f4a7c15L;
            long bits = mix(state);
            int stride = strides[(int) ((bits >>> 40) % strides.length)];
            int stratum = (int) ((bits & 0xffffff) % rays);
            for (int k = 0; k < rays; k++) {
                out[AXES * k + axis] = stratum;
                stratum += stride;
                stratum -= stratum >= rays ? rays : 0;
            }
        }
    }

    /** The finaliser of SplitMix64 (Steele, Lea & Flood 2014, OOPSLA; constants from memory). */
    static long mix(long value) {
        long z = value;
        z = (z ^ (z >>> 30)) * 0xbf58476d1ce4e5b9L;
        z = (z ^ (z >>> 27)) * 0x94d049bb133111ebL;
        return z ^ (z >>> 31);
    }
}
