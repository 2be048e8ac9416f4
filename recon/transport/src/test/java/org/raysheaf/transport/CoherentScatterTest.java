package org.raysheaf.transport;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.apache.commons.rng.UniformRandomProvider;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.raysheaf.geometry.matter.Material;

class CoherentScatterTest {
    private static final int DRAWS = 400_000;
    private static final Material LEAD = Material.named("lead");

    /** reference-values C: µ/ρ of lead at 140.511 keV is 2.3693 cm²/g, 2.2529 without coherent scatter. Tables there hold within 0.5 %. */
    @Test
    void leadScattersOnePhotonInTwentyCoherently() {
        double expected = (2.3693 - 2.2529) / 2.3693;
        PhotonTable table = PhotonTable.of(LEAD, true);
        double share = table.allButPair(140.511) - table.absorptionOrCompton(140.511);
        assertThat(share).isCloseTo(expected, within(0.005 * expected + 0.001));
    }

    /**
     * Mean of 1 − cos θ against the integral of the same law, (1 + c²) / (1 + (a q)²)² over c, by the trapezium rule: a hundred thousand steps. Lead,
     * Z = 82.
     */
    @ParameterizedTest
    @CsvSource({"60", "140.511", "511"})
    void anglesFollowTheFormFactor(double energyKeV) {
        double perKeV = 0.885 / (510.99895 / 137.035999 * Math.cbrt(82));
        double norm = 0;
        double first = 0;
        double second = 0;
        int steps = 200_000;
        for (int i = 0; i < steps; i++) {
            double c = -1 + 2 * (i + 0.5) / steps;
            double q = 2 * energyKeV * Math.sqrt(0.5 * (1 - c));
            double law = (1 + c * c) / Math.pow(1 + perKeV * q * perKeV * q, 2);
            norm += law;
            first += law * (1 - c);
            second += law * (1 - c) * (1 - c);
        }
        CoherentScatter scatter = CoherentScatter.of(LEAD);
        UniformRandomProvider random = RandomStreams.stream(5, (long) energyKeV);
        double sum = 0;
        for (int i = 0; i < DRAWS; i++) {
            sum += 1 - scatter.drawCosine(energyKeV, random);
        }
        double mean = first / norm;
        double error = Math.sqrt((second / norm - mean * mean) / DRAWS);
        assertThat(sum / DRAWS).isCloseTo(mean, within(4 * error));
    }

    /** Half of the photons of 511 keV turn by less than about a q = 1: θ = ħc / (a E), a few degrees even in lead; less in water. */
    @Test
    void photonsOf511KeVTurnByAFewDegrees() {
        for (String name : new String[] {"lead", "water"}) {
            CoherentScatter scatter = CoherentScatter.of(Material.named(name));
            UniformRandomProvider random = RandomStreams.stream(6, 0);
            int small = 0;
            for (int i = 0; i < DRAWS; i++) {
                small += scatter.drawCosine(511, random) > Math.cos(Math.toRadians(10)) ? 1 : 0;
            }
            assertThat((double) small / DRAWS).as(name).isGreaterThan(0.95);
        }
    }
}
