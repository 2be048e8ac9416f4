package org.raysheaf.io.records;

import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * Which values a calibration from the data looks at; all are formulas. For records of pairs, those that end in {@code _b} speak of the second photon; without
 * them records are singles, and two that follow each other within the window count as a pair.
 *
 * @param channel channel of the (first) photon
 * @param channelB channel of the second photon, or null
 * @param amplitude amplitude of the (first) photon before calibration, or null to leave energies alone
 * @param amplitudeB amplitude of the second photon, or null
 * @param peakKeV energy of the photopeak (keV)
 * @param timeDifferencePs arrival of the second photon minus that of the first (ps), or null
 * @param timePs time of a single (ps), or null
 * @param windowNs largest time difference that counts (ns)
 * @param leastCounts a channel with fewer counts is not fitted
 */
public record CalibrationInputs(
        String channel,
        @Nullable String channelB,
        @Nullable String amplitude,
        @Nullable String amplitudeB,
        @Default("510.999") double peakKeV,
        @Nullable String timeDifferencePs,
        @Nullable String timePs,
        @Default("10") double windowNs,
        @Default("200") int leastCounts) {
    public CalibrationInputs {
        new Problems("calibration")
                .above("peak_keV", peakKeV, 0)
                .above("window_ns", windowNs, 0)
                .atLeast("least_counts", leastCounts, 20)
                .rule(
                        amplitude != null || timeDifferencePs != null || timePs != null,
                        "amplitude",
                        "expected amplitude, time_difference_ps or time_ps, found none: nothing to calibrate")
                .rule(
                        timeDifferencePs == null || channelB != null,
                        "channel_b",
                        "expected the channel of the second photon, found none; time_difference_ps needs it")
                .rule(
                        amplitudeB == null || channelB != null,
                        "channel_b",
                        "expected the channel of the second photon, found none; amplitude_b needs it")
                .orThrow();
    }
}
