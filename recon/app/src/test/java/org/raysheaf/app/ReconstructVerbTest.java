package org.raysheaf.app;

import static org.assertj.core.api.Assertions.assertThat;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.security.MessageDigest;
import java.util.HexFormat;
import java.util.SplittableRandom;
import java.util.stream.Stream;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.app.Calls.Outcome;
import org.raysheaf.io.hdf5.ColumnWriter;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.hdf5.ElementType;
import org.raysheaf.io.hdf5.Hdf5Writer;

/** What a reconstruction takes, refuses and leaves behind; the lists are such as a few lines of h5py write. */
class ReconstructVerbTest {
    private static final String SYSTEM = TilePair.SYSTEM;
    private static final int TILE = TilePair.CRYSTALS;

    @TempDir
    private static Path cache;

    @TempDir
    private Path folder;

    private Path out = Path.of("");

    @BeforeEach
    void chooseOut() {
        out = folder.resolve("out");
    }

    /** A list of pairs of random crystals, the first in tile 0, the second in another or the same. */
    private Path list(String name, String system, int events, int secondTile) throws IOException {
        SplittableRandom random = new SplittableRandom(1);
        int[] a = random.ints(events, 0, TILE).toArray();
        int[] b =
                random.ints(events, TILE * secondTile, TILE * (secondTile + 1)).toArray();
        Path file = folder.resolve(name);
        try (Hdf5Writer writer = Hdf5Writer.create(file, false)) {
            writer.root().attribute("raysheaf", "list/1");
            writer.root().attribute("live_time_s", 60.0);
            writer.root().attribute("start", "2026-12-01T09:00:00Z");
            if (!system.isEmpty()) {
                writer.root().text("system", system);
            }
            column(writer, "element_a", a);
            column(writer, "element_b", b);
            writer.commit();
        }
        return file;
    }

    private static void column(Hdf5Writer writer, String name, int[] values) throws IOException {
        ColumnWriter column = writer.root().column(name, ElementType.UINT32, 1 << 10, Compression.NONE);
        column.append(values, 0, values.length);
    }

    private Path text(String name, String content) throws IOException {
        return Files.writeString(folder.resolve(name), content);
    }

    private Outcome reconstruct(Object input, Object... more) {
        Object[] all = Stream.concat(Stream.of("reconstruct", input, "--out", out), Stream.of(more))
                .toArray();
        return Calls.work(cache, all);
    }

    private JsonNode result() throws IOException {
        return new ObjectMapper().readTree(out.resolve("result.json").toFile());
    }

    @Test
    void replaceRemovesAllThatAnEarlierRunLeftAndNothingElse() throws IOException {
        Path list = list("list.h5", SYSTEM, 3000, 1);
        assertThat(reconstruct(list, "--halves").exit()).isZero();
        assertThat(out.resolve("activity-odd.nii.gz")).exists();
        Path notes = Files.writeString(out.resolve("notes.txt"), "mine");

        assertThat(reconstruct(list, "--replace").exit()).isZero();

        assertThat(out.resolve("activity-odd.nii.gz")).doesNotExist();
        assertThat(out.resolve("activity-even.nii.gz")).doesNotExist();
        assertThat(notes).hasContent("mine");
    }

    /** Whoever finds result.json finds everything else. */
    @Test
    void resultJsonComesLastAndGoesFirst() throws IOException {
        Path list = list("list.h5", SYSTEM, 3000, 1);
        assertThat(reconstruct(list).exit()).isZero();
        try (Stream<Path> files = Files.list(out)) {
            for (Path file : files.toList()) {
                assertThat(Files.getLastModifiedTime(file))
                        .isLessThanOrEqualTo(Files.getLastModifiedTime(out.resolve("result.json")));
            }
        }
        // A folder that cannot be removed stops the second run half way.
        Files.delete(out.resolve("planes.png"));
        Files.createDirectories(out.resolve("planes.png").resolve("inside"));
        assertThat(reconstruct(list, "--replace").exit()).isEqualTo(1);
        assertThat(out.resolve("result.json")).doesNotExist();
    }

    @Test
    void refusesAPlanWhoseSystemIsNotThatOfTheList() throws IOException {
        list("list.h5", SYSTEM, 3000, 1);
        Path other = text("other.yaml", SYSTEM.replace("[20, 0, 0]", "[25, 0, 0]"));
        Path plan = text("plan.yaml", "raysheaf: reconstruction/1\nlist: list.h5\nsystem: other.yaml\n");

        Outcome refused = reconstruct(plan);

        assertThat(refused.exit()).isEqualTo(1);
        assertThat(refused.err())
                .contains(other + ": expected the system that " + folder.resolve("list.h5") + " carries, \"pair\"")
                .contains("which differs in placements; take the line system out of the reconstruction");
        assertThat(out).doesNotExist();

        Outcome sensitivity = Calls.work(cache, "sensitivity", plan, "--out", folder.resolve("s.nii"));
        assertThat(sensitivity.err()).contains("which differs in placements");
    }

    @Test
    void takesAPlanWhoseSystemSaysTheSameInOtherWords() throws IOException {
        list("list.h5", SYSTEM, 3000, 1);
        text("same.yaml", "# The pair, with a remark.\n" + SYSTEM.replace("radius_mm: 10,", "radius_mm: 10.0,"));
        Outcome outcome =
                reconstruct(text("plan.yaml", "raysheaf: reconstruction/1\nlist: list.h5\nsystem: same.yaml\n"));
        assertThat(outcome.err()).isEmpty();
        assertThat(outcome.exit()).isZero();
    }

    @Test
    void aListWithoutASystemNeedsThePlans() throws IOException {
        Path list = list("list.h5", "", 3000, 1);
        text("pair.yaml", SYSTEM);

        Outcome refused = reconstruct(list);
        assertThat(refused.exit()).isEqualTo(1);
        assertThat(refused.err())
                .contains(list + ": expected a system description in the list, found none")
                .contains("\"system: SYSTEM.yaml\"");

        Files.createDirectories(folder.resolve("plans"));
        Path plan = text("plans/plan.yaml", "raysheaf: reconstruction/1\nsystem: ../pair.yaml\n");
        assertThat(reconstruct(list, "--with", plan).exit()).isZero();
        assertThat(result().at("/system/name").asText()).isEqualTo("pair");
    }

    @Test
    void digestOfTheSystemIsThatOfItsText() throws Exception {
        String text = SYSTEM + "# µ: not only ASCII\n";
        assertThat(reconstruct(list("list.h5", text, 3000, 1)).exit()).isZero();
        byte[] digest = MessageDigest.getInstance("SHA-256").digest(text.getBytes(StandardCharsets.UTF_8));
        assertThat(result().at("/system/sha256").asText())
                .isEqualTo(HexFormat.of().formatHex(digest));
    }

    @Test
    void knowsFilesByWhatIsInThemNotByTheirNames() throws IOException {
        Path list = list("run-7.data", SYSTEM, 3000, 1);
        for (String name : new String[] {"plan.yml", "plan", "plan.h5"}) {
            Path plan = text(name, "# as usual\nraysheaf: reconstruction/1\nlist: run-7.data\n");
            Outcome outcome = reconstruct(plan, "--replace");
            assertThat(outcome.err()).isEmpty();
            assertThat(outcome.exit()).isZero();
        }
        Outcome both = reconstruct(folder.resolve("plan"), "--with", folder.resolve("plan.yml"), "--replace");
        assertThat(both.exit()).isEqualTo(2);
        assertThat(both.err()).contains("--with goes with a list");
        Path listNamedYaml = Files.move(list, folder.resolve("list.yaml"));
        assertThat(reconstruct(listNamedYaml, "--replace").exit()).isZero();
    }

    @Test
    void saysWhatItExpectedIfAFileIsNeither() throws IOException {
        Outcome neither = reconstruct(text("letter.yaml", "Dear all,\n"));
        assertThat(neither.exit()).isEqualTo(1);
        assertThat(neither.err())
                .contains("letter.yaml: expected a list (HDF5) or a reconstruction")
                .contains("found \"Dear all,\"");
        assertThat(reconstruct(text("empty.h5", "")).err())
                .contains("empty.h5: expected a list (HDF5) or a reconstruction");
        assertThat(reconstruct(text("pair.yaml", SYSTEM)).err())
                .contains("expected a description of kind reconstruction, found one of kind system");
        assertThat(reconstruct(folder).err()).contains("found a folder");
        assertThat(reconstruct(folder.resolve("gone")).err()).contains("gone: there is no such file");
    }

    @Test
    void saysWhatBecameOfTheEventsIfNoneIsUsable() throws IOException {
        Path plan = text("plan.yaml", "raysheaf: reconstruction/1\nestimation: {subsets: 5}\nhalves: true\n");
        for (int events : new int[] {0, 3000}) {
            Path list = list("list-" + events + ".h5", SYSTEM, events, 0);
            for (Outcome outcome : new Outcome[] {reconstruct(list), reconstruct(list, "--with", plan, "--json")}) {
                assertThat(outcome.exit()).isEqualTo(1);
                assertThat(outcome.out()).isEmpty();
                assertThat(outcome.err())
                        .contains(list + ": no event can be used, so there is no image")
                        .contains(String.format("%,12d read", events))
                        .contains(String.format("%,12d used", 0))
                        .doesNotContain("NaN");
                assertThat(outcome.err().contains("set aside: blocks closer")).isEqualTo(events > 0);
                assertThat(out).doesNotExist();
            }
        }
    }

    @Test
    void oneEventMakesAnImageButNoHalves() throws IOException {
        Path list = list("list.h5", SYSTEM, 1, 1);
        assertThat(reconstruct(list).exit()).isZero();
        Outcome halves = reconstruct(list, "--halves", "--replace");
        assertThat(halves.exit()).isEqualTo(1);
        assertThat(halves.err()).contains("too few events for images of the odd and of the even ones");
    }

    @Test
    void tooManySubsetsAreTheUsersMistake() throws IOException {
        Path list = list("list.h5", SYSTEM, 5, 1);
        Path plan = text("plan.yaml", "raysheaf: reconstruction/1\nestimation: {subsets: 9}\n");
        assertThat(reconstruct(list, "--with", plan).err())
                .contains("subsets: expected 1 to ")
                .doesNotContain("our mistake");
        Path fine = text("fine.yaml", "raysheaf: reconstruction/1\ngrid: {voxel_mm: 0.0001}\n");
        assertThat(reconstruct(list, "--with", fine).err())
                .contains("take larger voxels")
                .doesNotContain("our mistake");
    }

    @Test
    void saysHowNoiseWasFound() throws IOException {
        assertThat(reconstruct(list("list.h5", SYSTEM, 3000, 1), "--halves").out())
                .contains("noise  ", "weighted by activity");
        JsonNode noise = result().at("/activity/noise");
        assertThat(noise.get("relative_noise").asDouble()).isBetween(0.01, 1.0);
        assertThat(noise.get("from").asText()).contains("weighted by its activity", "jackknife");
        assertThat(noise.get("standard_error").isMissingNode()).isFalse();
        assertThat(reconstruct(folder.resolve("list.h5"), "--replace").exit()).isZero();
        assertThat(result().at("/activity/noise/reason").asText()).contains("--halves");
    }

    @Test
    void aPriorAStartAndAStopRuleComeFromTheDescriptionAndAreReported() throws IOException {
        list("list.h5", SYSTEM, 3000, 1);
        String prior = "method: variance-reduced, subsets: 4, prior: {kind: relative_difference, strength: 0.1}";
        Path first = text(
                "first.yaml",
                "raysheaf: reconstruction/1\nlist: list.h5\nestimation: {passes: 30, " + prior
                        + ", stop: {kind: held_out, every: 5}, start: {coarse_passes: 2}}\n");
        assertThat(reconstruct(first).exit()).isZero();
        JsonNode passes = result().get("passes");
        int kept = result().get("kept_pass").get("pass").asInt();
        assertThat(kept).isBetween(1, passes.size());
        assertThat(result().get("kept_pass").get("reason").asText()).contains("held-out events best");
        for (JsonNode pass : passes) {
            assertThat(pass.get("held_out_log_likelihood").asDouble())
                    .isLessThanOrEqualTo(
                            passes.get(kept - 1).get("held_out_log_likelihood").asDouble());
            assertThat(pass.get("penalty").asDouble()).isPositive();
        }
        double total = result().get("activity").get("total_kBq").asDouble();

        Files.move(out.resolve("activity.nii.gz"), folder.resolve("before.nii.gz"));
        Path second = text(
                "second.yaml",
                "raysheaf: reconstruction/1\nlist: list.h5\nestimation: {passes: 9, " + prior
                        + ", stop: {kind: change, below: 0.5}, start: {volume: before.nii.gz}}\n");
        assertThat(reconstruct(second, "--replace").exit()).isZero();
        assertThat(result().get("activity").get("total_kBq").asDouble() / total).isBetween(0.9, 1.1);
        assertThat(result().get("passes").size()).isLessThan(9);
        assertThat(result().get("passes").get(0).has("held_out_log_likelihood")).isFalse();

        Path wrong = text(
                "wrong.yaml",
                "raysheaf: reconstruction/1\nlist: list.h5\nestimation: {prior: {kind: quadratic, strength: 1}}\n");
        Outcome refused = reconstruct(wrong, "--replace");
        assertThat(refused.exit()).isEqualTo(1);
        assertThat(refused.err()).contains("add method: variance_reduced and subsets: 32");
    }
}
