package org.raysheaf.geometry.detector;

import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * What the electronics behind a block make of the energy that photons leave in it. Nothing given means an ideal readout:
 * no blur, no loss.
 *
 * @param channel what is read out as one: energy left in the same channel at the same time is one signal
 * @param decoding which crystal of the channel is named
 * @param lightSpreadFwhmMm with {@link Decoding#CENTROID}: Gaussian blur of the centroid along the columns and along the
 *     rows (mm FWHM), at least 0
 * @param depthFwhmMm Gaussian blur of the measured depth (mm FWHM), at least 0; without it no depth is measured
 * @param energyResolution FWHM / energy at 511 keV, 0 to 1
 * @param energyExponent the FWHM grows like energy to this power, 0 to 1; 0.5 is photon statistics
 * @param energyStepKeV measured energies are multiples of this (keV); 0 for no rounding
 * @param timeFwhmPs Gaussian blur of a single time (ps FWHM), at least 0; a time difference has √2 of it
 * @param timeStepPs measured times are multiples of this (ps), at least 1
 * @param integrationNs energy left in a channel up to this long after its first share is added to it (ns), at least 0
 * @param deadTimeNs a channel is blind for so long after its first share (ns), at least 0; never shorter than the
 *     integration
 * @param deadTime whether energy left in a blind channel makes it blind anew
 * @param lowestKeV a signal below this is not noticed at all (keV), at least 0
 * @param highestKeV a signal above this is thrown away (keV), above lowest_keV; without it none is
 * @param lutetium whether the crystals' own radioactivity (¹⁷⁶Lu) is simulated; needs a material with lutetium
 */
public record Readout(
        @Default("block") Channel channel,
        @Default("largest") Decoding decoding,
        @Default("0") double lightSpreadFwhmMm,
        @Nullable Double depthFwhmMm,
        @Default("0") double energyResolution,
        @Default("0.5") double energyExponent,
        @Default("0") double energyStepKeV,
        @Default("0") double timeFwhmPs,
        @Default("1") int timeStepPs,
        @Default("0") double integrationNs,
        @Default("0") double deadTimeNs,
        @Default("non_paralysable") DeadTime deadTime,
        @Default("0") double lowestKeV,
        @Nullable Double highestKeV,
        @Default("false") boolean lutetium) {
    /** Reads everything exactly. */
    public static final Readout IDEAL = new Readout(
            Channel.BLOCK, Decoding.LARGEST, 0, null, 0, 0.5, 0, 0, 1, 0, 0, DeadTime.NON_PARALYSABLE, 0, null, false);

    private static final double ANNIHILATION_KEV = 510.99895;

    public Readout {
        Problems problems = new Problems("readout")
                .atLeast("light_spread_fwhm_mm", lightSpreadFwhmMm, 0)
                .within("energy_resolution", energyResolution, 0, 1)
                .within("energy_exponent", energyExponent, 0, 1)
                .atLeast("energy_step_keV", energyStepKeV, 0)
                .atLeast("time_fwhm_ps", timeFwhmPs, 0)
                .atLeast("time_step_ps", timeStepPs, 1)
                .within("integration_ns", integrationNs, 0, 1e6)
                .within("dead_time_ns", deadTimeNs, 0, 1e9)
                .atLeast("lowest_keV", lowestKeV, 0);
        if (depthFwhmMm != null) {
            problems.atLeast("depth_fwhm_mm", depthFwhmMm, 0);
        }
        if (highestKeV != null) {
            problems.above("highest_keV", highestKeV, lowestKeV);
        }
        problems.rule(
                decoding == Decoding.CENTROID || lightSpreadFwhmMm == 0,
                "light_spread_fwhm_mm",
                "expected 0 with decoding: largest, found " + lightSpreadFwhmMm + "; use decoding: centroid");
        problems.orThrow();
    }

    /** What is read out as one. */
    public enum Channel {
        /** All crystals of a block share their light or their electronics. */
        BLOCK,
        /** Every crystal has a sensor of its own. */
        CRYSTAL
    }

    /** Which crystal is named. */
    public enum Decoding {
        /** The one that received most energy. */
        LARGEST,
        /** The one nearest to the energy-weighted centroid of the light, after its blur. */
        CENTROID
    }

    /** What energy left in a blind channel does (Knoll, Radiation Detection and Measurement; from memory). */
    public enum DeadTime {
        /** Nothing. */
        NON_PARALYSABLE,
        /** It makes the channel blind anew. */
        PARALYSABLE
    }

    /**
     * Width of the measured energy.
     *
     * @param energyKeV the energy left (keV)
     * @return FWHM (keV): resolution · 511 keV · (E / 511 keV)^exponent
     */
    public double energyFwhmKeV(double energyKeV) {
        return energyResolution * ANNIHILATION_KEV * Math.pow(energyKeV / ANNIHILATION_KEV, energyExponent);
    }
}
