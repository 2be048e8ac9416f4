package org.raysheaf.geometry.matter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.raysheaf.geometry.settings.InvalidSettingsException;

/** Against reference-values D (ENSDF, ICRP 107): half-life 0.2 % (Sc-44 and Rb-82 2 %), branching 1 %. */
class DecaySchemeTest {
    private static final double MIN = 60;
    private static final double D = 86_400;

    private static DecayScheme named(String name) {
        return DecayScheme.find(name).orElseThrow();
    }

    /** All rows of the sheet: half-life (s), positrons per decay, branches and lines as keV:per cent of decays. */
    @ParameterizedTest
    @CsvSource(delimiter = '|', textBlock = """
                    C-11   | 1221.8       | 0.99767 | 960.4:99.767                                   |
                    N-13   | 597.9        | 0.99804 | 1198.5:99.804                                  |
                    O-15   | 122.24       | 0.99900 | 1732.0:99.900                                  |
                    F-18   | 6586.2       | 0.9673  | 633.5:96.73                                    |
                    Na-22  | 82104810     | 0.89955 | 546.7:89.9 1821.2:0.055                        | 1274.537:99.94
                    Sc-44  | 14551.2      | 0.9428  | 1473.7:94.28                                   | 1157.022:99.9 1499.45:0.91
                    Cu-64  | 45722.16     | 0.1749  | 652.6:17.49                                    | 1345.77:0.472
                    Ga-68  | 4062.6       | 0.8891  | 1899:87.72 821.7:1.19                          | 1077.34:3.22
                    Ge-68  | 23410080     | 0.8891  | 1899:87.72 821.7:1.19                          | 1077.34:3.22
                    Rb-82  | 75.45        | 0.9536  | 3382:81.8 2605.5:13.0                          | 776.511:15.06 1395.26:0.57
                    Sr-82  | 2190240      | 0.9536  | 3382:81.8 2605.5:13.0                          | 776.511:15.06 1395.26:0.57
                    Y-86   | 53064        | 0.3195  | 1220.5:11.9 1545.0:5.6 1988.1:3.6 3141.2:2.0   | 1076.63:82.5 627.72:32.6 1153.05:30.5 777.37:22.4 1920.72:20.8 1854.38:17.2 443.13:16.9
                    Zr-89  | 282276       | 0.2274  | 901.9:22.74                                    | 909.15:99.04 1713.0:0.74
                    I-124  | 360806.4     | 0.2269  | 1534.9:11.7 2137.6:10.7 812.1:0.29             | 602.73:62.9 1690.96:11.15 722.78:10.36 1509.36:3.25
                    Tc-99m | 21625.92     | 0       |                                                | 140.511:89
                    In-111 | 242326.08    | 0       |                                                | 171.280:90.65 245.350:94.09
                    I-123  | 47602.8      | 0       |                                                | 159.00:83.6 528.97:1.27 440.02:0.39 538.54:0.31
                    I-125  | 5132160      | 0       |                                                | 35.492:6.68 27.47:75.7 27.20:40.6 30.995:13.2 30.944:6.8
                    Ga-67  | 281810.88    | 0       |                                                | 93.310:38.81 184.576:21.41 300.217:16.64 393.527:4.56 91.265:3.11 208.95:2.46
                    Lu-177 | 574067.52    | 0       |                                                | 208.366:10.41 112.950:6.225 321.316:0.219 249.674:0.200
                    Co-57  | 23478336     | 0       |                                                | 122.061:85.6 136.474:10.68 14.413:9.16
                    Cs-137 | 951977787    | 0       |                                                | 661.657:85.1
                    """)
    void nuclides(String name, double halfLifeS, double perDecay, String branches, String lines) {
        DecayScheme scheme = named(name);
        assertThat(scheme.nuclide().halfLifeS()).isCloseTo(halfLifeS, within(0.002 * halfLifeS));
        assertThat(scheme.nuclide().positronBranching()).isCloseTo(perDecay, within(0.01 * perDecay));

        Map<Double, Double> expected = perCent(branches);
        double listed =
                expected.values().stream().mapToDouble(Double::doubleValue).sum();
        assertThat(scheme.positrons()).hasSize(expected.size());
        for (DecayScheme.PositronBranch branch : scheme.positrons()) {
            assertThat(expected).containsKey(branch.endpointKeV());
            double share = expected.getOrDefault(branch.endpointKeV(), 0.0) / listed;
            assertThat(branch.share()).isCloseTo(share, within(0.01 * share));
        }

        Map<Double, Double> found = new TreeMap<>();
        scheme.gammas().forEach(line -> found.merge(line.energyKeV(), 100 * line.perDecay(), Double::sum));
        Map<Double, Double> wanted = perCent(lines);
        assertThat(found.keySet()).isEqualTo(wanted.keySet());
        wanted.forEach((energyKeV, each) ->
                assertThat(found.get(energyKeV)).as("%s keV", energyKeV).isCloseTo(each, within(0.01 * each)));
    }

    @Test
    void theSheetHasNoMoreNuclides() {
        assertThat(DecayScheme.names()).hasSize(22);
    }

    private static Map<Double, Double> perCent(@Nullable String cell) {
        Map<Double, Double> values = new TreeMap<>();
        for (List<String> pair : Table.pairs(cell == null ? "" : cell)) {
            values.put(Double.parseDouble(pair.get(0)), Double.parseDouble(pair.get(1)));
        }
        return values;
    }

    /**
     * How many per cent of the decays emit a positron and a line together: the sum of the branches of the sheet above the level, found from the
     * differences of the endpoints, for example 1899 − 1077.3 = 821.7 keV in Ga-68. Tolerance: that of branching.
     */
    @ParameterizedTest
    @CsvSource({
        "Ga-68, 1077.34, 1.19",
        "Ge-68, 1077.34, 1.19",
        "Rb-82, 776.511, 13.0",
        "Sr-82, 776.511, 13.0",
        "I-124, 602.73, 11.99",
        "I-124, 722.78, 0.29",
        "I-124, 1690.96, 0",
        "I-124, 1509.36, 0",
        "Sc-44, 1499.45, 0",
        "Sc-44, 1157.022, 94.28",
        "Na-22, 1274.537, 89.9",
        "Cu-64, 1345.77, 0",
        "Zr-89, 909.15, 0",
        "Zr-89, 1713.0, 0"
    })
    void linesComeWithPositronsAsOftenAsTheirLevels(String name, double energyKeV, double perCentOfDecays) {
        DecayScheme scheme = named(name);
        double together = scheme.gammas().stream()
                .filter(line -> line.energyKeV() == energyKeV && line.timing() == DecayScheme.Timing.TOGETHER)
                .mapToDouble(DecayScheme.GammaLine::perDecay)
                .sum();
        assertThat(100 * together * scheme.nuclide().positronBranching())
                .isCloseTo(perCentOfDecays, within(0.01 * perCentOfDecays));
    }

    @Test
    void onlyTheLineOfTheLongLivedLevelComesLater() {
        for (String name : DecayScheme.names()) {
            for (DecayScheme.GammaLine line : named(name).gammas()) {
                boolean later = line.timing() == DecayScheme.Timing.LATER;
                assertThat(later).as("%s %s", name, line).isEqualTo(name.equals("Zr-89") && line.energyKeV() == 909.15);
            }
        }
    }

    @Test
    void refusesWhatCannotDecay() {
        Nuclide half = new Nuclide("half", 1, 0.5);
        assertThatThrownBy(() -> new DecayScheme(
                        half,
                        List.of(
                                new DecayScheme.PositronBranch(0, 0.5),
                                new DecayScheme.PositronBranch(Double.NaN, 0.4)),
                        List.of(
                                new DecayScheme.GammaLine(-1, 1.2, DecayScheme.Timing.TOGETHER),
                                new DecayScheme.GammaLine(10, 0.6, DecayScheme.Timing.WITHOUT_POSITRON))))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessage("decay scheme of half: positrons[0].endpoint_keV: expected a number > 0, found 0; "
                        + "positrons[1].endpoint_keV: expected a number > 0, found NaN; "
                        + "positrons: expected shares that add up to 1, found 0.9; "
                        + "gammas[0].energy_keV: expected a number > 0, found -1; "
                        + "gammas[0].per_decay: expected a number from 0 to 1, found 1.2; "
                        + "gammas[1].per_decay: expected a number from 0 to 0.5, found 0.6");
        assertThatThrownBy(() -> new DecayScheme(half, List.of(), List.of()))
                .hasMessageContaining("positrons: expected branches if there are positrons and none if not");
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
