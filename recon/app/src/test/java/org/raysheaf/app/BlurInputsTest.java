package org.raysheaf.app;

import static org.assertj.core.api.Assertions.assertThat;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.SplittableRandom;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.app.Calls.Outcome;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.hdf5.ElementType;
import org.raysheaf.io.hdf5.Hdf5Writer;

/** What the keys blur and motion take and refuse. */
class BlurInputsTest {
    private static final int EVENTS = 2000;

    @TempDir
    private static Path cache;

    @TempDir
    private Path folder;

    @BeforeEach
    void writeList() throws IOException {
        SplittableRandom random = new SplittableRandom(5);
        try (Hdf5Writer writer = TilePair.begin(folder.resolve("list.h5"), 60)) {
            TilePair.randomPairs(writer, EVENTS, random);
            long[] times = random.longs(EVENTS, 0, 60_000_000_000_000L).sorted().toArray();
            writer.root()
                    .column("time_ps", ElementType.INT64, 1 << 10, Compression.NONE)
                    .append(times, 0, EVENTS);
            writer.commit();
        }
    }

    private Outcome reconstruct(String keys) throws IOException {
        Path plan = Files.writeString(
                folder.resolve("plan.yaml"), "raysheaf: reconstruction/1\nestimation: {passes: 2}\n" + keys + "\n");
        return Calls.work(
                cache,
                "reconstruct",
                folder.resolve("list.h5"),
                "--with",
                plan,
                "--out",
                folder.resolve("out"),
                "--replace");
    }

    private JsonNode result() throws IOException {
        return new ObjectMapper().readTree(folder.resolve("out/result.json").toFile());
    }

    @Test
    void saysWhatWasUndone() throws Exception {
        Outcome outcome = reconstruct(
                "blur: {positron_range: false, kernel: [{share: 0.7, fwhm_mm: 1}, {share: 0.3, fwhm_mm: 3}]}");
        assertThat(outcome.err()).isEmpty();
        JsonNode blur = result().get("blur");
        assertThat(blur.get("crystal_width").asBoolean()).isTrue();
        assertThat(blur.get("acollinearity_fwhm_deg").asDouble()).isEqualTo(0.5);
        assertThat(blur.get("gaussians")).hasSize(2);
        assertThat(reconstruct("").exit()).isZero();
        assertThat(result().at("/blur/reason").asText()).contains("nothing was undone");
    }

    @Test
    void refusesBlurThatCannotBe() throws Exception {
        assertThat(reconstruct("blur: {}").err())
                .contains("the range of positrons depends on the nuclide, which the list does not say");
        assertThat(reconstruct("blur: {positron_range: false, kernel: [{share: 0.7, fwhm_mm: 1}]}")
                        .err())
                .contains("expected shares that add up to 1, found a sum of 0.7");
        assertThat(reconstruct("rays_per_event: 4\nblur: {positron_range: false, crystal_width: true}")
                        .err())
                .contains("blur.crystal_width: true, but the rays of an event are spread over its crystals");
        assertThat(reconstruct("blur: {positron_range: false, acollinearity_fwhm_deg: 9}")
                        .err())
                .contains("acollinearity_fwhm_deg");
    }

    @Test
    void movesAndSaysWithWhatThatCannotBeCombined() throws Exception {
        Files.writeString(folder.resolve("motion.yaml"), """
                raysheaf: motion/1
                between: even
                poses:
                  - {time_s: 0}
                  - {time_s: 60, turn_deg: [0, 0, 90]}
                """);
        Outcome moved = reconstruct("motion: motion.yaml");
        assertThat(moved.err()).isEmpty();
        assertThat(result().at("/corrections/applied/motion/poses").asInt()).isEqualTo(2);
        assertThat(result().at("/corrections/applied/sensitivity/poses").asInt())
                .isEqualTo(48);
        assertThat(reconstruct("motion: motion.yaml\nblur: {positron_range: false}")
                        .err())
                .contains("would have to follow the motion");
        Files.writeString(folder.resolve("mu.yaml"), """
                raysheaf: phantom/1
                name: water
                parts:
                  - {name: water, shape: {kind: cylinder, radius_mm: 8, length_mm: 20}, concentration_kBq_per_mL: 1}
                """);
        assertThat(reconstruct("motion: motion.yaml\ncorrections: {attenuation: {phantom: mu.yaml}}")
                        .err())
                .contains("motion cannot be combined with attenuation yet");
    }
}
