package org.raysheaf.app;

import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * Which corrections a reconstruction makes, and what it uses of the events, as a description gives them. Paths start from the description's folder.
 *
 * @param window whether to count with what the energy window and scatter between crystals do to first interactions
 * @param lowestKeV lower end of the energy window; without it, what the list says about its pairing
 * @param highestKeV upper end; without it, what the list says
 * @param attenuation what attenuates in the object, if anything
 * @param randoms where the rate of random coincidences comes from
 * @param scatter whether to estimate scatter in the object; needs attenuation
 * @param losses whether to count with pairs spoilt by a third photon, where the list says how crowds were treated
 * @param efficiencies path of a file with the efficiency of each element, as {@code normalize} writes it
 * @param timeOfFlight whether to use time differences
 * @param calibration path of a calibration, as {@code reconstruct --reference} writes it; the image is multiplied with its factor
 */
record Corrections(
        @Default("true") boolean window,
        @Nullable Double lowestKeV,
        @Nullable Double highestKeV,
        @Nullable Matter attenuation,
        @Default("auto") RandomsFrom randoms,
        @Default("true") boolean scatter,
        @Default("true") boolean losses,
        @Nullable String efficiencies,
        @Default("auto") TimeOfFlight timeOfFlight,
        @Nullable String calibration) {
    /** Everything that a list alone allows. */
    static final Corrections OF_A_BARE_LIST =
            new Corrections(true, null, null, null, RandomsFrom.AUTO, true, true, null, TimeOfFlight.AUTO, null);

    /** Where the rate of random coincidences comes from. */
    enum RandomsFrom {
        /** From delayed pairs if the list has them, else from singles if it tells them, else none. */
        AUTO,
        /** From delayed pairs. */
        DELAYED,
        /** From singles rates. */
        SINGLES,
        /** They are not corrected for. */
        NONE
    }

    /** Whether time differences weight events along their lines. */
    enum TimeOfFlight {
        /** If the list and the system have them, and they are fine enough to make a difference. */
        AUTO,
        /** However coarse they are. */
        ALWAYS,
        /** Never. */
        NEVER
    }

    /**
     * What attenuates: one of the two.
     *
     * @param phantom path of a phantom description, whose solids and materials are taken
     * @param volume path of a volume of attenuation coefficients at 511 keV (1/cm)
     */
    record Matter(@Nullable String phantom, @Nullable String volume) {
        Matter {
            new Problems("attenuation")
                    .rule(
                            (phantom == null) != (volume == null),
                            "phantom",
                            "expected either a phantom or a volume, found " + (phantom == null ? "neither" : "both"))
                    .orThrow();
        }
    }

    Corrections {
        Problems problems = new Problems("corrections");
        if (lowestKeV != null) {
            problems.atLeast("lowest_keV", lowestKeV, 0);
        }
        if (highestKeV != null) {
            problems.above("highest_keV", highestKeV, lowestKeV == null ? 0 : lowestKeV);
        }
        problems.orThrow();
    }
}
