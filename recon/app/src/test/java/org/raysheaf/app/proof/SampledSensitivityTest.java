package org.raysheaf.app.proof;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.nio.file.Path;
import java.util.concurrent.ForkJoinPool;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.raysheaf.engine.SampledSensitivity;
import org.raysheaf.engine.Sensitivity;
import org.raysheaf.engine.correct.Attenuation;
import org.raysheaf.engine.correct.PhantomMaps;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.ElementResponse;
import org.raysheaf.io.description.DescriptionReader;

/** The sampled sensitivity of heron-12, with attenuation in the shipped rods, against the sum over all its pairs, on voxels of 2 mm. */
@Tag("proof")
class SampledSensitivityTest {
    private static final Path SAMPLES = Path.of("..", "..", "sample-data");
    private static final ForkJoinPool POOL = new ForkJoinPool();

    @AfterAll
    static void close() {
        POOL.shutdown();
    }

    /** z follows Student's law of 7 degrees of freedom (variance 1.4, |z| > 5 in 0.16 %); voxels hang together, so bounds are wider. */
    @Test
    void agreesWithTheExactOneWithinItsStandardError() throws IOException {
        DetectorSystem system = new DetectorSystem(
                DescriptionReader.read(SAMPLES.resolve("systems/heron-12.yaml"), "system", SystemDescription.class));
        Phantom rods = new Phantom(
                DescriptionReader.read(SAMPLES.resolve("phantoms/rods.yaml"), "phantom", PhantomDescription.class));
        CoincidenceSheaves sheaves = new CoincidenceSheaves(ElementResponse.tabulate(system, POOL, Progress.SILENT))
                .with(new Attenuation(PhantomMaps.attenuation(rods, 1)));
        FieldOfView view = system.fieldOfView();
        Grid grid = Grid.centred(29, 29, 31, 2);
        Image exact = Sensitivity.of(sheaves, grid, POOL, Progress.SILENT);
        SampledSensitivity sampled = SampledSensitivity.of(
                sheaves.sampler(1, 0), grid, view, new SampledSensitivity.Stop(0.005, 1L << 40), POOL, Progress.SILENT);
        double sum = 0;
        double squares = 0;
        double ratios = 0;
        int far = 0;
        int n = 0;
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    Vector3 p = grid.centre(x, y, z);
                    if (view.contains(p.x(), p.y(), p.z())) {
                        double difference = sampled.mean().at(x, y, z) - exact.at(x, y, z);
                        double score = difference / sampled.standardError().at(x, y, z);
                        sum += score;
                        squares += score * score;
                        ratios += Math.pow(difference / exact.at(x, y, z), 2);
                        far += Math.abs(score) > 5 ? 1 : 0;
                        n++;
                    }
                }
            }
        }
        assertThat(sampled.relativeError()).isLessThan(0.005);
        assertThat(sum / n).isCloseTo(0, within(0.2));
        assertThat(squares / n).isBetween(1.1, 1.8);
        assertThat((double) far / n).isLessThan(0.005);
        assertThat(Math.sqrt(ratios / n)).isLessThan(0.0075);
    }
}
