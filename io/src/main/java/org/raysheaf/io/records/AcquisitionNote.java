package org.raysheaf.io.records;

import java.time.Instant;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * What the list says about itself.
 *
 * @param start when the acquisition began
 * @param durationS its length by the clock (s), or null to take the time of the last event
 * @param liveTimeS time in which events could be recorded (s), or null if that is all of it
 * @param nuclide what decayed, or null if it is not known
 * @param zero from where times count
 */
public record AcquisitionNote(
        @Default("1970-01-01T00:00:00Z") Instant start,
        @Nullable Double durationS,
        @Nullable Double liveTimeS,
        @Nullable Decaying nuclide,
        @Default("clock") Zero zero) {

    /** From where times count. */
    public enum Zero {
        /** From 0 of the lab's clock. */
        CLOCK,
        /** From the first event of the list. */
        FIRST_EVENT
    }

    /**
     * What decayed.
     *
     * @param name for people, for example F-18
     * @param halfLifeS its half-life (s)
     * @param positronBranching positrons per decay
     */
    public record Decaying(String name, double halfLifeS, double positronBranching) {
        public Decaying {
            new Problems("nuclide")
                    .above("half_life_s", halfLifeS, 0)
                    .within("positron_branching", positronBranching, 0, 1)
                    .orThrow();
        }
    }

    public AcquisitionNote {
        Problems problems = new Problems("acquisition");
        if (durationS != null) {
            problems.above("duration_s", durationS, 0);
        }
        if (liveTimeS != null) {
            problems.above("live_time_s", liveTimeS, 0);
            problems.rule(
                    durationS == null || !(liveTimeS > durationS * (1 + 1e-9)),
                    "live_time_s",
                    "expected at most duration_s = " + durationS + ", found " + liveTimeS);
        }
        problems.orThrow();
    }
}
