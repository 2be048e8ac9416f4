package org.raysheaf.engine.blur;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.function.DoubleUnaryOperator;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;
import org.raysheaf.geometry.matter.DecayScheme;
import org.raysheaf.geometry.settings.InvalidSettingsException;

final class MixtureTest {
    /** Widths in mm of the laws of Levin and Hoffman 1999, from their coefficients (from memory). The law ends at the CSDA range, which takes 2.6 to 2.8 % off the rms. */
    @ParameterizedTest
    @CsvSource({
        "F-18, 0.0963, 1.0174, 0.4376",
        "C-11, 0.1734, 1.8146, 0.7590",
        "N-13, 0.2750, 2.4964, 0.9853",
        "O-15, 0.4980, 4.0402, 1.5411"
    })
    void rangeHasTheWidthsOfItsLaw(String nuclide, double fwhm, double fwtm, double rms) {
        DecayScheme scheme = DecayScheme.find(nuclide).orElseThrow();
        DoubleUnaryOperator law = Mixture.rangeProfile(scheme);
        Mixture fit = Mixture.ofRange(scheme);
        assertThat(Mixture.width(law, 0.5, 20)).isCloseTo(fwhm, within(0.01 * fwhm));
        assertThat(Mixture.width(law, 0.1, 20)).isCloseTo(fwtm, within(0.01 * fwtm));
        assertThat(fit.widthMm(0.5)).isCloseTo(fwhm, within(0.02 * fwhm));
        assertThat(fit.widthMm(0.1)).isCloseTo(fwtm, within(0.02 * fwtm));
        // Between and beyond these widths too: seen through half a millimetre there is no difference.
        Mixture sharp = new Mixture(List.of(new Mixture.Part(1, 0.5 / Mixture.FWHM_PER_SIGMA)));
        DoubleUnaryOperator seen = through(law, 0.5 / Mixture.FWHM_PER_SIGMA);
        for (double fraction : new double[] {0.75, 0.5, 0.25, 0.1, 0.05}) {
            double expected = Mixture.width(seen, fraction, 20);
            assertThat(fit.then(sharp).widthMm(fraction)).isCloseTo(expected, within(0.015 * expected));
        }
        // The published rms is that of a law without end, ours ends where positrons do: 2.6 to 2.8 % less.
        assertThat(fit.rmsMm()).isBetween(0.97 * rms, 0.98 * rms);
    }

    private static DoubleUnaryOperator through(DoubleUnaryOperator law, double sigma) {
        double step = 0.005;
        return x -> {
            double sum = 0;
            for (double u = -6 * sigma; u < 6 * sigma; u += step) {
                sum += law.applyAsDouble(Math.abs(x - u)) * Math.exp(-0.5 * u * u / (sigma * sigma));
            }
            return sum;
        };
    }

    @ParameterizedTest
    @ValueSource(strings = {"F-18", "Ga-68", "Rb-82", "I-124", "Cu-64", "Zr-89"})
    void rmsIsThatOfAllBranchesAndWeightsAreShares(String nuclide) {
        DecayScheme scheme = DecayScheme.find(nuclide).orElseThrow();
        DoubleUnaryOperator law = Mixture.rangeProfile(scheme);
        double mass = 0;
        double square = 0;
        double step = 1e-4;
        for (double x = step / 2; x < 20; x += step) {
            mass += 2 * law.applyAsDouble(x) * step;
            square += 2 * x * x * law.applyAsDouble(x) * step;
        }
        Mixture fit = Mixture.ofRange(scheme);
        assertThat(mass).isCloseTo(1, within(1e-5));
        assertThat(fit.rmsMm()).isCloseTo(Math.sqrt(square), within(2e-3 * fit.rmsMm()));
        assertThat(fit.parts()).allMatch(part -> part.weight() > 0);
    }

    @Test
    void oneKernelAfterTheOtherAddsVariances() {
        Mixture a = new Mixture(List.of(new Mixture.Part(0.7, 1), new Mixture.Part(0.3, 2)));
        Mixture b = new Mixture(List.of(new Mixture.Part(1, 3)));
        assertThat(a.then(b).rmsMm()).isCloseTo(Math.sqrt(0.7 + 1.2 + 9), within(1e-12));
        assertThat(b.widthMm(0.5)).isCloseTo(7.06446, within(1e-4));
        assertThat(Mixture.POINT.widthMm(0.5)).isZero();
    }

    @Test
    void weightsAddUpToOne() {
        assertThatThrownBy(() -> new Mixture(List.of(new Mixture.Part(0.7, 1), new Mixture.Part(0.2, 2))))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("add up to 1");
        assertThatThrownBy(() -> Mixture.ofRange(DecayScheme.find("Tc-99m").orElseThrow()))
                .hasMessageContaining("no positrons");
    }
}
