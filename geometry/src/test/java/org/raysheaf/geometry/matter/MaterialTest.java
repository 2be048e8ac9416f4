package org.raysheaf.geometry.matter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.entry;
import static org.assertj.core.api.Assertions.within;

import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.settings.InvalidSettingsException;

class MaterialTest {
    @Test
    void formulaAndFractionsOfOneSubstanceAgree() {
        // water: 2·1.00794 / (2·1.00794 + 15.9994)
        Material formula = new Material("w", null, null, 1.0, "H2O", null);
        Material fractions = new Material("w", null, null, 1.0, null, Map.of("H", 0.111898, "O", 0.888102));
        assertThat(formula.composition().get("H")).isCloseTo(0.111898, within(1e-5));
        assertThat(fractions.attenuationPerMm(511, true)).isCloseTo(formula.attenuationPerMm(511, true), within(1e-8));
        assertThat(formula.attenuationPerMm(511, true))
                .isCloseTo(Material.named("water").attenuationPerMm(511, true), within(1e-12));
    }

    /** Descriptions are digested, so equal settings must be written alike whatever order they were given in. */
    @Test
    void fractionsStandInOneOrder() {
        Map<String, Double> backwards = new LinkedHashMap<>();
        backwards.put("Zn", 0.1);
        backwards.put("O", 0.5);
        backwards.put("H", 0.1);
        backwards.put("C", 0.3);
        Map<String, Double> fractions = new Material("x", null, null, 1.0, null, backwards).massFractions();
        assertThat(fractions).containsExactly(entry("C", 0.3), entry("H", 0.1), entry("O", 0.5), entry("Zn", 0.1));
        backwards.put("C", 0.2);
        assertThat(fractions).containsEntry("C", 0.3);
    }

    @Test
    void likeTakesCompositionAndMayChangeDensity() {
        Material inflated = new Material("inflated", null, "lung", 0.26, null, null);
        Material lung = Material.named("lung");
        assertThat(inflated.density()).isEqualTo(0.26);
        assertThat(inflated.attenuationPerMm(511, true) / lung.attenuationPerMm(511, true))
                .isCloseTo(0.26 / 1.05, within(1e-9));
        assertThat(new Material("alias", null, "pmma", null, null, null).density())
                .isEqualTo(1.19);
    }

    @Test
    void idealMaterialsKnowNoEnergy() {
        Material ideal = new Material("ideal", 12.5);
        assertThat(ideal.ideal()).isTrue();
        assertThat(ideal.meanFreePathMm()).isEqualTo(12.5);
        assertThat(ideal.attenuationPerMm(Interaction.PHOTOELECTRIC, 60)).isEqualTo(0.08);
        assertThat(ideal.transmission(12.5)).isCloseTo(Math.exp(-1), within(1e-12));
        assertThat(new Material("black", 0).transmission(1e-9)).isZero();
    }

    @Test
    void ownMaterialsComeBeforeTheLibrary() {
        Material heavy = new Material("water", null, null, 1.105, "H2O", null);
        assertThat(Materials.resolve("water", List.of(heavy))).contains(heavy);
        assertThat(Materials.resolve("water", List.of())).contains(Material.named("water"));
        assertThat(Materials.resolve("wotar", List.of(heavy))).isEmpty();
    }

    @Test
    void refusesWhatIsNoMaterialAndSaysWhy() {
        assertThatThrownBy(() -> Material.named("wotar"))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("found wotar; the nearest is water; the library has")
                .hasMessageContaining("water, pmma");
        assertThatThrownBy(() -> new Material("x", null, null, 1.0, "H2X", null))
                .hasMessageContaining("formula: expected elements with known cross sections")
                .hasMessageContaining("found X");
        assertThatThrownBy(() -> new Material("x", null, null, 1.0, "Ca(OH)2", null))
                .hasMessageContaining("without brackets, found Ca(OH)2");
        assertThatThrownBy(() -> new Material("x", null, null, 1.0, null, Map.of("H", 0.3, "O", 0.5)))
                .hasMessageContaining("mass_fractions: expected fractions that add up to 1, found a sum of 0.8");
        assertThatThrownBy(() -> new Material("x", null, null, 1.0, "H2O", Map.of("H", 1.0)))
                .hasMessageContaining("found both");
        assertThatThrownBy(() -> new Material("x", null, null, null, "H2O", null))
                .hasMessageContaining("formula: expected density_g_per_cm3 beside it, found none");
        assertThatThrownBy(() -> new Material("x", null, null, -2.0, "H2O", null))
                .hasMessageContaining("density_g_per_cm3: expected a number > 0, found -2");
        assertThatThrownBy(() -> new Material("x", 3.0, "water", null, null, null))
                .hasMessageContaining("attenuation_length_mm: expected it alone");
        assertThatThrownBy(() -> new Material("x", null, "leed", 1.0, null, null))
                .hasMessageContaining("like: expected a material of the library or a composition, found leed")
                .hasMessageContaining("the nearest is lead");
        assertThatThrownBy(() -> new Material("x", null, "lead", null, "H2O", null))
                .hasMessageContaining("like: expected no composition beside it");
        assertThatThrownBy(() -> new Material("lead", null, null, 11.0, null, null))
                .hasMessageContaining("density_g_per_cm3: expected formula, mass_fractions or like beside it");
        assertThatThrownBy(() -> new Material("x", null, null, Double.NaN, "H2O", null))
                .hasMessageContaining("density_g_per_cm3: expected a number > 0, found NaN");
        assertThatThrownBy(() -> new Material("x", null, null, 1.0, null, Map.of("H", Double.NaN)))
                .hasMessageContaining("mass_fractions: expected fractions from 0 to 1, found NaN of H");
    }
}
