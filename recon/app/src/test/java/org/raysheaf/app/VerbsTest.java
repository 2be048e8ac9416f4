package org.raysheaf.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.app.Calls.Outcome;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.io.list.ListFile;
import org.raysheaf.io.volume.VolumeFile;

/** Verbs as a user calls them: exit codes, messages, files. */
class VerbsTest {
    private static final Path SAMPLES = Path.of("..", "..", "sample-data");

    @TempDir
    private Path folder;

    private Path acquisition = Path.of("");

    private Outcome work(String... arguments) {
        return Calls.work(folder.resolve("cache"), (Object[]) arguments);
    }

    /** Two facing panels of a few large crystals: no ring, and nothing takes long. */
    @BeforeEach
    void describeASmallSystem() throws IOException {
        Files.writeString(folder.resolve("pair.yaml"), """
                raysheaf: system/1
                name: pair
                field_of_view: {radius_mm: 10, length_mm: 24}
                materials: [{name: lyso, attenuation_length_mm: 12}]
                blocks:
                  - {kind: crystal_block, name: tile, columns: 8, rows: 8, pitch_mm: [3, 3, 10], crystal_mm: [2.8, 2.8, 10], material: lyso}
                placements:
                  - {kind: single, block: tile, centre_mm: [20, 0, 0], facing: [-1, 0, 0]}
                  - {kind: single, block: tile, centre_mm: [-20, 0, 0], facing: [1, 0, 0]}
                  - {kind: single, block: tile, centre_mm: [0, 20, 0], facing: [0, -1, 0]}
                  - {kind: single, block: tile, centre_mm: [0, -20, 0], facing: [0, 1, 0]}
                """);
        Files.writeString(folder.resolve("ball.yaml"), """
                raysheaf: phantom/1
                name: ball
                parts:
                  - {name: ball, shape: {kind: sphere, radius_mm: 4}, centre_mm: [2, 1, -3], material: vacuum, concentration_kBq_per_mL: 100}
                """);
        acquisition = Files.writeString(folder.resolve("run.yaml"), """
                raysheaf: acquisition/1
                system: pair.yaml
                phantom: ball.yaml
                nuclide: F-18
                start: 2026-12-01T09:00:00Z
                duration_s: 600
                max_events: 30000
                physics: {positron_range: false, acollinearity_fwhm_deg: 0, surroundings: vacuum}
                """);
    }

    private Path list() {
        Path list = folder.resolve("list.h5");
        if (!Files.exists(list)) {
            assertThat(work("simulate", acquisition.toString(), "--out", list.toString())
                            .exit())
                    .isZero();
        }
        return list;
    }

    @Test
    void singlesBecomePairsAsInTheSimulation() throws IOException {
        Path pairs = folder.resolve("direct.h5");
        Path singles = folder.resolve("singles.h5");
        Path paired = folder.resolve("paired.h5");
        Path direct = Files.writeString(
                folder.resolve("direct.yaml"),
                Files.readString(acquisition)
                        .replace("max_events: 30000", "truth: true\npairing: {window_ns: 3, delay_ns: 50}")
                        .replace("duration_s: 600", "duration_s: 3"));
        Path all = Files.writeString(folder.resolve("all.yaml"), Files.readString(direct) + "output: singles\n");
        assertThat(work("simulate", direct.toString(), "--out", pairs.toString())
                        .exit())
                .isZero();
        assertThat(work("simulate", all.toString(), "--out", singles.toString()).exit())
                .isZero();

        Outcome refused = work(
                "reconstruct", singles.toString(), "--out", folder.resolve("no").toString());
        Outcome outcome =
                work("pair", singles.toString(), "--out", paired.toString(), "--window-ns", "3", "--delay-ns", "50");

        assertThat(refused.exit()).isEqualTo(1);
        assertThat(refused.err()).contains("expected a list of pairs, found a list of singles", "raysheaf pair ");
        assertThat(outcome.err()).isEmpty();
        assertThat(outcome.out()).contains("alone in their window", "delayed", Common.CAUTION);
        assertThat(ListFile.open(paired).digest())
                .isEqualTo(ListFile.open(pairs).digest());
        assertThat(ListFile.open(paired).truth())
                .isEqualTo(ListFile.open(pairs).truth())
                .isNotEmpty();
        assertThat(work(
                                "pair",
                                pairs.toString(),
                                "--out",
                                folder.resolve("again.h5").toString())
                        .err())
                .contains("expected a list of singles, found a list of pairs");
        assertThat(work("check", singles.toString()).out()).contains("list of singles", "truth");
    }

    @Test
    void goesFromADescriptionToAnImageOfTheRightActivity() throws IOException {
        Path out = folder.resolve("out");
        Outcome outcome = work("reconstruct", list().toString(), "--out", out.toString(), "--halves");
        assertThat(outcome.err()).isEmpty();
        assertThat(outcome.exit()).isZero();
        assertThat(outcome.out()).contains("30,000 read").contains(Common.CAUTION);
        for (String name : List.of(
                "activity.nii.gz",
                "activity.h5",
                "activity-odd.nii.gz",
                "activity-even.nii.gz",
                "planes.png",
                "result.json")) {
            assertThat(out.resolve(name)).isNotEmptyFile();
        }
        Image image = VolumeFile.read(out.resolve("activity.nii.gz")).image();
        Grid grid = image.grid();
        double total = 0;
        Vector3 centre = Vector3.ZERO;
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    total += image.at(x, y, z);
                    centre = centre.plus(grid.centre(x, y, z).times(image.at(x, y, z)));
                }
            }
        }
        // A ball of 4 mm at 100 kBq/mL holds 26.8 kBq. 30,000 events: 0.6 %; wide crystals close by: a few per cent.
        double kBq = total * 1e-3 * grid.voxelVolumeMm3();
        assertThat(kBq).isBetween(0.95 * 26.8, 1.05 * 26.8);
        assertThat(centre.times(1 / total).minus(new Vector3(2, 1, -3)).norm()).isLessThan(0.3);
    }

    @Test
    void imageDoesNotDependOnThreads() throws IOException {
        byte[] first = {};
        for (String threads : List.of("1", "3")) {
            Path out = folder.resolve("out" + threads);
            assertThat(work("reconstruct", list().toString(), "--out", out.toString(), "--threads", threads)
                            .exit())
                    .isZero();
            byte[] bytes = Files.readAllBytes(out.resolve("activity.h5"));
            assertThat(first.length == 0 || Arrays.equals(first, bytes)).isTrue();
            first = bytes;
        }
    }

    @Test
    void writesLinesAsTextFloatsAndColumns() throws IOException {
        Path text = folder.resolve("lines.csv");
        Path floats = folder.resolve("lines.f32");
        assertThat(work("lines", list().toString(), "--out", text.toString()).exit())
                .isZero();
        assertThat(work("lines", list().toString(), "--out", floats.toString()).exit())
                .isZero();
        assertThat(work(
                                "lines",
                                list().toString(),
                                "--out",
                                folder.resolve("lines.h5").toString())
                        .exit())
                .isZero();
        List<String> rows = Files.readAllLines(text);
        assertThat(rows.get(0)).isEqualTo("x1_mm,y1_mm,z1_mm,x2_mm,y2_mm,z2_mm");
        ByteBuffer bytes = ByteBuffer.wrap(Files.readAllBytes(floats)).order(ByteOrder.LITTLE_ENDIAN);
        assertThat(bytes.capacity()).isEqualTo(24 * (rows.size() - 1));
        String[] row = rows.get(7).split(",", -1);
        for (int c = 0; c < 6; c++) {
            assertThat(Float.parseFloat(row[c])).isEqualTo(bytes.getFloat(24 * 6 + 4 * c));
        }
    }

    @Test
    void neverOverwritesUnasked() {
        Path list = list();
        Outcome outcome = work("simulate", acquisition.toString(), "--out", list.toString());
        assertThat(outcome.exit()).isEqualTo(1);
        assertThat(outcome.err()).contains(list.toString()).contains("--replace");
        assertThat(work("simulate", acquisition.toString(), "--out", list.toString(), "--replace")
                        .exit())
                .isZero();
    }

    @Test
    void refusesAFolderThatHoldsResults() throws IOException {
        Path out = Files.createDirectories(folder.resolve("out"));
        Files.writeString(out.resolve("result.json"), "{}");
        Outcome outcome = work("reconstruct", list().toString(), "--out", out.toString());
        assertThat(outcome.exit()).isEqualTo(1);
        assertThat(outcome.err())
                .contains(out + " already holds results (result.json); choose another --out or add --replace");
    }

    @Test
    void saysWhatIsWrongWithoutAStackTrace() throws IOException {
        Outcome missing = work("check", folder.resolve("nothing.yaml").toString());
        assertThat(missing.exit()).isEqualTo(1);
        assertThat(missing.err())
                .contains("nothing.yaml: there is no such file")
                .doesNotContain("\tat ");
        Path typo = Files.writeString(
                folder.resolve("typo.yaml"),
                Files.readString(folder.resolve("pair.yaml")).replace("columns:", "colums:"));
        Outcome unknown = work("check", typo.toString());
        assertThat(unknown.exit()).isEqualTo(1);
        assertThat(unknown.err())
                .contains("typo.yaml, line 6")
                .contains("columns")
                .doesNotContain("\tat ");
        Outcome wrongKind = work(
                "simulate",
                folder.resolve("pair.yaml").toString(),
                "--out",
                folder.resolve("x.h5").toString());
        assertThat(wrongKind.exit()).isEqualTo(1);
        assertThat(wrongKind.err()).contains("system").contains("acquisition");
        byte[] bytes = Files.readAllBytes(list());
        bytes[bytes.length / 2] ^= 1;
        Path damaged = Files.write(folder.resolve("damaged.h5"), bytes);
        Outcome damage = work("check", damaged.toString());
        assertThat(damage.exit()).isEqualTo(1);
        assertThat(damage.err()).contains("damaged.h5").doesNotContain("\tat ");
    }

    @Test
    void printsOneJsonObjectIfAsked() {
        Outcome outcome = work("check", acquisition.toString(), "--json");
        assertThat(outcome.exit()).isZero();
        assertThat(outcome.out().strip()).startsWith("{").endsWith("}").contains("\"duration_s\"");
    }

    @Test
    void everySampleIsSound() throws IOException {
        try (Stream<Path> files = Files.walk(SAMPLES)) {
            List<Path> samples =
                    files.filter(f -> f.toString().matches(".*\\.(yaml|h5)")).toList();
            assertThat(samples).hasSizeGreaterThanOrEqualTo(7);
            for (Path sample : samples) {
                assertThat(work("check", sample.toString()).err()).isEmpty();
            }
        }
    }
}
