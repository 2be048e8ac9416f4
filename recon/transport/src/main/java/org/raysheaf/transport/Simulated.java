package org.raysheaf.transport;

import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.PairingTally;

/**
 * What came of a simulated acquisition.
 *
 * @param header the list's header; if the acquisition stopped early, its duration ends with the last event. Its live time is the duration
 *     times the share in which channels could begin (for pairs, its square), averaged over the signals
 * @param decays decays of the phantom that were followed
 * @param positrons positrons among what they sent out
 * @param events events recorded
 * @param liveFraction live time / duration
 * @param pairing what became of the singles, or null if the list holds singles
 */
public record Simulated(
        ListHeader header,
        long decays,
        long positrons,
        long events,
        double liveFraction,
        @Nullable PairingTally pairing) {}
