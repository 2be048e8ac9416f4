package org.raysheaf.transport;

import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.simple.RandomSource;

/**
 * Random streams by number. The generator is xoshiro256++ (Blackman &amp; Vigna 2021, ACM TOMS 47:36): the fastest of
 * those in reach that pass all known tests, and its 2²⁵⁶ states make an overlap of two streams as good as impossible. A
 * counter-based generator would make it impossible, but costs four times as much per number, and a decay takes about
 * ten.
 *
 * <p>The state of stream n of a seed is four outputs of SplitMix64 (Steele, Lea &amp; Flood 2014, OOPSLA), which is how
 * the authors of xoshiro advise to seed it. SplitMix64 itself starts at mix(mix(seed + γ) + n γ), with its mixing
 * function mix and increment γ, so that nearby seeds and nearby stream numbers lead far apart. Lists depend on this: it
 * must never change.
 */
final class RandomStreams {
    private static final long GAMMA = 0x9e3779b97f4a7c15L;

    private RandomStreams() {}

    static UniformRandomProvider stream(long seed, long number) {
        long state = mix(mix(seed + GAMMA) + number * GAMMA);
        long[] words = new long[4];
        for (int i = 0; i < words.length; i++) {
            state += GAMMA;
            words[i] = mix(state);
        }
        return RandomSource.XO_SHI_RO_256_PP.create(words);
    }

    /** The finalizer of SplitMix64, a bijection. */
    private static long mix(long z) {
        z = (z ^ (z >>> 30)) * 0xbf58476d1ce4e5b9L;
        z = (z ^ (z >>> 27)) * 0x94d049bb133111ebL;
        return z ^ (z >>> 31);
    }
}
