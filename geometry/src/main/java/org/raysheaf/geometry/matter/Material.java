package org.raysheaf.geometry.matter;

import java.util.Collections;
import java.util.Map;
import java.util.Optional;
import java.util.TreeMap;
import java.util.function.Supplier;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Nearest;
import org.raysheaf.geometry.settings.Problems;

/**
 * What something is made of. A description gives one of
 *
 * <ul>
 *   <li>a name alone: a material of the library ({@link Materials#names()});
 *   <li>{@code like}: a material of the library under another name, or with another {@code density_g_per_cm3};
 *   <li>{@code density_g_per_cm3} with a {@code formula} or with {@code mass_fractions};
 *   <li>{@code attenuation_length_mm}: an ideal material, which stops photons of every energy whole, after that mean distance.
 * </ul>
 *
 * @param name how descriptions refer to it
 * @param attenuationLengthMm of an ideal material: mean distance to a photon's end (mm), at least 0; 0 for a perfect absorber
 * @param like name of a material of the library
 * @param densityGPerCm3 density (g/cm³), greater than 0
 * @param formula chemical formula without brackets; counts may be broken, as in {@code Lu1.8Y0.2SiO5}
 * @param massFractions share of each element in the mass; they add up to 1. In the order of their symbols
 */
public record Material(
        String name,
        @Nullable Double attenuationLengthMm,
        @Nullable String like,
        @Nullable Double densityGPerCm3,
        @Nullable String formula,
        @Nullable Map<String, Double> massFractions) {
    private static final double MM_PER_CM = 10;

    /** 10⁻²⁴ cm² per barn times Avogadro's number 6.02214076e23 per mol (exact). */
    private static final double BARN_MOL = 0.602214076;

    public Material {
        // Sorted, because descriptions are digested: the order of Map.copyOf changes with every start of Java.
        massFractions = massFractions == null ? null : Collections.unmodifiableMap(new TreeMap<>(massFractions));
        Problems problems =
                new Problems("material " + name).rule(!name.isBlank(), "name", "expected a name, found an empty text");
        if (attenuationLengthMm != null) {
            problems.atLeast("attenuation_length_mm", attenuationLengthMm, 0)
                    .rule(
                            like == null && densityGPerCm3 == null && formula == null && massFractions == null,
                            "attenuation_length_mm",
                            "expected it alone, since it makes an ideal material; leave the rest out");
        } else if (like != null || (densityGPerCm3 == null && formula == null && massFractions == null)) {
            String wanted = like == null ? name : like;
            problems.rule(
                            Materials.find(wanted).isPresent(),
                            like == null ? "name" : "like",
                            "expected a material of the library or a composition, found " + wanted
                                    + "; the nearest is " + Nearest.to(wanted, Materials.names())
                                    + "; the library has " + String.join(", ", Materials.names()))
                    .rule(
                            formula == null && massFractions == null,
                            "like",
                            "expected no composition beside it; leave like or the composition out");
        } else {
            problems.rule(
                            formula == null || massFractions == null,
                            "formula",
                            "expected a formula or mass_fractions, found both; leave one out")
                    .rule(
                            formula != null || massFractions != null,
                            "density_g_per_cm3",
                            "expected formula, mass_fractions or like beside it, found none")
                    .rule(
                            densityGPerCm3 != null,
                            formula != null ? "formula" : "mass_fractions",
                            "expected density_g_per_cm3 beside it, found none");
            if (formula != null) {
                String given = formula;
                sound(problems, "formula", () -> Composition.ofFormula(given));
            }
            if (massFractions != null) {
                Map<String, Double> given = massFractions;
                sound(problems, "mass_fractions", () -> Composition.ofFractions(given));
            }
        }
        if (densityGPerCm3 != null) {
            problems.above("density_g_per_cm3", densityGPerCm3, 0).within("density_g_per_cm3", densityGPerCm3, 0, 100);
        }
        problems.orThrow();
    }

    private static void sound(Problems problems, String field, Supplier<Map<String, Double>> composition) {
        try {
            problems.rule(!composition.get().isEmpty(), field, "expected at least one element, found none");
        } catch (IllegalArgumentException e) {
            problems.rule(false, field, String.valueOf(e.getMessage()));
        }
    }

    /**
     * An ideal material.
     *
     * @param name how descriptions refer to it
     * @param attenuationLengthMm mean distance to a photon's end (mm); 0 for a perfect absorber
     */
    public Material(String name, double attenuationLengthMm) {
        this(name, attenuationLengthMm, null, null, null, null);
    }

    /**
     * A material of the library.
     *
     * @param name its name there
     * @return the material
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if there is none of that name
     */
    public static Material named(String name) {
        return new Material(name, null, null, null, null, null);
    }

    /**
     * Whether it stops photons whole after a mean distance that does not depend on their energy.
     *
     * @return true for an ideal material
     */
    public boolean ideal() {
        return attenuationLengthMm != null;
    }

    /**
     * Density.
     *
     * @return the density (g/cm³); of the library if the description gives none; 1 for an ideal material
     */
    public double density() {
        if (densityGPerCm3 != null) {
            return densityGPerCm3;
        }
        return ideal() ? 1 : entry().map(Materials.Entry::density).orElse(1.0);
    }

    /**
     * What it consists of.
     *
     * @return share of each element in the mass, adding up to 1; empty for an ideal material
     */
    public Map<String, Double> composition() {
        if (formula != null) {
            return Composition.ofFormula(formula);
        }
        if (massFractions != null) {
            return Composition.ofFractions(massFractions);
        }
        return entry().map(Materials.Entry::composition).orElse(Map.of());
    }

    private Optional<Materials.Entry> entry() {
        return ideal() ? Optional.empty() : Materials.find(like == null ? name : like);
    }

    /**
     * Linear attenuation by one process: µ = ρ N_A Σ w_i σ_i / A_i over the elements i with mass fractions w, cross sections σ (NIST XCOM,
     * interpolated log-log) and atomic weights A.
     *
     * @param process the process
     * @param energyKeV energy of the photon (keV), above 0; the table has 10 to 3000, outside, the nearest end counts
     * @return the coefficient (1/mm); for an ideal material all is photoelectric
     * @throws IllegalArgumentException if the energy is not above 0 and the material is not ideal
     */
    public double attenuationPerMm(Interaction process, double energyKeV) {
        if (attenuationLengthMm != null) {
            return process == Interaction.PHOTOELECTRIC ? 1 / attenuationLengthMm : 0;
        }
        double perGram = 0;
        for (Map.Entry<String, Double> part : composition().entrySet()) {
            String symbol = part.getKey();
            perGram += part.getValue()
                    * CrossSections.barn(symbol, process, energyKeV)
                    / CrossSections.atomicWeight(symbol);
        }
        return density() * BARN_MOL * perGram / MM_PER_CM;
    }

    /**
     * Linear attenuation by all processes.
     *
     * @param energyKeV energy of the photon (keV)
     * @param coherent whether coherent scatter counts
     * @return the coefficient (1/mm)
     */
    public double attenuationPerMm(double energyKeV, boolean coherent) {
        double sum = coherent ? attenuationPerMm(Interaction.COHERENT, energyKeV) : 0;
        return sum
                + attenuationPerMm(Interaction.COMPTON, energyKeV)
                + attenuationPerMm(Interaction.PHOTOELECTRIC, energyKeV)
                + attenuationPerMm(Interaction.PAIR, energyKeV);
    }

    /**
     * Mean distance to a photon's first interaction at 511 keV, coherent scatter left out: that leaves no energy and hardly turns the photon.
     *
     * @return the distance (mm); 0 for a perfect absorber
     */
    public double meanFreePathMm() {
        return attenuationLengthMm != null
                ? attenuationLengthMm
                : 1 / attenuationPerMm(KleinNishina.ELECTRON_KEV, false);
    }

    /**
     * Probability that a photon of 511 keV gets through without interaction.
     *
     * @param pathMm path in the material (mm), at least 0
     * @return exp(−path / mean free path); for a perfect absorber 1 without path, else 0
     */
    public double transmission(double pathMm) {
        double mean = meanFreePathMm();
        if (mean > 0) {
            return Math.exp(-pathMm / mean);
        }
        return pathMm > 0 ? 0 : 1;
    }

    /**
     * Mean atomic number of the atoms at which a process happens.
     *
     * @param process the process
     * @param energyKeV energy of the photon (keV)
     * @return Σ Z · rate / Σ rate over the elements; 1 for an ideal material
     */
    public double meanAtomicNumber(Interaction process, double energyKeV) {
        double weighted = 0;
        double sum = 0;
        for (Map.Entry<String, Double> part : composition().entrySet()) {
            String symbol = part.getKey();
            double rate = part.getValue()
                    * CrossSections.barn(symbol, process, energyKeV)
                    / CrossSections.atomicWeight(symbol);
            weighted += rate * CrossSections.atomicNumber(symbol);
            sum += rate;
        }
        return sum > 0 ? weighted / sum : 1;
    }

    /**
     * Activity of ¹⁷⁶Lu: 2.59 % of natural lutetium, half-life 3.76e10 years.
     *
     * @return the activity (Bq/mm³), 0 without lutetium
     */
    public double lutetiumBqPerMm3() {
        double fraction = composition().getOrDefault("Lu", 0.0);
        double atomsPerCm3 = density() * fraction / CrossSections.atomicWeight("Lu") * 6.02214076e23 * 0.0259;
        return atomsPerCm3 * Math.log(2) / (3.76e10 * 365.25 * 86_400) / 1000;
    }
}
