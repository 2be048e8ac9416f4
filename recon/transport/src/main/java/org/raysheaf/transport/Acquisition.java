package org.raysheaf.transport;

import java.time.Instant;
import java.util.EnumSet;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.matter.Nuclide;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * A simulated acquisition as a description file ({@code raysheaf: acquisition/1}) gives it.
 *
 * @param system path of the system description
 * @param phantom path of the phantom description
 * @param nuclide what decays; without one, activity does not decay and every decay gives a pair
 * @param durationS length of the acquisition by the clock (s), greater than 0
 * @param liveTimeS time in which events can be recorded, spread evenly over the acquisition (s); without it, all of the
 *     duration
 * @param start when the acquisition begins; activities in the phantom hold at that time
 * @param seed start of all random numbers; the same seed gives the same list
 * @param maxEvents the acquisition stops early when it has recorded this many events, at least 1; without it, it never
 *     does
 * @param timeDifferences whether to record the time differences of pairs (without any resolution blur)
 * @param energies whether to record energies (without any resolution blur: {@value Photon#ANNIHILATION_KEV} keV for
 *     every photon)
 */
public record Acquisition(
        String system,
        String phantom,
        @Nullable Nuclide nuclide,
        double durationS,
        @Nullable Double liveTimeS,
        Instant start,
        @Default("1") long seed,
        @Nullable Long maxEvents,
        @Default("true") boolean timeDifferences,
        @Default("false") boolean energies) {
    public Acquisition {
        Problems problems = new Problems("acquisition").above("duration_s", durationS, 0);
        if (liveTimeS != null) {
            problems.above("live_time_s", liveTimeS, 0)
                    .rule(
                            !(liveTimeS > durationS),
                            "live_time_s",
                            "expected at most duration_s = " + durationS + ", found " + liveTimeS);
        }
        if (maxEvents != null) {
            problems.atLeast("max_events", maxEvents, 1);
        }
        problems.orThrow();
    }

    /**
     * The columns that the list will have.
     *
     * @return the attributes of every event
     */
    public Set<Attribute> attributes() {
        Set<Attribute> attributes = EnumSet.of(Attribute.ELEMENT_A, Attribute.ELEMENT_B, Attribute.TIME);
        if (timeDifferences) {
            attributes.add(Attribute.TIME_DIFFERENCE);
        }
        if (energies) {
            attributes.add(Attribute.ENERGY_A);
            attributes.add(Attribute.ENERGY_B);
        }
        return attributes;
    }

    /**
     * The share of the time in which events can be recorded.
     *
     * @return live time / duration, greater than 0, at most 1
     */
    public double liveFraction() {
        return liveTimeS == null ? 1 : liveTimeS / durationS;
    }

    /**
     * What the list says about itself if the acquisition runs to its end.
     *
     * @param systemText text of the system description
     * @return the header
     */
    public ListHeader header(String systemText) {
        return header(systemText, durationS);
    }

    /** The header of an acquisition that was stopped early. */
    ListHeader header(String systemText, double stoppedAfterS) {
        return new ListHeader(systemText, stoppedAfterS, stoppedAfterS * liveFraction(), start, nuclide);
    }
}
