package org.raysheaf.geometry.matter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.simple.RandomSource;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

/** Against reference-values E: CSDA ranges [C], widths of the fits of Levin and Hoffman [fits M, widths C]. */
class PositronRangeTest {
    private static final int DRAWS = 1_000_000;

    private final UniformRandomProvider random = RandomSource.XO_SHI_RO_256_PP.create(17);

    @ParameterizedTest
    @CsvSource({
        "633.5, 2.43", "652.6, 2.53", "960.4, 4.16", "901.9, 3.84", "1198.5, 5.44", "1732.0, 8.33", "1899, 9.19",
        "2137.6, 10.53", "3382, 17.15", "546.7, 2.00", "1473.7, 6.93", "3141.2, 15.88", "249.8, 0.64", "818.5, 3.40",
        "829.5, 3.46", "1480.6, 6.97", "664.6, 2.60", "630.2, 2.42", "395.5, 1.27"
    })
    void distancesStayBelowTheRange(double endpointKeV, double csdaMm) {
        PositronRange range = PositronRange.of(endpointKeV);
        // the sheet prints hundredths; between its own values 0.7 %
        assertThat(range.boundMm()).isCloseTo(csdaMm, within(0.006 + 0.007 * csdaMm));
        double most = 0;
        for (int i = 0; i < DRAWS; i++) {
            most = Math.max(most, range.drawMm(random));
        }
        assertThat(most).isLessThanOrEqualTo(1.05 * csdaMm).isGreaterThan(0.9 * csdaMm);
    }

    /** FWHM, FWTM and rms of the profile along one axis, 10 %: the tolerance that the sheet asks for. */
    @ParameterizedTest
    @CsvSource({
        "633.5, 0.0963, 1.0174, 0.4376",
        "960.4, 0.1734, 1.8146, 0.7590",
        "1198.5, 0.2750, 2.4964, 0.9853",
        "1732.0, 0.4980, 4.0402, 1.5411"
    })
    void profilesHaveTheirWidths(double endpointKeV, double fwhm, double fwtm, double rms) {
        PositronRange range = PositronRange.of(endpointKeV);
        double[] along = new double[DRAWS];
        double squares = 0;
        double inverse = 0;
        for (int i = 0; i < DRAWS; i++) {
            double distance = range.drawMm(random);
            inverse += 1 / distance;
            along[i] = distance * Math.abs(2 * random.nextDouble() - 1); // |cos| of a random direction is uniform
            squares += along[i] * along[i];
        }
        assertThat(Math.sqrt(squares / DRAWS)).isCloseTo(rms, within(0.1 * rms));
        Arrays.sort(along);
        // a distance r spreads evenly over 0 to r along the axis, so the height at 0 is the mean of 1/r
        double peak = inverse; // in draws per mm, like the densities below
        assertThat(2 * crossing(along, peak / 2, fwhm / 20)).isCloseTo(fwhm, within(0.1 * fwhm));
        assertThat(2 * crossing(along, peak / 10, fwhm / 5)).isCloseTo(fwtm, within(0.1 * fwtm));
    }

    private static double density(double[] sorted, double from, double width) {
        return (rank(sorted, from + width) - rank(sorted, from)) / width;
    }

    private static int rank(double[] sorted, double value) {
        int at = Arrays.binarySearch(sorted, value);
        return at >= 0 ? at : -at - 1;
    }

    private static double crossing(double[] sorted, double height, double bin) {
        double at = 0;
        while (density(sorted, at, bin) > height) {
            at += bin / 8;
        }
        return at + bin / 2;
    }

    @ParameterizedTest
    @ValueSource(doubles = {0, -1, Double.NaN, Double.POSITIVE_INFINITY})
    void refusesEndpointsThatAreNone(double endpointKeV) {
        assertThatThrownBy(() -> PositronRange.of(endpointKeV))
                .hasMessage("endpoint energy: expected more than 0 keV, found " + endpointKeV);
    }

    @Test
    void distancesGrowWithTheEndpoint() {
        double last = 0;
        for (double keV = 500; keV < 3400; keV += 100) {
            PositronRange range = PositronRange.of(keV);
            double sum = 0;
            for (int i = 0; i < 100_000; i++) {
                sum += range.drawMm(random);
            }
            assertThat(sum).isGreaterThan(last);
            last = sum;
        }
    }
}
