package org.raysheaf.app;

import static org.assertj.core.api.Assertions.assertThat;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** The other shipped system, from its shipped acquisition to an image, by the verbs alone. */
class WrenPanelsTest {
    private static final Path SAMPLES =
            Path.of("..", "..", "sample-data").toAbsolutePath().normalize();

    @TempDir
    private Path folder;

    @Test
    void findsTheActivityOfTheRods() throws IOException {
        Path cache = folder.resolve("cache");
        Path acquisition = Files.writeString(
                folder.resolve("run.yaml"),
                Files.readString(SAMPLES.resolve("acquisitions").resolve("wren-rods.yaml"))
                        .replace("../", SAMPLES + "/")
                        .replace("max_events: 150000", "max_events: 40000"));
        Path plan = Files.writeString(folder.resolve("plan.yaml"), """
                raysheaf: reconstruction/1
                list: list.h5
                grid: {voxel_mm: 2}
                estimation: {passes: 10}
                """);
        long t0 = System.nanoTime();
        Calls.Outcome simulated = Calls.work(cache, "simulate", acquisition, "--out", folder.resolve("list.h5"));
        assertThat(simulated.err()).isEmpty();
        long t1 = System.nanoTime();
        Calls.Outcome outcome = Calls.work(cache, "reconstruct", plan, "--out", folder.resolve("out"));
        assertThat(outcome.err()).isEmpty();
        System.err.println(outcome.out() + (t1 - t0) * 1e-9 + " s " + (System.nanoTime() - t1) * 1e-9);
        assertThat(outcome.exit()).isZero();

        JsonNode result = new ObjectMapper()
                .readTree(folder.resolve("out").resolve("result.json").toFile());
        assertThat(result.at("/system/name").asText()).isEqualTo("wren-panels");
        assertThat(result.at("/events/read").asInt()).isEqualTo(40_000);
    }
}
