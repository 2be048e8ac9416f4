package org.raysheaf.geometry.matter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Against reference-values D (ENSDF, ICRP 107): half-life 0.2 % (Sc-44 and Rb-82 2 %), branching 1 %. */
class DecaySchemeTest {
    private static final double MIN = 60;
    private static final double H = 3600;
    private static final double D = 86_400;

    private static DecayScheme named(String name) {
        return DecayScheme.find(name).orElseThrow();
    }

    @ParameterizedTest
    @CsvSource({
        "C-11, 1221.8, 0.99767, 960.4", "N-13, 597.9, 0.99804, 1198.5", "O-15, 122.24, 0.99900, 1732.0",
        "F-18, 6586.2, 0.9673, 633.5", "Na-22, 82104810, 0.89955, 546.7", "Sc-44, 14551.2, 0.9428, 1473.7",
        "Cu-64, 45722.2, 0.1749, 652.6", "Ga-68, 4062.6, 0.8891, 1899", "Rb-82, 75.45, 0.9536, 3382",
        "Y-86, 53064, 0.3195, 1220.5", "Zr-89, 282276, 0.2274, 901.9", "I-124, 360806, 0.2269, 1534.9"
    })
    void positronEmitters(String name, double halfLifeS, double perDecay, double endpointKeV) {
        DecayScheme scheme = named(name);
        assertThat(scheme.nuclide().halfLifeS()).isCloseTo(halfLifeS, within(0.002 * halfLifeS));
        assertThat(scheme.nuclide().positronBranching()).isCloseTo(perDecay, within(0.01 * perDecay));
        assertThat(scheme.positrons().get(0).endpointKeV()).isEqualTo(endpointKeV);
        double shares = scheme.positrons().stream()
                .mapToDouble(DecayScheme.PositronBranch::share)
                .sum();
        assertThat(shares).isCloseTo(1, within(1e-12));
    }

    @ParameterizedTest
    @CsvSource({
        "Tc-99m, 6.0072, 140.511, 0.89", "In-111, 67.3128, 171.280, 0.9065", "I-123, 13.223, 159.00, 0.836",
        "I-125, 1425.6, 35.492, 0.0668", "Ga-67, 78.2808, 93.310, 0.3881", "Lu-177, 159.4632, 208.366, 0.1041",
        "Co-57, 6521.76, 122.061, 0.856", "Cs-137, 264443.8, 661.657, 0.851"
    })
    void singlePhotonEmitters(String name, double halfLifeH, double energyKeV, double perDecay) {
        DecayScheme scheme = named(name);
        assertThat(scheme.nuclide().halfLifeS()).isCloseTo(halfLifeH * H, within(0.002 * halfLifeH * H));
        assertThat(scheme.nuclide().positronBranching()).isZero();
        assertThat(scheme.positrons()).isEmpty();
        assertThat(scheme.gammas().get(0).energyKeV()).isEqualTo(energyKeV);
        assertThat(scheme.gammas().get(0).perDecay()).isCloseTo(perDecay, within(0.01 * perDecay));
    }

    @ParameterizedTest
    @CsvSource({
        "Na-22, 1274.537, 0.9994, TOGETHER", "Sc-44, 1157.022, 0.999, TOGETHER",
                "Cu-64, 1345.77, 0.00472, WITHOUT_POSITRON",
        "Ga-68, 1077.34, 0.0322, TOGETHER", "Rb-82, 776.511, 0.1506, TOGETHER", "Y-86, 1076.63, 0.825, TOGETHER",
        "Zr-89, 909.15, 0.9904, LATER", "I-124, 602.73, 0.629, TOGETHER"
    })
    void linesBesideThePositron(String name, double energyKeV, double perDecay, DecayScheme.Timing timing) {
        assertThat(named(name).gammas().get(0)).isEqualTo(new DecayScheme.GammaLine(energyKeV, perDecay, timing));
    }

    @Test
    void parentsDecayLikeTheirDaughters() {
        assertThat(named("Ge-68").nuclide().halfLifeS()).isCloseTo(270.95 * D, within(0.002 * 270.95 * D));
        assertThat(named("Ge-68").positrons()).isEqualTo(named("Ga-68").positrons());
        assertThat(named("Sr-82").nuclide().halfLifeS()).isCloseTo(25.35 * D, within(0.002 * 25.35 * D));
        assertThat(named("Sr-82").gammas()).isEqualTo(named("Rb-82").gammas());
    }

    @Test
    void fluorineAfterTwentyMinutes() {
        // reference-values D, note 3
        double left = Math.pow(2, -20 * MIN / named("F-18").nuclide().halfLifeS());
        assertThat(left).isCloseTo(0.8813584904, within(1e-9));
    }
}
