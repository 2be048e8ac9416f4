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
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.io.list.ListFile;
import org.raysheaf.io.volume.VolumeFile;

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
        JsonNode exact = work(
                "sensitivity",
                plan("rays_per_event: 9\nsensitivity: {method: exact}"),
                "--out",
                folder.resolve("exact.nii.gz"));
        JsonNode sampled = work("sensitivity", plan("rays_per_event: 9"), "--out", folder.resolve("sampled.nii.gz"));
        JsonNode coarse = work(
                "sensitivity",
                plan("rays_per_event: 9\nsensitivity: {voxel_mm: 3}"),
                "--out",
                folder.resolve("coarse.nii.gz"));
        assertThat(exact.at("/sensitivity/method").asText()).isEqualTo("exact");
        assertThat(sampled.at("/sensitivity/method").asText()).isEqualTo("sampled");
        assertThat(sampled.at("/sensitivity/voxel_mm").asDouble()).isEqualTo(1.5);
        assertThat(coarse.at("/sensitivity/voxel_mm").asDouble()).isEqualTo(3);
        // nine rays of every pair against lines drawn at will: 0.999 when sampled to 0.2 %
        assertThat(middle("sampled.nii.gz") / middle("exact.nii.gz")).isCloseTo(1, within(0.01));
        // the peak in the middle of four blocks is sharper than voxels of 3 mm show: 0.97
        assertThat(middle("coarse.nii.gz") / middle("exact.nii.gz")).isCloseTo(1, within(0.05));
    }

    /** Sum over the voxels within 6 mm of the centre. */
    private double middle(String name) throws IOException {
        Image image = VolumeFile.read(folder.resolve(name)).image();
        Grid grid = image.grid();
        double sum = 0;
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    sum += grid.centre(x, y, z).norm() < 6 ? image.at(x, y, z) : 0;
                }
            }
        }
        return sum;
    }

    @Test
    void saysWhatIsWrongWithItsSettings() throws IOException {
        Path out = folder.resolve("out");
        Outcome rays = call("reconstruct", plan("rays_per_event: 0"), "--out", out);
        Outcome error = call("reconstruct", plan("sensitivity: {relative_error: 0}"), "--out", out);
        assertThat(rays.exit()).isEqualTo(1);
        assertThat(rays.err()).contains("rays_per_event: expected a number from 1 to 1000, found 0");
        assertThat(error.exit()).isEqualTo(1);
        assertThat(error.err()).contains("line 5", "sensitivity.relative_error: expected a number > 0, found 0");
    }

    @Test
    void stopsAtTheSheavesAllowedAndTellsTheErrorReached() throws IOException {
        JsonNode result = work(
                "sensitivity",
                plan("sensitivity: {relative_error: 0.0001, most_sheaves: 1}"),
                "--out",
                folder.resolve("short.nii.gz"));
        assertThat(result.at("/sensitivity/relative_standard_error").asDouble()).isBetween(0.05, 0.5);
    }
}
