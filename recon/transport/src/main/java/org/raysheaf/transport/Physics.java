package org.raysheaf.transport;

import java.util.List;
import org.raysheaf.geometry.matter.Materials;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * Which physics a simulation takes into account. Photoelectric absorption, Compton scatter and pair production always are, in
 * everything that is not an ideal material.
 *
 * @param positronRange whether positrons travel before they annihilate
 * @param acollinearityFwhmDeg how far the two photons of an annihilation depart from opposite directions: FWHM of each of the
 *     two transverse components of the angle (degrees), at least 0. 0.5° in water: common value, from memory
 * @param gammas whether the nuclide's own gamma rays are emitted
 * @param coherent whether photons scatter coherently too; off, they fly on as if nothing had happened, which at 511 keV is
 *     nearly true
 * @param surroundings what fills the space outside phantom, shields and crystals: a material of the library
 */
public record Physics(
        @Default("true") boolean positronRange,
        @Default("0.5") double acollinearityFwhmDeg,
        @Default("true") boolean gammas,
        @Default("false") boolean coherent,
        @Default("air") String surroundings) {
    /** Straight lines from the place of the decay: nothing happens on the way but in matter. */
    public static final Physics STRAIGHT = new Physics(false, 0, false, false, "vacuum");

    /** Everything as it is. */
    public static final Physics FULL = new Physics(true, 0.5, true, false, "air");

    public Physics {
        new Problems("physics")
                .within("acollinearity_fwhm_deg", acollinearityFwhmDeg, 0, 5)
                .rule(
                        Materials.find(surroundings).isPresent(),
                        "surroundings",
                        Materials.unknown(surroundings, List.of()))
                .orThrow();
    }
}
