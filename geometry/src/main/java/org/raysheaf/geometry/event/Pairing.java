package org.raysheaf.geometry.event;

import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * How singles become pairs.
 *
 * <p>The first single that is in no window opens one of length τ; the singles in it, the opener included, are a group. Two make a
 * pair. So two photons pair if their times differ by at most τ, whichever came first, and independent photons of rates S₁ and S₂ do so
 * at the rate 2 τ S₁ S₂ (τ is the one-sided window; some electronics give its double).
 *
 * <p>With a delay, every single also opens a second window of length τ, so much later. What falls into it is unrelated: such pairs are
 * marked as delayed and tell the rate of random coincidences, 2 τ S₁ S₂ too.
 *
 * @param windowNs length of the window τ (ns), greater than 0
 * @param lowestKeV photons below this energy are left aside (keV), at least 0
 * @param highestKeV photons above this energy are left aside (keV), above lowest_keV; without it none are
 * @param delayNs how much later the second window opens (ns), greater than window_ns; without it there is none
 * @param crowds what becomes of more than two singles in one window
 * @param disorderNs how far singles may stand from their order in time (ns), at least 0. Within it they are put in order; beyond it
 *     pairing stops with a message, since pairs would be lost unnoticed
 */
public record Pairing(
        @Default("4") double windowNs,
        @Default("0") double lowestKeV,
        @Nullable Double highestKeV,
        @Nullable Double delayNs,
        @Default("discard") Crowds crowds,
        @Default("1000") double disorderNs) {
    public Pairing {
        Problems problems = new Problems("pairing")
                .above("window_ns", windowNs, 0)
                .within("window_ns", windowNs, 0, 1e6)
                .atLeast("lowest_keV", lowestKeV, 0)
                .within("disorder_ns", disorderNs, 0, 1e9);
        if (highestKeV != null) {
            problems.above("highest_keV", highestKeV, lowestKeV);
        }
        if (delayNs != null) {
            problems.above("delay_ns", delayNs, windowNs).within("delay_ns", delayNs, 0, 1e9);
        }
        problems.orThrow();
    }

    /** What becomes of more than two singles in one window. */
    public enum Crowds {
        /** None of them is used. */
        DISCARD,
        /** Every two of them make a pair. */
        EVERY_PAIR,
        /** The two that came first make a pair. */
        FIRST_TWO,
        /** The two of highest energy make a pair. */
        STRONGEST_TWO
    }

    /**
     * Pairing by time alone.
     *
     * @param windowNs length of the window τ (ns)
     * @return settings without energy window and delay
     */
    public static Pairing within(double windowNs) {
        return new Pairing(windowNs, 0, null, null, Crowds.DISCARD, 1000);
    }
}
