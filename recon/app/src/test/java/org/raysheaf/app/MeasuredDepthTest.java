package org.raysheaf.app;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.app.Calls.Outcome;
import org.raysheaf.io.list.ListFile;

/** Crystals with a depth readout, by the verbs alone: the list brings depths, the sensitivity is sampled, the activity comes back. */
class MeasuredDepthTest {
    private static final double BALL_KBQ = 4 * Math.PI / 3 * 0.4 * 0.4 * 0.4 * 100;

    @TempDir
    private Path folder;

    @BeforeEach
    void recordABall() throws IOException {
        Files.writeString(folder.resolve("box.yaml"), """
                raysheaf: system/1
                name: box
                field_of_view: {radius_mm: 10, length_mm: 24}
                materials: [{name: lyso, attenuation_length_mm: 12}]
                blocks:
                  - {kind: crystal_block, name: tile, columns: 8, rows: 8, pitch_mm: [3, 3, 10], crystal_mm: [2.8, 2.8, 10], material: lyso, readout: {depth_fwhm_mm: 2}}
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
        Files.writeString(folder.resolve("run.yaml"), """
                raysheaf: acquisition/1
                system: box.yaml
                phantom: ball.yaml
                nuclide: F-18
                start: 2026-12-01T09:00:00Z
                duration_s: 600
                max_events: 30000
                physics: {positron_range: false, acollinearity_fwhm_deg: 0, surroundings: vacuum}
                """);
        work("simulate", folder.resolve("run.yaml"), "--out", folder.resolve("list.h5"));
    }

    private Outcome call(Object... arguments) {
        Object[] all = new Object[arguments.length + 1];
        System.arraycopy(arguments, 0, all, 0, arguments.length);
        all[arguments.length] = "--json";
        return Calls.work(folder.resolve("cache"), all);
    }

    private JsonNode work(Object... arguments) throws IOException {
        Outcome outcome = call(arguments);
        assertThat(outcome.err()).isEmpty();
        assertThat(outcome.exit()).isZero();
        return new ObjectMapper().readTree(outcome.out());
    }

    private Path plan(String more) throws IOException {
        return Files.writeString(
                folder.resolve("plan.yaml"),
                "raysheaf: reconstruction/1\nlist: list.h5\ngrid: {voxel_mm: 1.5}\nestimation: {passes: 8}\n" + more);
    }

    /** 30,000 events count to 0.6 %; 4 % is left to the model of a box of large crystals close to the ball. */
    @Test
    void activityComesBackWithAnyNumberOfRays() throws IOException {
        assertThat(ListFile.open(folder.resolve("list.h5")).attributes().toString())
                .contains("DEPTH_A");
        for (int rays : new int[] {1, 3}) {
            Path out = folder.resolve("out" + rays);
            JsonNode result = work("reconstruct", plan("rays_per_event: " + rays), "--out", out);
            assertThat(result.at("/corrections/applied/sensitivity/method").asText())
                    .isEqualTo("sampled");
            double error = result.at("/corrections/applied/sensitivity/relative_standard_error")
                    .asDouble();
            assertThat(error).isPositive().isLessThan(0.01);
            assertThat(result.at("/activity/total_kBq").asDouble()).isCloseTo(BALL_KBQ, within(0.04 * BALL_KBQ));
            assertThat(out.resolve("sensitivity-error.nii.gz")).exists();
        }
    }

    @Test
    void theReconstructionCanAskForEither() throws IOException {
        JsonNode exact =
                work("sensitivity", plan("sensitivity: {method: exact}"), "--out", folder.resolve("exact.nii.gz"));
        JsonNode coarse = work(
                "sensitivity",
                plan("sensitivity: {voxel_mm: 3, relative_error: 0.02}"),
                "--out",
                folder.resolve("coarse.nii.gz"));
        assertThat(exact.at("/sensitivity/method").asText()).isEqualTo("exact");
        assertThat(coarse.at("/sensitivity/voxel_mm").asDouble()).isEqualTo(3);
        // pairs are cut off at the edge of the field of view by their middle lines in one, by lines at will in the other
        assertThat(coarse.get("sum").asDouble() / exact.get("sum").asDouble()).isCloseTo(1, within(0.05));
    }

    @Test
    void saysWhatIsWrongWithItsSettings() throws IOException {
        Outcome outcome = call(
                "reconstruct",
                plan("rays_per_event: 0\nsensitivity: {relative_error: 0}"),
                "--out",
                folder.resolve("out"));
        assertThat(outcome.exit()).isEqualTo(1);
        assertThat(outcome.err()).contains("rays_per_event", "relative_error");
    }

    @Test
    void tellsWhenTheSensitivityStopsShort() throws IOException {
        Outcome outcome = call(
                "sensitivity",
                plan("sensitivity: {relative_error: 0.0001, most_sheaves: 1}"),
                "--out",
                folder.resolve("short.nii.gz"));
        assertThat(outcome.exit()).isZero();
        assertThat(outcome.err()).contains("not 0.01 % as asked for", "most_sheaves");
    }
}
