package org.raysheaf.app;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
import java.util.Locale;
import java.util.Objects;
import java.util.Set;
import java.util.SplittableRandom;
import java.util.concurrent.ForkJoinPool;
import org.apache.commons.math3.stat.correlation.PearsonsCorrelation;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.EnumSource;
import org.raysheaf.engine.correct.Attenuation;
import org.raysheaf.engine.correct.PhantomMaps;
import org.raysheaf.engine.correct.PileUp;
import org.raysheaf.engine.correct.Randoms;
import org.raysheaf.engine.correct.Scatter;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.ElementResponse;
import org.raysheaf.geometry.response.LineOfResponse;
import org.raysheaf.geometry.response.PairFactor;
import org.raysheaf.geometry.response.WindowShares;
import org.raysheaf.io.efficiency.EfficiencyFile;
import org.raysheaf.io.list.ListFile;
import org.raysheaf.io.list.ListWriter;
import org.raysheaf.io.volume.VolumeFile;

/**
 * A water cylinder of F-18, 25 mm across and 70 mm long, in heron-12 with full physics: counts must become the true activity, with no factor
 * adjusted. Reconstruction never reads the truth of a list; only these tests do.
 */
@Tag("proof")
class CorrectionsTest {
    private static final double RADIUS_MM = 12.5;

    @TempDir
    private static Path folder;

    private static final ForkJoinPool POOL = new ForkJoinPool();

    private record Outcome(int exit, String err) {}

    @BeforeAll
    static void describe() throws IOException {
        Path samples = Path.of("..", "..", "sample-data", "systems", "heron-12.yaml");
        Files.copy(samples, folder.resolve("heron-12.yaml"));
    }

    @AfterAll
    static void close() {
        POOL.shutdown();
    }

    private static Outcome work(String... arguments) {
        StringWriter err = new StringWriter();
        List<String> all = new ArrayList<>(List.of(arguments));
        all.addAll(List.of(
                "--quiet",
                "--json",
                "--replace",
                "--cache",
                folder.resolve("cache").toString()));
        int exit = Raysheaf.commandLine().setErr(new PrintWriter(err)).execute(all.toArray(String[]::new));
        return new Outcome(exit, err.toString());
    }

    private static void run(String... arguments) {
        Outcome outcome = work(arguments);
        assertThat(outcome.err()).isEmpty();
        assertThat(outcome.exit()).isZero();
    }

    /** Simulates a cylinder of some concentration and returns the list. */
    private static Path record(String name, double kBqPerMl, double durationS, long events, String pairing, long seed)
            throws IOException {
        Files.writeString(folder.resolve(name + "-phantom.yaml"), """
                raysheaf: phantom/1
                name: cylinder
                parts:
                  - {name: body, shape: {kind: cylinder, radius_mm: 12.5, length_mm: 70}, concentration_kBq_per_mL: %s}
                """.formatted(kBqPerMl));
        Path acquisition = Files.writeString(
                folder.resolve(name + ".yaml"), """
                raysheaf: acquisition/1
                system: heron-12.yaml
                phantom: %s-phantom.yaml
                nuclide: F-18
                start: 2026-12-01T09:00:00Z
                duration_s: %s
                max_events: %d
                seed: %d
                truth: true
                pairing: {%s}
                """.formatted(name, durationS, events, seed, pairing));
        Path list = folder.resolve(name + ".h5");
        run("simulate", acquisition.toString(), "--out", list.toString());
        return list;
    }

    private static Image reconstruct(String name) throws IOException {
        Path plan = Files.writeString(folder.resolve(name + "-plan.yaml"), """
                raysheaf: reconstruction/1
                list: %s.h5
                grid: {voxel_mm: 0.925, radius_mm: 20, length_mm: 62}
                estimation: {passes: 8, subsets: 5}
                corrections: {attenuation: {phantom: %s-phantom.yaml}, randoms: delayed}
                """.formatted(name, name));
        Path out = folder.resolve(name + "-out");
        run("reconstruct", plan.toString(), "--out", out.toString());
        return VolumeFile.read(out.resolve("activity.nii.gz")).image();
    }

    private static double mean(Image image, double fromMm, double toMm, double lowMm, double highMm) {
        return Region.mean(image, Region.shell(fromMm, toMm, lowMm, highMm));
    }

    private static double cupping(Image image) {
        double centre = mean(image, 0, 0.4 * RADIUS_MM, -22, 22);
        double edge = mean(image, 0.6 * RADIUS_MM, 0.8 * RADIUS_MM, -22, 22);
        return centre / edge - 1;
    }

    @Test
    void lowRatesComeBackWithinTwoPerCent() throws IOException {
        record("low", 6, 2000, 1_500_000, "window_ns: 3, lowest_keV: 350, highest_keV: 650, delay_ns: 200", 5);
        Image image = reconstruct("low");
        double mean = mean(image, 0, 0.8 * RADIUS_MM, -22, 22);
        System.out.printf("low rate: mean %.4f, cupping %.4f%n", mean / 6, cupping(image));
        assertThat(mean / 6).isCloseTo(1, within(0.02));
        assertThat(cupping(image)).isCloseTo(0, within(0.02));
        for (double z = -22; z < 22; z += 5.5) {
            assertThat(mean(image, 0, 0.8 * RADIUS_MM, z, z + 5.5) / mean)
                    .as("z = %s", z)
                    .isCloseTo(1, within(0.03));
        }
    }

    @Test
    void highRatesComeBackWithinFourPerCent() throws IOException {
        Path list = record(
                "high", 700, 10, 2_000_000, "window_ns: 8.5, lowest_keV: 350, highest_keV: 650, delay_ns: 200", 6);
        Image image = reconstruct("high");
        double[] truth = truth(list);
        double live = ListFile.open(list).header().liveTimeS()
                / ListFile.open(list).header().durationS();
        double mean = mean(image, 0, 0.8 * RADIUS_MM, -22, 22);
        System.out.printf(
                "high rate: randoms %.3f of prompts, live %.3f, mean %.4f, cupping %.4f%n",
                truth[0] / truth[2], live, mean / 700, cupping(image));
        assertThat(truth[0] / truth[2]).isGreaterThan(0.25);
        assertThat(live).isLessThan(0.9);
        assertThat(mean / 700).isCloseTo(1, within(0.04));
    }

    /** Randoms, scattered pairs, prompts; by the truth of the list. */
    private static double[] truth(Path path) throws IOException {
        ListFile list = ListFile.open(path);
        Set<Attribute> columns = EnumSet.of(Attribute.DELAYED, Attribute.SAME_DECAY, Attribute.OBJECT_SCATTERS);
        EventBlock block = new EventBlock(columns, 1 << 16);
        double[] truth = new double[3];
        try (EventSource.Cursor cursor = list.open()) {
            while (cursor.next(block)) {
                for (int i = 0; i < block.size(); i++) {
                    if (block.bytes(Attribute.DELAYED)[i] == 0) {
                        boolean same = block.bytes(Attribute.SAME_DECAY)[i] == 1;
                        truth[0] += same ? 0 : 1;
                        truth[1] += same && block.bytes(Attribute.OBJECT_SCATTERS)[i] > 0 ? 1 : 0;
                        truth[2]++;
                    }
                }
            }
        }
        return truth;
    }

    @ParameterizedTest
    @EnumSource(Pairing.Crowds.class)
    void randomsAreFoundUnderEveryRuleForCrowds(Pairing.Crowds crowds) throws IOException {
        String name = crowds.name().toLowerCase(Locale.ROOT);
        String pairing = "window_ns: 5, lowest_keV: 350, highest_keV: 650, delay_ns: 200, crowds: " + name;
        Path list = record(name, 300, 10, 500_000, pairing, 8);
        ListFile opened = ListFile.open(list);
        Systems systems = systems(list);
        double found = Randoms.fromDelayed(opened, systems.system()).total();
        double bySingles = Randoms.fromSingles(opened, systems.system()).total();
        double true0 = truth(list)[0];
        System.out.printf(
                "randoms, %s: delayed %.4f, singles %.4f of the truth (%.0f)%n",
                name, found / true0, bySingles / true0, true0);
        assertThat(found / true0).isCloseTo(1, within(0.02 + 3 / Math.sqrt(true0)));
        assertThat(bySingles / true0).isCloseTo(1, within(0.05));
    }

    private static Systems systems(Path list) throws IOException {
        Common common = new Common();
        return Systems.of(
                ListFile.open(list).header().systemDescription(),
                "list",
                common,
                POOL,
                Progress.SILENT,
                folder.resolve("cache"));
    }

    @Test
    void scatterHasItsShapeAndSize() throws IOException {
        Path path = record(
                "scatter", 6, 2000, 800_000, "window_ns: 3, lowest_keV: 350, highest_keV: 650, delay_ns: 200", 9);
        ListFile list = ListFile.open(path);
        Systems systems = systems(path);
        Phantom phantom = Phantoms.read(folder.resolve("scatter-phantom.yaml"));
        ElementResponse first = systems.response();
        WindowShares window = systems.window(first, 350, 650);
        ElementResponse response = first.within(window);
        Attenuation attenuation = new Attenuation(PhantomMaps.attenuation(phantom, 1));
        Scatter scatter =
                Scatter.of(response, window, PhantomMaps.activity(phantom, 1), attenuation.muPerMm(), 500, POOL);
        CoincidenceSheaves sheaves = new CoincidenceSheaves(response).with(attenuation);
        ListHeader header = list.header();
        double perUnit = header.pairsPerBqPerMlAndMm3()
                * Randoms.survival(header.pairing(), header.durationS())
                * PileUp.pairShare(
                        systems.system(), header, Objects.requireNonNull(header.pairing()), window.pileUpShare());
        int blocks = systems.system().blocks().size();
        double[] expected = new double[blocks * blocks];
        for (int part = 0; part < sheaves.parts(); part++) {
            PairFactor factor = sheaves.factor();
            PairFactor through = attenuation.make();
            sheaves.visit(
                    part,
                    (a, b, line) -> expected[key(systems, a, b)] += scatter.perEtendue(a, b)
                            * line.etendueMm2Sr()
                            * factor.of(a, b, line)
                            / through.of(a, b, line)
                            * perUnit);
        }
        double[] found = new double[blocks * blocks];
        double[] single = new double[1];
        Set<Attribute> columns = EnumSet.copyOf(list.attributes());
        columns.addAll(list.truth());
        EventBlock block = new EventBlock(columns, 1 << 14);
        try (EventSource.Cursor cursor = list.open()) {
            while (cursor.next(block)) {
                for (int i = 0; i < block.size(); i++) {
                    boolean scattered = block.bytes(Attribute.DELAYED)[i] == 0
                            && block.bytes(Attribute.SAME_DECAY)[i] == 1
                            && block.bytes(Attribute.OBJECT_SCATTERS)[i] > 0;
                    if (scattered) {
                        found[key(systems, block.ints(Attribute.ELEMENT_A)[i], block.ints(Attribute.ELEMENT_B)[i])]++;
                        single[0] += block.bytes(Attribute.OBJECT_SCATTERS)[i] == 1 ? 1 : 0;
                    }
                }
            }
        }
        List<double[]> both = new ArrayList<>();
        double all = 0;
        double model = 0;
        for (int i = 0; i < found.length; i++) {
            if (expected[i] > 0) {
                both.add(new double[] {expected[i], found[i]});
                all += found[i];
                model += expected[i];
            }
        }
        double correlation = new PearsonsCorrelation()
                .correlation(
                        both.stream().mapToDouble(row -> row[0]).toArray(),
                        both.stream().mapToDouble(row -> row[1]).toArray());
        System.out.printf(
                "scatter: single %.4f of the truth's single, all scattered %.4f of it, correlation over pairs of blocks %.4f%n",
                model / single[0], all / single[0], correlation);
        assertThat(model / single[0]).isCloseTo(1, within(0.10));
        assertThat(correlation).isGreaterThan(0.98);
    }

    private static int key(Systems systems, int a, int b) {
        int one = systems.system().blockIndexOf(a);
        int other = systems.system().blockIndexOf(b);
        return Math.max(one, other) * systems.system().blocks().size() + Math.min(one, other);
    }

    @Test
    void unequalAndDeadCrystalsAreFound() throws IOException {
        Path equal = record(
                "equal", 6, 2000, 2_000_000, "window_ns: 3, lowest_keV: 350, highest_keV: 650, delay_ns: 200", 10);
        ListFile list = ListFile.open(equal);
        int elements = systems(equal).system().elements();
        SplittableRandom random = new SplittableRandom(15);
        double[] truth = new double[elements];
        double most = 0;
        for (int e = 0; e < elements; e++) {
            truth[e] = Math.max(0.3, 1 + 0.15 * gauss(random));
            most = Math.max(most, truth[e]);
        }
        int[] dead = {100, 2222, 4000};
        for (int e : dead) {
            truth[e] = 0;
        }
        Path thinned = folder.resolve("thinned.h5");
        EventBlock block = new EventBlock(list.attributes(), 1 << 14);
        EventBlock kept = new EventBlock(list.attributes(), 1 << 14);
        try (ListWriter writer = ListWriter.create(list.attributes(), thinned, true);
                EventSource.Cursor cursor = list.open()) {
            while (cursor.next(block)) {
                kept.resize(0);
                for (int i = 0; i < block.size(); i++) {
                    double chance =
                            truth[block.ints(Attribute.ELEMENT_A)[i]] * truth[block.ints(Attribute.ELEMENT_B)[i]];
                    if (random.nextDouble() * most * most < chance) {
                        kept.append(block, i, 1);
                    }
                }
                writer.accept(kept);
            }
            writer.commit(list.header());
        }
        Path out = folder.resolve("efficiency.h5");
        run(
                "normalize",
                thinned.toString(),
                "--source",
                folder.resolve("equal-phantom.yaml").toString(),
                "--out",
                out.toString());
        EfficiencyFile file = EfficiencyFile.read(out);
        assertThat(file.silent()).containsExactly(100, 2222, 4000);
        double[] found = file.efficiencies();
        double[] errors = file.relativeErrors();
        double scale = 0;
        for (int e = 0; e < elements; e++) {
            scale += truth[e] > 0 ? found[e] / truth[e] / (elements - dead.length) : 0;
        }
        double chi = 0;
        for (int e = 0; e < elements; e++) {
            if (truth[e] > 0) {
                double pull = (found[e] / (scale * truth[e]) - 1) / errors[e];
                chi += pull * pull / (elements - dead.length);
            }
        }
        assertThat(chi).isBetween(0.8, 1.2);
        // Only the product of efficiencies and block geometry has an absolute size: over true pairs, to which the fit
        // gives it, it must be that
        // of the thinning, whatever the one leaves to the other.
        assertThat(productOverTruth(equal, out, truth) * most * most).isCloseTo(1, within(0.04));
    }

    /** Σ of the products found over Σ of the products drawn, over the unscattered pairs of the list before it was thinned. */
    private static double productOverTruth(Path list, Path efficiencies, double[] truth) throws IOException {
        Normalization found = Normalization.read(efficiencies, systems(list));
        double[] efficiency = found.efficiencies();
        PairFactor geometry = Objects.requireNonNull(found.geometry()).make();
        LineOfResponse unused = new LineOfResponse();
        double sum = 0;
        double drawn = 0;
        ListFile file = ListFile.open(list);
        Set<Attribute> columns = EnumSet.copyOf(file.attributes());
        columns.addAll(file.truth());
        EventBlock block = new EventBlock(columns, 1 << 14);
        try (EventSource.Cursor cursor = file.open()) {
            while (cursor.next(block)) {
                for (int i = 0; i < block.size(); i++) {
                    int a = block.ints(Attribute.ELEMENT_A)[i];
                    int b = block.ints(Attribute.ELEMENT_B)[i];
                    boolean straight = block.bytes(Attribute.DELAYED)[i] == 0
                            && block.bytes(Attribute.SAME_DECAY)[i] == 1
                            && block.bytes(Attribute.OBJECT_SCATTERS)[i] == 0;
                    if (straight) {
                        sum += efficiency[a] * efficiency[b] * geometry.of(a, b, unused);
                        drawn += truth[a] * truth[b];
                    }
                }
            }
        }
        return sum / drawn;
    }

    /**
     * The image-quality phantom of NEMA NU 4: the uniform part within 3 %, and in the cold chambers no more than is there when the list's
     * scattered and random events are taken out by its truth.
     */
    @Test
    void coldChambersAreAsColdAsWithoutScatterAndRandoms() throws IOException {
        Files.copy(
                Path.of("..", "..", "sample-data", "phantoms", "image-quality.yaml"),
                folder.resolve("iq-phantom.yaml"));
        Path acquisition = Files.writeString(folder.resolve("iq.yaml"), """
                raysheaf: acquisition/1
                system: heron-12.yaml
                phantom: iq-phantom.yaml
                nuclide: F-18
                start: 2026-12-01T09:00:00Z
                duration_s: 1200
                max_events: 1000000
                seed: 31
                truth: true
                pairing: {window_ns: 3, lowest_keV: 350, highest_keV: 650, delay_ns: 200}
                """);
        Path list = folder.resolve("iq.h5");
        run("simulate", acquisition.toString(), "--out", list.toString());
        keepTrues(ListFile.open(list), folder.resolve("trues.h5"));
        Image image = quality("iq", "randoms: delayed");
        Image trues = quality("trues", "randoms: none, scatter: false");
        double uniform = spot(image, 0, 2.5, 11.25, 5)[0];
        assertThat(uniform / 188).isCloseTo(1, within(0.03));
        for (double x : new double[] {7, -7}) {
            double[] all = spot(image, x, 17.5, 2, 3.75);
            double[] only = spot(trues, x, 17.5, 2, 3.75);
            double spillOver = all[0] / uniform;
            double without = only[0] / spot(trues, 0, 2.5, 11.25, 5)[0];
            double sd = Math.hypot(all[1], only[1]) / uniform;
            System.out.printf(
                    "image quality: uniform %.4f, spill-over %.4f, without scatter and randoms %.4f (± %.4f)%n",
                    uniform / 188, spillOver, without, sd);
            assertThat(spillOver - without).isBetween(-2 * sd, 2 * sd);
        }
    }

    private static Image quality(String list, String corrections) throws IOException {
        Path plan = Files.writeString(folder.resolve(list + "-plan.yaml"), """
                raysheaf: reconstruction/1
                list: %s.h5
                grid: {voxel_mm: 0.8, radius_mm: 20, length_mm: 60}
                estimation: {passes: 8, subsets: 5, post_filter_fwhm_mm: 1.5}
                corrections: {attenuation: {phantom: iq-phantom.yaml}, %s}
                """.formatted(list, corrections));
        Path out = folder.resolve(list + "-out");
        run("reconstruct", plan.toString(), "--out", out.toString());
        return VolumeFile.read(out.resolve("activity.nii.gz")).image();
    }

    private static void keepTrues(ListFile list, Path trues) throws IOException {
        Set<Attribute> columns = EnumSet.copyOf(list.attributes());
        columns.addAll(list.truth());
        EventBlock block = new EventBlock(columns, 1 << 14);
        EventBlock kept = new EventBlock(list.attributes(), 1 << 14);
        try (ListWriter writer = ListWriter.create(list.attributes(), trues, true);
                EventSource.Cursor cursor = list.open()) {
            while (cursor.next(block)) {
                kept.resize(0);
                for (int i = 0; i < block.size(); i++) {
                    boolean trueEvent = block.bytes(Attribute.DELAYED)[i] == 0
                            && block.bytes(Attribute.SAME_DECAY)[i] == 1
                            && block.bytes(Attribute.OBJECT_SCATTERS)[i] == 0
                            && block.bytes(Attribute.NOT_ANNIHILATION)[i] == 0;
                    if (trueEvent) {
                        kept.append(block, i, 1);
                    }
                }
                writer.accept(kept);
            }
            writer.commit(list.header());
        }
    }

    /** Mean over a cylinder about a line along z, and its error, from the scatter of voxels that filter and detector tie together by eights. */
    private static double[] spot(Image image, double x0, double z0, double radiusMm, double halfMm) {
        Grid grid = image.grid();
        double sum = 0;
        double squares = 0;
        int n = 0;
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    Vector3 p = grid.centre(x, y, z);
                    if (Math.hypot(p.x() - x0, p.y()) < radiusMm && Math.abs(p.z() - z0) < halfMm) {
                        double value = image.at(x, y, z);
                        sum += value;
                        squares += value * value;
                        n++;
                    }
                }
            }
        }
        double mean = sum / n;
        return new double[] {mean, Math.sqrt((squares / n - mean * mean) / (n / 8.0))};
    }

    private static double gauss(SplittableRandom random) {
        return Math.sqrt(-2 * Math.log(1 - random.nextDouble())) * Math.cos(2 * Math.PI * random.nextDouble());
    }
}
