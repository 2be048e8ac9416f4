package org.raysheaf.geometry.response;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.EnumSet;
import java.util.List;
import java.util.Random;
import java.util.Set;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.detector.BlockKind;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.MonolithicBlock;
import org.raysheaf.geometry.detector.Placement;
import org.raysheaf.geometry.detector.Readout;
import org.raysheaf.geometry.detector.Systems;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.settings.InvalidSettingsException;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafCatalogue;

class SheavesOfSeveralRaysTest {
    private static final double LAMBDA_MM = 12.2;

    /** Two facing blocks of 3 × 3 crystals with depth readout, 60 mm apart. */
    private static DetectorSystem pair(BlockKind kind) {
        return Systems.system(
                new FieldOfView(20, 20),
                1,
                LAMBDA_MM,
                List.of(kind),
                List.of(
                        new Placement.Single(kind.name(), new Vector3(30, 0, 0), new Vector3(-1, 0, 0), Vector3.Z),
                        new Placement.Single(kind.name(), new Vector3(-30, 0, 0), Vector3.X, Vector3.Z)));
    }

    private static CrystalBlock tile(@Nullable Double depthFwhmMm) {
        Readout ideal = Readout.IDEAL;
        return new CrystalBlock(
                "tile",
                3,
                3,
                1,
                new Vector3(4, 4, 12),
                new Vector3(3.8, 3.8, 12),
                "scintillator",
                new Readout(
                        ideal.channel(),
                        ideal.decoding(),
                        0,
                        depthFwhmMm,
                        0,
                        0.5,
                        0,
                        0,
                        1,
                        0,
                        0,
                        ideal.deadTime(),
                        0,
                        null,
                        false));
    }

    private static final MonolithicBlock SLAB = new MonolithicBlock(
            "slab",
            new Vector3(12, 12, 12),
            new Vector3(4, 4, 12),
            "scintillator",
            new Vector3(0.5, 0.6, 0.9),
            Readout.IDEAL);

    private static CoincidenceSheaves sheaves(DetectorSystem system, int rays) {
        return new CoincidenceSheaves(ElementResponse.tabulate(system, ForkJoinPool.commonPool(), Progress.SILENT))
                .locating(new Positions(rays, true, true));
    }

    private static SheafBundle make(CoincidenceSheaves sheaves, EventBlock events) {
        SheafBundle out = new SheafBundle(sheaves.raysPerSheaf(), events.size());
        EventTally tally = new EventTally();
        sheaves.make(events, out, tally);
        assertThat(tally.used()).isEqualTo(events.size());
        return out;
    }

    private static EventBlock event(Set<Attribute> more, int a, int b) {
        Set<Attribute> columns = EnumSet.of(Attribute.ELEMENT_A, Attribute.ELEMENT_B);
        columns.addAll(more);
        EventBlock block = new EventBlock(columns, 1);
        block.ints(Attribute.ELEMENT_A)[0] = a;
        block.ints(Attribute.ELEMENT_B)[0] = b;
        block.resize(1);
        return block;
    }

    /** For every mean: the quantiles at 10,000 even shares average to it. For a truncated exponential they are those of its closed form. */
    @Test
    void tiltedLawHasItsMeanAndIsAnExponential() {
        for (double mean : new double[] {1e-3, 0.05, 0.2, 0.4, 0.48, 0.49, 0.5, 0.51, 0.6, 0.9, 0.999}) {
            double tilt = TiltedLaw.tilt(mean);
            double sum = 0;
            int n = 10_000;
            for (int i = 0; i < n; i++) {
                double at = TiltedLaw.quantile(tilt, (i + 0.5) / n);
                assertThat(at).isBetween(0.0, 1.0);
                sum += at / n;
            }
            // the Newton step leaves a few 10⁻⁴; near the ends the share of the width is what counts
            assertThat(sum).isCloseTo(mean, within(2e-3 * Math.min(0.5, Math.min(mean, 1 - mean) * 2)));
        }
        double kappa = 13 / LAMBDA_MM;
        double mean = 1 / kappa - 1 / Math.expm1(kappa);
        for (double share : new double[] {0.01, 0.3, 0.7, 0.99}) {
            double expected = -Math.log(1 - share * (1 - Math.exp(-kappa))) / kappa;
            assertThat(TiltedLaw.quantile(TiltedLaw.tilt(mean), share)).isCloseTo(expected, within(1e-3));
        }
    }

    /**
     * The depth law knows only the mean of the response; its width must be that of the response, which ray tracing found (`ResponseIntegralTest`
     * proves that against rays thrown at random). Crystals in the middle, at an edge and in a corner of a block of heron-12.
     */
    @Test
    void depthLawIsAsWideAsTheResponse() {
        DetectorSystem system = Systems.heron12(LAMBDA_MM, 13);
        ResponseIntegral integral = new ResponseIntegral(system);
        Response response = new Response();
        Random random = new Random(5);
        double[] ratios = new double[60];
        for (int i = 0; i < ratios.length; i++) {
            int crystal = new int[] {60, 5, 0}[i % 3];
            Vector3 s = new Vector3(random.nextDouble() - 0.5, random.nextDouble() - 0.5, 1).unit();
            integral.evaluate(15 * 121 + crystal, s.x(), s.y(), s.z(), response);
            double tilt = TiltedLaw.tilt((response.w() + 6.5) / 13);
            double sum = 0;
            double squares = 0;
            int n = 1000;
            for (int k = 0; k < n; k++) {
                double w = 13 * TiltedLaw.quantile(tilt, (k + 0.5) / n);
                sum += w / n;
                squares += w * w / n;
            }
            ratios[i] = Math.sqrt(squares - sum * sum) * s.z() / Math.sqrt(response.varianceMm2());
        }
        // measured: 0.96 to 1.04
        assertThat(Arrays.stream(ratios).average().orElseThrow()).isCloseTo(1, within(0.03));
        assertThat(Arrays.stream(ratios).min().orElseThrow()).isGreaterThan(0.9);
        assertThat(Arrays.stream(ratios).max().orElseThrow()).isLessThan(1.1);
    }

    @Test
    void everyRayTakesAStratumOfItsOwnOnEveryAxis() {
        for (int rays : new int[] {1, 2, 4, 9, 16}) {
            Strata strata = new Strata(rays);
            int[] dealt = new int[6 * rays];
            for (int pair = 0; pair < 50; pair++) {
                strata.deal(pair, 1000 + pair, dealt);
                for (int axis = 0; axis < 6; axis++) {
                    long seen = 0;
                    for (int k = 0; k < rays; k++) {
                        seen |= 1L << dealt[6 * k + axis];
                    }
                    assertThat(seen).isEqualTo((1L << rays) - 1);
                }
            }
        }
    }

    @Test
    void oneRayIsTheLineOfThePair() {
        CoincidenceSheaves heron = new CoincidenceSheaves(ElementResponse.ofFaces(Systems.heron12(LAMBDA_MM, 13)));
        SheafBundle before = new SheafBundle(1, heron.capacity(0));
        heron.fill(0, before);
        SheafBundle after = new SheafBundle(1, heron.capacity(0));
        heron.locating(new Positions(1, false, false)).fill(0, after);
        assertThat(after.rays()).isEqualTo(before.rays());
        assertThat(after.weights()).isEqualTo(before.weights());
    }

    /** Every pair of a part as events, in both orders: the same rays as in the catalogue, to the last bit; weights share out 1 and G/2π. */
    @Test
    void eventsAndCatalogueHaveTheSameRays() {
        int rays = 9;
        DetectorSystem system = pair(tile(null));
        CoincidenceSheaves sheaves = sheaves(system, rays);
        SheafBundle catalogue = new SheafBundle(rays, sheaves.capacity(0));
        sheaves.fill(0, catalogue);
        SheafBundle single = new SheafBundle(1, sheaves.capacity(0));
        sheaves.locating(new Positions(1, true, true)).fill(0, single);
        assertThat(catalogue.size()).isEqualTo(81);
        int at = 0;
        for (int a = 9; a < 18; a++) {
            for (int b = 0; b < 9; b++, at++) {
                SheafBundle forth = make(sheaves, event(Set.of(), a, b));
                SheafBundle back = make(sheaves, event(Set.of(), b, a));
                double weight = 0;
                double share = 0;
                for (int k = 0; k < rays; k++) {
                    for (int c = 0; c < 6; c++) {
                        float expected = catalogue.rays()[6 * (at * rays + k) + c];
                        assertThat(forth.rays()[6 * k + c]).isEqualTo(expected);
                        assertThat(back.rays()[6 * k + (c + 3) % 6]).isEqualTo(expected);
                    }
                    assertThat(system.elementAt(point(forth, k, 0))).isEqualTo(a);
                    assertThat(system.elementAt(point(forth, k, 3))).isEqualTo(b);
                    weight += catalogue.weights()[at * rays + k];
                    share += forth.weights()[k];
                }
                assertThat(share).isCloseTo(1, within(1e-6));
                assertThat(weight).isCloseTo(single.weights()[at], within(1e-5 * single.weights()[at]));
            }
        }
    }

    private static Vector3 point(SheafBundle bundle, int ray, int at) {
        float[] rays = bundle.rays();
        return new Vector3(rays[6 * ray + at], rays[6 * ray + at + 1], rays[6 * ray + at + 2]);
    }

    /** One ray ends at the measured depth; several have its mean and its blur, and none leaves the block. */
    @Test
    void raysEndAtTheMeasuredDepth() {
        DetectorSystem system = pair(tile(2.3548)); // a standard deviation of 1 mm
        EventBlock event = event(EnumSet.of(Attribute.DEPTH_A, Attribute.DEPTH_B), 13, 4);
        event.floats(Attribute.DEPTH_A)[0] = 7.5f;
        event.floats(Attribute.DEPTH_B)[0] = 0.2f;
        SheafBundle one = make(sheaves(system, 1), event);
        assertThat(one.rays()[0]).isCloseTo(-37.5f, within(1e-4f));
        assertThat(one.rays()[3]).isCloseTo(30.2f, within(1e-4f));
        SheafBundle many = make(sheaves(system, 16), event);
        double sum = 0;
        double squares = 0;
        for (int k = 0; k < 16; k++) {
            double x = many.rays()[6 * k];
            sum += x / 16;
            squares += (x + 37.5) * (x + 37.5) / 16;
            assertThat(many.rays()[6 * k + 3]).isBetween(30f, 34f);
        }
        assertThat(sum).isCloseTo(-37.5, within(1e-4));
        assertThat(squares).isCloseTo(1, within(1e-3));
        EventBlock without = event(Set.of(), 13, 4);
        assertThat(make(sheaves(system, 1), without).rays()[0]).isBetween(-36f, -32f);
    }

    /** The standard deviations of the block, or of the event where it brings some. */
    @Test
    void raysSpreadOverTheBlurOfAMeasuredPoint() {
        Set<Attribute> columns = EnumSet.range(Attribute.POSITION_A_X, Attribute.POSITION_B_Z);
        EventBlock event = event(columns, 13, 4);
        place(event);
        assertThat(spread(make(sheaves(pair(SLAB), 16), event), 0)).isCloseTo(0.9, within(1e-3));
        assertThat(spread(make(sheaves(pair(SLAB), 16), event), 2)).isCloseTo(0.6, within(1e-3));
        columns.addAll(EnumSet.range(Attribute.POSITION_A_U_SD, Attribute.POSITION_B_W_SD));
        EventBlock better = event(columns, 13, 4);
        place(better);
        better.floats(Attribute.POSITION_A_W_SD)[0] = 0.25f;
        assertThat(spread(make(sheaves(pair(SLAB), 16), better), 0)).isCloseTo(0.25, within(1e-3));
        assertThat(spread(make(sheaves(pair(SLAB), 16), better), 2)).isCloseTo(0, within(1e-3));
    }

    private static void place(EventBlock event) {
        event.floats(Attribute.POSITION_A_X)[0] = -35;
        event.floats(Attribute.POSITION_A_Y)[0] = 1;
        event.floats(Attribute.POSITION_B_X)[0] = 33;
    }

    private static double spread(SheafBundle sheaf, int axis) {
        double sum = 0;
        double squares = 0;
        for (int k = 0; k < 16; k++) {
            double x = sheaf.rays()[6 * k + axis];
            sum += x / 16;
            squares += x * x / 16;
        }
        return Math.sqrt(Math.max(0, squares - sum * sum));
    }

    /**
     * Lines drawn between two unit squares at unit distance, each at its own direction and length, sum to the closed form with no cutting at
     * all (reference-values G3; Howell). 4,096 points of a shifted Sobol sequence; 0.1 % is some ten times their usual error.
     */
    @Test
    void drawnLinesSumToTheClosedForm() {
        MonolithicBlock square = new MonolithicBlock(
                "square", new Vector3(1, 1, 0.01), new Vector3(1, 1, 1), "scintillator", Vector3.ZERO, Readout.IDEAL);
        DetectorSystem system = Systems.system(
                new FieldOfView(0.4, 1),
                1,
                0,
                List.of(square),
                List.of(
                        new Placement.Single("square", new Vector3(0.5, 0, 0), new Vector3(-1, 0, 0), Vector3.Z),
                        new Placement.Single("square", new Vector3(-0.5, 0, 0), Vector3.X, Vector3.Z)));
        CoincidenceSheaves sheaves = new CoincidenceSheaves(ElementResponse.ofFaces(system));
        SheafCatalogue sample = sheaves.sampler(3, 10).draw(0, 0, 4096);
        assertThat(2 * weight(sample, 0)).isCloseTo(0.1998248957, within(0.001 * 0.2));
        SheafCatalogue longer = sheaves.sampler(3, 10).draw(0, 65536, 65536);
        assertThat(longer.parts()).isEqualTo(4);
        double sum = 0;
        for (int part = 0; part < longer.parts(); part++) {
            sum += weight(longer, part);
        }
        assertThat(2 * sum).isCloseTo(0.1998248957, within(0.0002 * 0.2));
        // the second part goes on in the sequence where the first ends
        SheafBundle second = new SheafBundle(1, longer.capacity(1));
        longer.fill(1, second);
        SheafBundle alone = new SheafBundle(1, longer.capacity(1));
        sheaves.sampler(3, 10).draw(0, 65536 + 16384, 16384).fill(0, alone);
        assertThat(second.rays()).isEqualTo(alone.rays());
    }

    /** The sample of a catalogue whose pairs all count alike: weights add up to those of the catalogue. */
    @Test
    void sampledPairsWeighAsMuchAsAll() {
        DetectorSystem system = Systems.heron12(LAMBDA_MM, 13);
        double[] efficiencies = new double[system.elements()];
        Arrays.fill(efficiencies, 0.9);
        efficiencies[60] = 0;
        CoincidenceSheaves sheaves =
                new CoincidenceSheaves(ElementResponse.ofFaces(system)).withEfficiencies(efficiencies);
        double all = 0;
        double drawn = 0;
        SheafCatalogue sample = sheaves.sampler(1, 0).draw(0, 0, 1024);
        for (int part = 0; part < sheaves.parts(); part++) {
            all += weight(sheaves, part);
            drawn += weight(sample, part);
        }
        // 387,072 pairs of 3.9 million: 0.1 % even if they were thrown at random
        assertThat(drawn / all).isCloseTo(1, within(0.002));
    }

    private static double weight(SheafCatalogue catalogue, int part) {
        SheafBundle bundle = new SheafBundle(catalogue.raysPerSheaf(), catalogue.capacity(part));
        catalogue.fill(part, bundle);
        double sum = 0;
        for (int i = 0; i < bundle.size() * bundle.raysPerSheaf(); i++) {
            sum += bundle.weights()[i];
        }
        return sum;
    }

    /** Two layers answer together as one crystal of their depth does, and the pairs of the layers share out its étendue. */
    @Test
    void layersShareOutTheResponseOfTheWholeCrystal() {
        CoincidenceSheaves whole = sheaves(pair(tile(null)), 1);
        CrystalBlock layered =
                new CrystalBlock("tile", 3, 3, 2, new Vector3(4, 4, 6), new Vector3(3.8, 3.8, 6), "scintillator");
        CoincidenceSheaves layers = sheaves(pair(layered), 1);
        assertThat(layers.system().elements()).isEqualTo(36);
        assertThat(weight(layers, 0) / weight(whole, 0)).isCloseTo(1, within(2e-3));
        EventBlock deep = event(Set.of(), 18 + 9 + 4, 9 + 4);
        EventBlock front = event(Set.of(), 18 + 4, 4);
        assertThat(make(layers, front).rays()[3]).isBetween(30f, 33f);
        assertThat(make(layers, deep).rays()[3]).isBetween(36f, 39f);
        assertThat(make(layers, deep).rays()[0]).isBetween(-39f, -36f);
    }

    @Test
    void refusesAnImpossibleNumberOfRays() {
        assertThatThrownBy(() -> new Positions(0, true, true))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("rays_per_event");
    }
}
