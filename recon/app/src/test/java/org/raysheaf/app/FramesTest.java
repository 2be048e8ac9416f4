package org.raysheaf.app;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.SplittableRandom;
import java.util.stream.Stream;
import java.util.zip.GZIPInputStream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.app.Calls.Outcome;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.hdf5.ElementType;
import org.raysheaf.io.hdf5.Hdf5Writer;

/** Frames and gates of a list of F-18 that decays through ten minutes and beats once a second. */
class FramesTest {
    private static final int EVENTS = 40_000;
    private static final double DURATION_S = 3600;
    private static final double HALF_LIFE_S = 6586.2;

    @TempDir
    private static Path cache;

    @TempDir
    private Path folder;

    /** Times drawn from the decay; the heart is in gate 1 for a quarter of each second. */
    private Path list() throws IOException {
        SplittableRandom random = new SplittableRandom(8);
        double lambda = Math.log(2) / HALF_LIFE_S;
        double all = -Math.expm1(-lambda * DURATION_S);
        double[] times = random.doubles(EVENTS)
                .map(u -> -Math.log1p(-u * all) / lambda)
                .sorted()
                .toArray();
        long[] ps = new long[EVENTS];
        byte[] gates = new byte[EVENTS];
        for (int i = 0; i < EVENTS; i++) {
            ps[i] = (long) (times[i] * 1e12);
            gates[i] = (byte) (times[i] % 40 < 10 ? 1 : 0);
        }
        Path file = folder.resolve("list.h5");
        try (Hdf5Writer writer = TilePair.begin(file, DURATION_S)) {
            writer.root().attribute("duration_s", DURATION_S);
            writer.root().attribute("nuclide", "F-18");
            writer.root().attribute("half_life_s", HALF_LIFE_S);
            writer.root().attribute("positron_branching", 0.9673);
            TilePair.randomPairs(writer, EVENTS, random);
            writer.root()
                    .column("time_ps", ElementType.INT64, 1 << 10, Compression.NONE)
                    .append(ps, 0, EVENTS);
            writer.root()
                    .column("gate", ElementType.UINT8, 1 << 10, Compression.NONE)
                    .append(gates, 0, EVENTS);
            writer.commit();
        }
        return file;
    }

    private Outcome reconstruct(Path list, String frames) throws IOException {
        Path plan = folder.resolve("plan.yaml");
        Files.writeString(plan, "raysheaf: reconstruction/1\nestimation: {passes: 4}\nframes: " + frames + "\n");
        return Calls.work(cache, "reconstruct", list, "--with", plan, "--out", folder.resolve("out"), "--replace");
    }

    private JsonNode result() throws IOException {
        return new ObjectMapper().readTree(folder.resolve("out/result.json").toFile());
    }

    /** The activity does not change but by decay, so every frame must find that of the whole, at the start of the list. */
    @Test
    void framesFindTheActivityAtTheStartOfTheList() throws Exception {
        Path list = list();
        for (String frames : new String[] {"{edges_s: [0, 600, 1800, 3600]}", "{events: 10000}", "{gates: true}"}) {
            Outcome outcome = reconstruct(list, frames);
            assertThat(outcome.err()).isEmpty();
            double whole = result().at("/activity/total_kBq").asDouble();
            long events = 0;
            for (JsonNode frame : result().get("frames")) {
                double total = frame.get("total_kBq").asDouble();
                double error = frame.get("total_standard_error_kBq").asDouble();
                assertThat(total).as("%s: %s", frames, frame).isCloseTo(whole, within(4 * error));
                events += frame.get("events").asLong();
            }
            assertThat(events).isEqualTo(result().at("/events/used").asLong());
        }
        assertThat(result().at("/frames/1/share_of_time").asDouble()).isCloseTo(0.25, within(0.005));
        try (GZIPInputStream in =
                new GZIPInputStream(Files.newInputStream(folder.resolve("out/activity-frames.nii.gz")))) {
            ByteBuffer header = ByteBuffer.wrap(in.readNBytes(352)).order(ByteOrder.LITTLE_ENDIAN);
            assertThat(header.getShort(40)).isEqualTo((short) 4);
            assertThat(header.getShort(48)).isEqualTo((short) 2);
            long voxels = Stream.of(42, 44, 46).mapToLong(header::getShort).reduce(1, (a, b) -> a * b);
            assertThat(in.readAllBytes().length).isEqualTo(2 * 4 * voxels);
        }
    }

    @Test
    void anEmptyFrameIsAnImageOfNothing() throws Exception {
        Outcome outcome = reconstruct(list(), "{edges_s: [0, 1.0e-9, 3600]}");
        assertThat(outcome.err()).isEmpty();
        assertThat(result().at("/frames/0/events").asLong()).isZero();
        assertThat(result().at("/frames/0/total_kBq").asDouble()).isZero();
        assertThat(result().at("/frames/1/events")).isEqualTo(result().at("/events/used"));
    }

    @Test
    void saysWhichFramesCannotBe() throws Exception {
        Path list = list();
        assertThat(reconstruct(list, "{edges_s: [0, 9999]}").err())
                .contains("list.h5: frames cannot be made: frames end at 9999.0 s, but the list lasts 3600.0 s");
        assertThat(reconstruct(list, "{edges_s: [0, 5, 5]}").err())
                .contains("edges_s[2]", "expected times of at least 0 that grow, found 5.0 after 5.0");
        assertThat(reconstruct(list, "{}").err()).contains("expected one of edges_s, events and gates, found 0");
        assertThat(reconstruct(list, "{events: 10, gates: true}").err()).contains("found 2 of them");
    }
}
