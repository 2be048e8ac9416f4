package org.raysheaf.app;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Locale;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.app.Calls.Outcome;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.io.volume.VolumeFile;

/** A hot rod of 2.5 mm in a warm cylinder of water, seen by heron-12 with all physics: with its blur undone more of the rod's activity is found where it is. */
@Tag("proof")
class UndoneBlurTest {
    private static final double ROD = 300;
    private static final double WARM = 30;
    private static final int SEEDS = 3;
    private static final Path SYSTEM = Path.of("..", "..", "sample-data", "systems", "heron-12.yaml");

    @TempDir
    private static Path folder;

    private record Found(double rod, double rodError, double warm, double total) {}

    private static void run(Object... arguments) {
        Outcome outcome = Calls.work(folder.resolve("cache"), arguments);
        assertThat(outcome.err()).isEmpty();
        assertThat(outcome.exit()).isZero();
    }

    private static Path simulate(String nuclide, int seed) throws IOException {
        Files.writeString(folder.resolve("phantom.yaml"), String.format(Locale.ROOT, """
                        raysheaf: phantom/1
                        name: rod
                        parts:
                          - {name: warm, shape: {kind: cylinder, radius_mm: 12, length_mm: 30}, concentration_kBq_per_mL: %s}
                          - {name: rod, shape: {kind: cylinder, radius_mm: 1.25, length_mm: 24}, centre_mm: [5, 0, 0], concentration_kBq_per_mL: %s}
                        """, WARM, ROD));
        Path list = folder.resolve(nuclide + seed + ".h5");
        Path acquisition = Files.writeString(
                folder.resolve(nuclide + seed + ".yaml"), String.format("""
                        raysheaf: acquisition/1
                        system: %s
                        phantom: phantom.yaml
                        nuclide: %s
                        start: 2026-12-01T09:00:00Z
                        duration_s: 60
                        max_events: 600000
                        seed: %d
                        pairing: {window_ns: 4, lowest_keV: 350, highest_keV: 650, delay_ns: 200}
                        """, SYSTEM.toAbsolutePath(), nuclide, seed));
        run("simulate", acquisition, "--out", list);
        return list;
    }

    private static Found reconstruct(String nuclide, String blur) throws IOException {
        double[] rods = new double[SEEDS];
        double warm = 0;
        double total = 0;
        for (int seed = 0; seed < SEEDS; seed++) {
            Path list = folder.resolve(nuclide + seed + ".h5");
            list = Files.exists(list) ? list : simulate(nuclide, seed);
            Path plan = Files.writeString(folder.resolve("plan.yaml"), """
                    raysheaf: reconstruction/1
                    grid: {voxel_mm: 0.6, radius_mm: 14, length_mm: 36}
                    estimation: {passes: 8, subsets: 5}
                    corrections: {attenuation: {phantom: phantom.yaml}, randoms: delayed}
                    """ + blur);
            Path out = folder.resolve("out");
            run("reconstruct", list, "--with", plan, "--out", out, "--replace");
            Image image = VolumeFile.read(out.resolve("activity.nii.gz")).image();
            rods[seed] = Region.mean(image, Region.rod(5, 0.9, 8));
            warm += Region.mean(image, Region.rod(-5, 4, 8)) / SEEDS;
            total += image.sum() * image.grid().voxelVolumeMm3() * 1e-3 / SEEDS;
        }
        double rod = 0;
        for (double r : rods) {
            rod += r / SEEDS;
        }
        double squares = 0;
        for (double r : rods) {
            squares += (r - rod) * (r - rod);
        }
        return new Found(rod, Math.sqrt(squares / (SEEDS - 1) / SEEDS), warm, total);
    }

    @Test
    void moreOfARodIsFoundWhereItIs() throws Exception {
        for (String nuclide : new String[] {"F-18", "Ga-68"}) {
            Found plain = reconstruct(nuclide, "");
            Found undone = reconstruct(nuclide, "blur: {}\n");
            JsonNode blur = new ObjectMapper()
                    .readTree(folder.resolve("out/result.json").toFile())
                    .get("blur");
            assertThat(blur.get("positron_range_rms_mm").asDouble()).isBetween(0.4, 1.8);
            // The gain, against the scatter of both.
            double error = Math.hypot(plain.rodError(), undone.rodError());
            assertThat(undone.rod() - plain.rod()).isGreaterThan(4 * error).isGreaterThan(0.05 * ROD);
            assertThat(undone.rod()).isLessThan(1.15 * ROD);
            // What is uniform stays right, and no counts are lost.
            assertThat(undone.warm()).isCloseTo(WARM, within(0.03 * WARM));
            assertThat(undone.total()).isCloseTo(plain.total(), within(0.01 * plain.total()));
        }
    }
}
