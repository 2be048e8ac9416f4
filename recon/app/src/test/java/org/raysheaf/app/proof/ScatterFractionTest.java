package org.raysheaf.app.proof;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Path;
import java.util.concurrent.ForkJoinPool;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.transport.Acquisition;
import org.raysheaf.transport.Simulation;

/**
 * The mouse-sized scatter phantom in heron-12: share of true coincidences whose photons scattered in the phantom, by the truth of the
 * simulation. There is no published value for an invented scanner; what must hold is the order of the windows, and a size like that of
 * mouse scanners (between 5 and 25 %, common practice, no source).
 */
class ScatterFractionTest {
    private static final Path SAMPLES = Path.of("..", "..", "sample-data");
    private static final double[][] WINDOWS_KEV = {{250, 750}, {350, 650}, {400, 650}};

    @Test
    void narrowerWindowsHoldLessScatter() throws IOException {
        Path file = SAMPLES.resolve("acquisitions/heron-mouse-scatter.yaml");
        Acquisition acquisition = DescriptionReader.read(file, "acquisition", Acquisition.class);
        DetectorSystem system = new DetectorSystem(
                DescriptionReader.read(file.resolveSibling(acquisition.system()), "system", SystemDescription.class));
        Phantom phantom = new Phantom(DescriptionReader.read(
                file.resolveSibling(acquisition.phantom()), "phantom", PhantomDescription.class));
        double[] trues = new double[WINDOWS_KEV.length];
        double[] scattered = new double[WINDOWS_KEV.length];
        new Simulation(acquisition, phantom, system, "")
                .run(block -> count(block, trues, scattered), ForkJoinPool.commonPool(), Progress.SILENT);
        double[] fraction = new double[WINDOWS_KEV.length];
        double[] error = new double[WINDOWS_KEV.length];
        for (int w = 0; w < WINDOWS_KEV.length; w++) {
            double all = trues[w] + scattered[w];
            fraction[w] = scattered[w] / all;
            error[w] = Math.sqrt(fraction[w] * (1 - fraction[w]) / all);
            assertThat(fraction[w]).isBetween(0.05, 0.25);
            assertThat(error[w]).isLessThan(0.001);
        }
        for (int w = 1; w < WINDOWS_KEV.length; w++) {
            assertThat(fraction[w - 1] - fraction[w]).isGreaterThan(5 * Math.hypot(error[w - 1], error[w]));
        }
    }

    private static void count(EventBlock block, double[] trues, double[] scattered) {
        for (int i = 0; i < block.size(); i++) {
            boolean coincidence = block.bytes(Attribute.SAME_DECAY)[i] == 1
                    && block.bytes(Attribute.NOT_ANNIHILATION)[i] == 0
                    && block.bytes(Attribute.DELAYED)[i] == 0;
            double low = Math.min(block.floats(Attribute.ENERGY_A)[i], block.floats(Attribute.ENERGY_B)[i]);
            double high = Math.max(block.floats(Attribute.ENERGY_A)[i], block.floats(Attribute.ENERGY_B)[i]);
            for (int w = 0; coincidence && w < WINDOWS_KEV.length; w++) {
                if (low >= WINDOWS_KEV[w][0] && high <= WINDOWS_KEV[w][1]) {
                    (block.bytes(Attribute.OBJECT_SCATTERS)[i] > 0 ? scattered : trues)[w]++;
                }
            }
        }
    }
}
