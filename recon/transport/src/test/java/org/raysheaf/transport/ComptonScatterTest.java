package org.raysheaf.transport;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.raysheaf.geometry.matter.KleinNishina;

/** reference-values B: probabilities and means of the scattering angle, computed from the Klein–Nishina formula by quadrature. */
class ComptonScatterTest {
    private static final int DRAWS = 1_000_000;
    private static final double[] ANGLES_DEG = {15, 30, 45, 60, 90, 120};

    @ParameterizedTest
    @CsvSource({
        "140.511, 0.036651, 0.133690, 0.261022, 0.389483, 0.603339, 0.782176, 0.149763, 74.4654, 0.825920",
        "510.99895, 0.056431, 0.193620, 0.350641, 0.488750, 0.692629, 0.845483, 0.291406, 61.3716, 0.655518"
    })
    void anglesAreThoseOfKleinAndNishina(
            double energyKeV,
            double below15,
            double below30,
            double below45,
            double below60,
            double below90,
            double below120,
            double meanCosine,
            double medianDeg,
            double keptShare) {
        double[] expected = {below15, below30, below45, below60, below90, below120};
        ComptonScatter scatter = new ComptonScatter(RandomStreams.stream(21, (long) energyKeV));
        long[] below = new long[ANGLES_DEG.length];
        long belowMedian = 0;
        double cosines = 0;
        double squares = 0;
        double kept = 0;
        for (int i = 0; i < DRAWS; i++) {
            scatter.draw(energyKeV);
            double c = scatter.cosine();
            assertThat(scatter.keptKeV() / energyKeV).isCloseTo(KleinNishina.keptShare(energyKeV, c), within(1e-9));
            for (int a = 0; a < ANGLES_DEG.length; a++) {
                below[a] += c > Math.cos(Math.toRadians(ANGLES_DEG[a])) ? 1 : 0;
            }
            belowMedian += c > Math.cos(Math.toRadians(medianDeg)) ? 1 : 0;
            cosines += c;
            squares += c * c;
            kept += scatter.keptKeV() / energyKeV;
        }
        for (int a = 0; a < ANGLES_DEG.length; a++) {
            double p = expected[a];
            assertThat((double) below[a] / DRAWS)
                    .as("below %s degrees", ANGLES_DEG[a])
                    .isCloseTo(p, within(3 * Math.sqrt(p * (1 - p) / DRAWS)));
        }
        assertThat((double) belowMedian / DRAWS).isCloseTo(0.5, within(3 * Math.sqrt(0.25 / DRAWS)));
        double mean = cosines / DRAWS;
        double error = Math.sqrt((squares / DRAWS - mean * mean) / DRAWS);
        assertThat(mean).isCloseTo(meanCosine, within(3 * error));
        // the spread of E'/E is below 0.3
        assertThat(kept / DRAWS).isCloseTo(keptShare, within(3 * 0.3 / Math.sqrt(DRAWS)));
    }
}
