package org.raysheaf.transport;

import java.time.Instant;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.matter.DecayScheme;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * A simulated acquisition as a description file ({@code raysheaf: acquisition/1}) gives it.
 *
 * @param system path of the system description
 * @param phantom path of the phantom description
 * @param nuclide what decays, a nuclide of the library; without one, activity does not decay and every decay sends out one pair of
 *     annihilation photons from its place
 * @param durationS length of the acquisition by the clock (s), greater than 0
 * @param start when the acquisition begins; activities in the phantom hold at that time
 * @param seed start of all random numbers; the same seed gives the same list
 * @param maxEvents the acquisition stops early when it has recorded this many events, at least 1; without it, it never does
 * @param output whether the list holds pairs or singles
 * @param energies whether to record energies
 * @param timeDifferences whether to record the time differences of pairs
 * @param truth whether to record what only a simulation knows, in a group of its own
 * @param physics which physics is taken into account
 * @param pairing how singles become pairs
 */
public record Acquisition(
        String system,
        String phantom,
        @Nullable String nuclide,
        double durationS,
        Instant start,
        @Default("1") long seed,
        @Nullable Long maxEvents,
        @Default("pairs") ListKind output,
        @Default("true") boolean energies,
        @Default("true") boolean timeDifferences,
        @Default("false") boolean truth,
        @Default("{}") Physics physics,
        @Default("{}") Pairing pairing) {
    public Acquisition {
        Problems problems = new Problems("acquisition").above("duration_s", durationS, 0);
        if (maxEvents != null) {
            problems.atLeast("max_events", maxEvents, 1);
        }
        if (nuclide != null) {
            problems.rule(
                    DecayScheme.find(nuclide).isPresent(),
                    "nuclide",
                    "expected one of " + String.join(", ", DecayScheme.names()) + ", found " + nuclide);
        }
        problems.orThrow();
    }

    /**
     * The same with another seed.
     *
     * @param other start of all random numbers
     * @return a changed copy
     */
    public Acquisition seeded(long other) {
        return new Acquisition(
                system,
                phantom,
                nuclide,
                durationS,
                start,
                other,
                maxEvents,
                output,
                energies,
                timeDifferences,
                truth,
                physics,
                pairing);
    }
}
