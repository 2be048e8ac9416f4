package org.raysheaf.geometry.matter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Against reference-values B: closed form, equal to quadrature and to xraylib within 2e-8. */
class KleinNishinaTest {
    @ParameterizedTest
    @CsvSource({
        "60, 0.54561983",
        "80, 0.51728541",
        "140.511, 0.45183932",
        "159.0, 0.43618801",
        "171.28, 0.42662998",
        "364.49, 0.32842414",
        "510.99895, 0.28653992",
        "661.657, 0.25619958",
        "1157.0, 0.19641865",
        "1274.537, 0.18693536"
    })
    void totals(double energyKeV, double barn) {
        assertThat(KleinNishina.totalB(energyKeV)).isCloseTo(barn, within(1e-6 * barn));
    }

    @ParameterizedTest
    @CsvSource({
        "140.511, 0, 140.511, 79.40788", "140.511, 30, 135.5186, 64.6805", "140.511, 90, 110.2070, 25.8733",
        "140.511, 180, 90.6554, 36.2794", "510.99895, 45, 395.2368, 37.2047", "510.99895, 60, 340.6660, 24.9988",
        "510.99895, 120, 204.3996, 13.6582", "661.657, 90, 288.3250, 13.0475", "1274.537, 60, 567.1911, 15.2709",
        "1274.537, 180, 212.8338, 6.8150"
    })
    void anglesAndEnergies(double energyKeV, double angleDeg, double scatteredKeV, double millibarn) {
        double cosine = Math.cos(Math.toRadians(angleDeg));
        // printed digits
        assertThat(energyKeV * KleinNishina.keptShare(energyKeV, cosine)).isCloseTo(scatteredKeV, within(6e-5));
        assertThat(1000 * KleinNishina.perSteradianB(energyKeV, cosine)).isCloseTo(millibarn, within(6e-5));
    }

    @Test
    void tendsToThomson() {
        // reference-values A: 0.66524587321 b; σ = σ_T (1 − 2a + …)
        double a = 1 / KleinNishina.ELECTRON_KEV;
        double expected = 0.66524587321 * (1 - 2 * a + 5.2 * a * a);
        assertThat(KleinNishina.totalB(1)).isCloseTo(expected, within(2e-7 * expected));
    }
}
