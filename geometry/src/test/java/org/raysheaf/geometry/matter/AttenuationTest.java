package org.raysheaf.geometry.matter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Against reference-values C: µ/ρ from NIST XCOM, interpolated there by others and checked against xraylib within 0.04 %. */
class AttenuationTest {
    private static final double[] ENERGIES = {140.511, 510.999, 661.657, 1274.537};

    /** The sheet's own proposal for a toolkit's table. */
    private static final double TOLERANCE = 0.005;

    private static double perGram(Material material, double energyKeV, boolean coherent) {
        return 10 * material.attenuationPerMm(energyKeV, coherent) / material.density();
    }

    @ParameterizedTest
    @CsvSource({
        "water, 1.000, 0.15365, 0.15088, 0.09598, 0.09577, 0.08576, 0.08564, 0.06261, 0.06257",
        "pmma, 1.19, 0.14855, 0.14640, 0.09324, 0.09307, 0.08333, 0.08323, 0.06082, 0.06080",
        "polyethylene, 0.94, 0.15641, 0.15475, 0.09856, 0.09843, 0.08809, 0.08802, 0.06430, 0.06428",
        "polystyrene, 1.06, 0.14761, 0.14583, 0.09293, 0.09279, 0.08306, 0.08298, 0.06063, 0.06060",
        "ptfe, 2.20, 0.13383, 0.13060, 0.08303, 0.08278, 0.07419, 0.07404, 0.05415, 0.05411",
        "cortical-bone, 1.92, 0.15266, 0.14677, 0.08938, 0.08891, 0.07975, 0.07947, 0.05813, 0.05805",
        "cortical-bone-icrp, 1.85, 0.15388, 0.14817, 0.09049, 0.09003, 0.08075, 0.08047, 0.05886, 0.05878",
        "lung, 1.05, 0.15245, 0.14972, 0.09519, 0.09498, 0.08506, 0.08493, 0.06209, 0.06205",
        "soft-tissue, 1.00, 0.15241, 0.14985, 0.09531, 0.09511, 0.08516, 0.08505, 0.06217, 0.06213",
        "adipose, 0.92, 0.15363, 0.15162, 0.09653, 0.09638, 0.08627, 0.08618, 0.06297, 0.06295",
        "air, 0.001205, 0.13842, 0.13570, 0.08632, 0.08611, 0.07715, 0.07703, 0.05630, 0.05627",
        "aluminium, 2.699, 0.14196, 0.13502, 0.08367, 0.08312, 0.07468, 0.07435, 0.05442, 0.05433",
        "copper, 8.96, 0.24457, 0.22071, 0.08270, 0.08072, 0.07261, 0.07142, 0.05210, 0.05177",
        "tungsten, 19.30, 1.8638, 1.7637, 0.13380, 0.12466, 0.09782, 0.09227, 0.05505, 0.05351",
        "lead, 11.35, 2.3693, 2.2529, 0.15618, 0.14521, 0.11020, 0.10353, 0.05792, 0.05606"
    })
    void ordinaryMatter(
            String name,
            double density,
            double total1,
            double without1,
            double total2,
            double without2,
            double total3,
            double without3,
            double total4,
            double without4) {
        Material material = Material.named(name);
        double[] totals = {total1, total2, total3, total4};
        double[] withouts = {without1, without2, without3, without4};
        assertThat(material.density()).isEqualTo(density);
        for (int i = 0; i < ENERGIES.length; i++) {
            assertThat(perGram(material, ENERGIES[i], true)).isCloseTo(totals[i], within(TOLERANCE * totals[i]));
            assertThat(perGram(material, ENERGIES[i], false)).isCloseTo(withouts[i], within(TOLERANCE * withouts[i]));
        }
    }

    @ParameterizedTest
    @CsvSource({
        "lso, 7.40, 1.3244, 0.11732, 0.11073, 0.3232, 0.3424, 0.09016, 0.05477",
        "lyso, 7.10, 1.2586, 0.11526, 0.10896, 0.3100, 0.3279, 0.08914, 0.05465",
        "bgo, 7.13, 1.7131, 0.13503, 0.12704, 0.4117, 0.4376, 0.09985, 0.05690",
        "gso, 6.71, 1.0002, 0.10483, 0.09952, 0.2488, 0.2621, 0.08328, 0.05313",
        "gagg, 6.63, 0.75629, 0.09772, 0.09357, 0.1895, 0.1979, 0.07986, 0.05281",
        "nai, 3.667, 0.71276, 0.09326, 0.08883, 0.1711, 0.1796, 0.07665, 0.05108",
        "csi, 4.51, 0.85452, 0.09613, 0.09082, 0.2085, 0.2207, 0.07756, 0.05054",
        "labr3, 5.08, 0.56247, 0.08851, 0.08473, 0.1314, 0.1373, 0.07410, 0.05047",
        "czt, 5.78, 0.69924, 0.09103, 0.08642, 0.1678, 0.1768, 0.07487, 0.04992",
        "cdte, 5.85, 0.70898, 0.09122, 0.08656, 0.1704, 0.1795, 0.07494, 0.04989",
        "germanium, 5.323, 0.27837, 0.08115, 0.07888, 0.0413, 0.0425, 0.07083, 0.05051",
        "silicon, 2.330, 0.14955, 0.08666, 0.08602, 0.0020, 0.0020, 0.07731, 0.05632"
    })
    void detectorMaterials(
            String name,
            double density,
            double at140,
            double at511,
            double at511Without,
            double photoShare,
            double photoShareWithout,
            double at662,
            double at1275) {
        Material material = Material.named(name);
        assertThat(material.density()).isEqualTo(density);
        assertThat(perGram(material, 140.511, true)).isCloseTo(at140, within(TOLERANCE * at140));
        assertThat(perGram(material, 510.999, true)).isCloseTo(at511, within(TOLERANCE * at511));
        assertThat(perGram(material, 510.999, false)).isCloseTo(at511Without, within(TOLERANCE * at511Without));
        assertThat(perGram(material, 661.657, true)).isCloseTo(at662, within(TOLERANCE * at662));
        assertThat(perGram(material, 1274.537, true)).isCloseTo(at1275, within(TOLERANCE * at1275));
        double absorption = material.attenuationPerMm(Interaction.PHOTOELECTRIC, 510.999);
        // shares are printed with four decimals
        assertThat(absorption / material.attenuationPerMm(510.999, true))
                .isCloseTo(photoShare, within(TOLERANCE * photoShare + 5e-5));
        assertThat(absorption / material.attenuationPerMm(510.999, false))
                .isCloseTo(photoShareWithout, within(TOLERANCE * photoShareWithout + 5e-5));
    }

    /** Grid points of the tables: no interpolation, so the printed four digits must come out (±1 in the last for other editions). */
    @ParameterizedTest
    @CsvSource({
        "150, 0.1505, 0.1456, 0.1379, 0.1448, 0.2491, 1.581, 2.014, 0.1480, 0.1356",
        "500, 0.09687, 0.09410, 0.08445, 0.08748, 0.08212, 0.1378, 0.1613, 0.09022, 0.08712",
        "600, 0.08956, 0.08701, 0.07802, 0.08078, 0.07452, 0.1093, 0.1248, 0.08332, 0.08055",
        "1250, 0.06323, 0.06143, 0.05496, 0.05688, 0.05101, 0.05576, 0.05875, 0.05871, 0.05687"
    })
    void gridPoints(
            double energyKeV,
            double water,
            double pmma,
            double aluminium,
            double silicon,
            double germanium,
            double tungsten,
            double lead,
            double bone,
            double air) {
        String[] names = {
            "water", "pmma", "aluminium", "silicon", "germanium", "tungsten", "lead", "cortical-bone", "air"
        };
        double[] expected = {water, pmma, aluminium, silicon, germanium, tungsten, lead, bone, air};
        for (int i = 0; i < names.length; i++) {
            double unit = Math.pow(10, Math.floor(Math.log10(expected[i])) - 3);
            assertThat(perGram(Material.named(names[i]), energyKeV, true))
                    .as(names[i])
                    .isCloseTo(expected[i], within(1.5 * unit));
        }
    }

    /** Edges of reference-values C: lutetium 63.314 keV, tungsten 69.525 keV, lead 88.005 keV. */
    @ParameterizedTest
    @CsvSource({"lso, 63.314", "tungsten, 69.525", "lead, 88.005", "nai, 33.169"})
    void edgesAreJumpsAndNothingElseIs(String name, double edgeKeV) {
        Material material = Material.named(name);
        double below = material.attenuationPerMm(Interaction.PHOTOELECTRIC, edgeKeV - 0.1);
        double above = material.attenuationPerMm(Interaction.PHOTOELECTRIC, edgeKeV + 0.1);
        assertThat(above / below).isGreaterThan(3);
        // elsewhere the curve falls and never wiggles
        double last = above;
        for (double keV = edgeKeV + 0.2; keV < 3000; keV *= 1.003) {
            double now = material.attenuationPerMm(Interaction.PHOTOELECTRIC, keV);
            assertThat(now).as("%s keV", keV).isLessThan(last);
            last = now;
        }
    }

    @Test
    void energiesOutsideTheTablesCountAsTheirEnds() {
        Material lead = Material.named("lead");
        assertThat(lead.attenuationPerMm(5, true)).isEqualTo(lead.attenuationPerMm(10, true));
        assertThat(lead.attenuationPerMm(4000, true)).isEqualTo(lead.attenuationPerMm(3000, true));
        for (double energyKeV : new double[] {0, -1, Double.NaN}) {
            assertThatThrownBy(() -> lead.attenuationPerMm(energyKeV, true))
                    .hasMessage("photon energy: expected more than 0 keV, found " + energyKeV);
        }
    }

    /** Derived path checks of reference-values C, printed with 5 decimals: exp(−µL) at 511 keV, coherent scatter included. */
    @ParameterizedTest
    @CsvSource({
        "water, 25, 0.78667",
        "water, 30, 0.74981",
        "hdpe, 25, 0.78935",
        "hdpe, 50, 0.62308",
        "hdpe, 100, 0.38822"
    })
    void photonsThatGetThrough(String name, double pathMm, double expected) {
        double depth = pathMm * Material.named(name).attenuationPerMm(510.999, true);
        // an error of µ, carried over
        assertThat(Math.exp(-depth)).isCloseTo(expected, within(TOLERANCE * depth * expected + 5e-6));
    }

    /** Efficiencies of reference-values C, printed with 4 decimals: 1 − exp(−µL) at 511 keV without coherent scatter. */
    @ParameterizedTest
    @CsvSource({
        "lso, 10, 0.5593",
        "lso, 20, 0.8058",
        "bgo, 10, 0.5958",
        "bgo, 20, 0.8366",
        "lyso, 10, 0.5387",
        "lyso, 20, 0.7872",
        "nai, 10, 0.2780",
        "czt, 10, 0.3932"
    })
    void photonsThatInteract(String name, double pathMm, double expected) {
        Material material = Material.named(name);
        double depth = pathMm / material.meanFreePathMm();
        assertThat(1 - material.transmission(pathMm))
                .isCloseTo(expected, within(TOLERANCE * depth * (1 - expected) + 5e-5));
    }

    @Test
    void pairProductionBeginsAtItsThreshold() {
        Material lead = Material.named("lead");
        assertThat(lead.attenuationPerMm(Interaction.PAIR, 1021.9)).isZero();
        double last = 0;
        for (double keV = 1030; keV < 3000; keV += 10) {
            double now = lead.attenuationPerMm(Interaction.PAIR, keV);
            assertThat(now).isGreaterThan(last);
            last = now;
        }
    }

    /** reference-values C: LSO 294 Bq/cm³, LYSO 264 Bq/cm³; published half-lives differ by 3 %. */
    @Test
    void lutetiumIsRadioactive() {
        assertThat(1000 * Material.named("lso").lutetiumBqPerMm3()).isCloseTo(294, within(0.03 * 294));
        assertThat(1000 * Material.named("lyso").lutetiumBqPerMm3()).isCloseTo(264, within(0.03 * 264));
        assertThat(Material.named("bgo").lutetiumBqPerMm3()).isZero();
    }
}
