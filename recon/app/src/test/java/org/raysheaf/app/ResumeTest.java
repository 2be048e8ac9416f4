package org.raysheaf.app;

import static org.assertj.core.api.Assertions.assertThat;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.SplittableRandom;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.app.Calls.Outcome;
import org.raysheaf.io.hdf5.Hdf5Writer;

/** A reconstruction that is killed, in a program of its own, goes on to the same bits. */
class ResumeTest {
    private static final int EVENTS = 3000;
    /** So many that a run of a few seconds is sure to be met in the middle of them. */
    private static final int PASSES = 600;

    @TempDir
    private static Path cache;

    @TempDir
    private Path folder;

    private Path plan = Path.of("");

    @BeforeEach
    void writeListAndPlan() throws IOException {
        SplittableRandom random = new SplittableRandom(3);
        try (Hdf5Writer writer = TilePair.begin(folder.resolve("list.h5"), 60)) {
            TilePair.randomPairs(writer, EVENTS, random);
            writer.commit();
        }
        plan = Files.writeString(
                folder.resolve("plan.yaml"),
                "raysheaf: reconstruction/1\nlist: list.h5\nhalves: true\nestimation: {subsets: 2, passes: " + PASSES
                        + "}\n");
    }

    @Test
    void killedAtAnyMomentItGoesOnToTheSameBits() throws Exception {
        Path undisturbed = folder.resolve("undisturbed");
        assertThat(Calls.work(cache, "reconstruct", plan, "--out", undisturbed).exit())
                .isZero();
        assertThat(undisturbed.resolve("checkpoint")).doesNotExist();

        Path out = folder.resolve("out");
        Process first = start("reconstruct", plan, "--out", out);
        awaitCheckpoint(out, first);
        first.destroyForcibly().waitFor();
        assertThat(out.resolve("result.json")).doesNotExist();
        Outcome again = Calls.work(cache, "reconstruct", plan, "--out", out);
        assertThat(again.err()).contains("holds a reconstruction that was not finished; go on with it: raysheaf");

        SplittableRandom random = new SplittableRandom(4);
        for (int kill = 0; kill < 2; kill++) {
            Process next = start("reconstruct", "--resume", out);
            if (next.waitFor(1000 + random.nextInt(700), TimeUnit.MILLISECONDS)) {
                break; // a fast machine was done already
            }
            next.destroyForcibly().waitFor();
        }
        if (!Files.exists(out.resolve("result.json"))) {
            Outcome last = Calls.work(cache, "reconstruct", "--resume", out);
            assertThat(last.err()).isEmpty();
            assertThat(last.exit()).isZero();
        }

        for (String name : List.of("activity.nii.gz", "activity.h5", "activity-odd.nii.gz", "activity-even.nii.gz")) {
            assertThat(out.resolve(name)).hasSameBinaryContentAs(undisturbed.resolve(name));
        }
        assertThat(passes(out)).hasSize(PASSES).isEqualTo(passes(undisturbed));
        assertThat(out.resolve("checkpoint")).doesNotExist();
        assertThat(Calls.work(cache, "reconstruct", "--resume", out).err()).contains("found a finished one");
    }

    @Test
    @DisabledOnOs(value = OS.WINDOWS, disabledReason = "processes cannot be asked to stop there")
    void askedToStopItSaysHowToGoOn() throws Exception {
        Path out = folder.resolve("out");
        Process process = start("reconstruct", plan, "--out", out);
        awaitCheckpoint(out, process);
        process.toHandle().destroy(); // process.destroy() would also close what it says
        String said = new String(process.getErrorStream().readAllBytes(), StandardCharsets.UTF_8);
        assertThat(process.waitFor()).isNotZero();
        assertThat(said).contains("all passes made so far are kept. Go on with: raysheaf reconstruct --resume " + out);
        assertThat(WorkFolder.isUnfinished(out)).isTrue();
    }

    @Test
    void refusesToGoOnWithAnotherList() throws Exception {
        Path out = folder.resolve("out");
        Process process = start("reconstruct", plan, "--out", out);
        awaitCheckpoint(out, process);
        process.destroyForcibly().waitFor();
        Files.writeString(plan, Files.readString(plan).replace("subsets: 2", "subsets: 3"));
        assertThat(Calls.work(cache, "reconstruct", "--resume", out).err())
                .contains("expected the checkpoint of the same list with the same settings");
        Files.delete(folder.resolve("list.h5"));
        assertThat(Calls.work(cache, "reconstruct", "--resume", out).err()).contains("list.h5: there is no such file");
        assertThat(WorkFolder.isUnfinished(out)).isTrue();
    }

    @Test
    void saysWhatCannotBeResumed() throws Exception {
        assertThat(Calls.work(cache, "reconstruct", "--resume", folder.resolve("none"))
                        .err())
                .contains("there is no such folder, so nothing to go on with");
        assertThat(Calls.work(cache, "reconstruct", "--resume", folder).err())
                .contains("expected an unfinished reconstruction, found none");
        Outcome both = Calls.work(cache, "reconstruct", plan, "--resume", folder);
        assertThat(both.exit()).isEqualTo(2);
        assertThat(both.err()).contains("--resume goes on with what was asked for then");
        assertThat(Calls.work(cache, "reconstruct", plan).err()).contains("expected --out DIR");
        assertThat(Calls.work(cache, "reconstruct", "--out", folder).err())
                .contains("expected a reconstruction or a list");
    }

    private static List<String> passes(Path out) throws IOException {
        JsonNode passes =
                new ObjectMapper().readTree(out.resolve("result.json").toFile()).get("passes");
        List<String> found = new ArrayList<>();
        passes.forEach(pass -> found.add(pass.get("log_likelihood") + " " + pass.get("expected_events")));
        return found;
    }

    /** Waits until some passes are kept. */
    private static void awaitCheckpoint(Path out, Process process) throws Exception {
        while (!Files.exists(out.resolve("checkpoint").resolve("all.h5"))) {
            assertThat(process.isAlive()).as("still at work").isTrue();
            Thread.sleep(5);
        }
    }

    private static Process start(Object... arguments) throws IOException {
        List<String> command = new ArrayList<>(List.of(
                Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-Xshare:auto",
                "-XX:TieredStopAtLevel=1",
                "-cp",
                System.getProperty("java.class.path"),
                "org.raysheaf.app.Raysheaf"));
        for (Object argument : arguments) {
            command.add(argument.toString());
        }
        command.addAll(List.of("--quiet", "--cache", cache.toString()));
        return new ProcessBuilder(command)
                .redirectOutput(ProcessBuilder.Redirect.DISCARD)
                .start();
    }
}
