package org.raysheaf.geometry.matter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.raysheaf.geometry.settings.InvalidSettingsException;

class MatterTest {
    /** Frame length over effective time: the correction of a mean rate to the frame's start, λΔ/(1 − e^(−λΔ)). */
    @ParameterizedTest
    @CsvSource({"6586.2, 1200, 1.0644741725", "1221.8, 1200, 1.3787165160", "122.24, 120, 1.3785121108"})
    void effectiveTimeCorrectsForDecayWithinTheFrame(double halfLifeS, double frameS, double expected) {
        Nuclide nuclide = new Nuclide("x", halfLifeS, 1);
        assertThat(frameS / nuclide.effectiveTimeS(frameS)).isCloseTo(expected, within(1e-10));
    }

    @Test
    void fractionLeftAfterTwentyMinutesOfF18() {
        Nuclide f18 = new Nuclide("F-18", 109.77 * 60, 0.9673);
        double decayed = f18.effectiveTimeS(1200) * Math.log(2) / f18.halfLifeS();
        assertThat(1 - decayed).isCloseTo(0.8813584904, within(1e-10));
    }

    @Test
    void longLivedSourcesDoNotDecayNoticeably() {
        assertThat(new Nuclide("x", 1e12, 1).effectiveTimeS(100)).isCloseTo(100, within(1e-8));
    }

    @Test
    void nuclideRefusesImpossibleFigures() {
        assertThatThrownBy(() -> new Nuclide("x", 0, 1.1))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessage("nuclide: half_life_s: expected a number > 0, found 0; "
                        + "positron_branching: expected at most 1, found 1.1");
        assertThatThrownBy(() -> new Nuclide("x", 1, Double.NaN)).hasMessageContaining("positron_branching");
    }

    @Test
    void transmissionFallsExponentially() {
        Material crystal = new Material("crystal", 12);
        assertThat(crystal.transmission(0)).isEqualTo(1);
        assertThat(crystal.transmission(12)).isCloseTo(Math.exp(-1), within(1e-15));
    }

    @Test
    void perfectAbsorberStopsAtTheSurface() {
        Material black = new Material("black", 0);
        assertThat(black.transmission(0)).isEqualTo(1);
        assertThat(black.transmission(1e-9)).isZero();
        assertThatThrownBy(() -> new Material("x", -1)).hasMessageContaining("attenuation_length_mm");
    }
}
