package org.raysheaf.bench;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.concurrent.Callable;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.CoarseGrid;
import org.raysheaf.engine.SampledSensitivity;
import org.raysheaf.engine.Sensitivity;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.ElementResponse;
import org.raysheaf.geometry.response.Positions;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.io.description.DescriptionReader;
import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** How long the sensitivity of a system takes, as the exact sum over all pairs and from samples, and how far the two are apart. */
@Command(
        name = "bench/run sensitivity",
        description = "Time of the exact and of the sampled sensitivity.",
        mixinStandardHelpOptions = true,
        showDefaultValues = true)
public final class SensitivityBench implements Callable<Integer> {
    private static final double NANO = 1e-9;

    @Parameters(arity = "0..1", paramLabel = "SYSTEM.yaml", description = "By default heron-12 of the sample data.")
    private Path file = Path.of("sample-data", "systems", "heron-12.yaml");

    @Option(names = "--threads", description = "Threads; by default all processors.")
    private int threads = Runtime.getRuntime().availableProcessors();

    @Option(names = "--rounds", defaultValue = "5", description = "How often each is timed.")
    private int rounds;

    @Option(names = "--rays", defaultValue = "1", description = "Rays of a sheaf.")
    private int rays;

    @Option(names = "--voxel", defaultValue = "0.925", description = "Edge of a voxel of the exact one (mm).")
    private double voxelMm;

    @Option(names = "--coarse", defaultValue = "2", description = "Edge of a voxel of the sampled one (mm).")
    private double coarseMm;

    @Option(names = "--error", defaultValue = "0.005", description = "Relative standard error to be reached.")
    private double error;

    /** For picocli. */
    SensitivityBench() {}

    /**
     * Runs the bench.
     *
     * @param arguments see {@code --help}
     */
    public static void main(String[] arguments) {
        System.exit(new CommandLine(new SensitivityBench()).execute(arguments));
    }

    @Override
    public Integer call() throws IOException {
        DetectorSystem system = new DetectorSystem(DescriptionReader.read(file, "system", SystemDescription.class));
        ForkJoinPool pool = new ForkJoinPool(threads);
        CoincidenceSheaves sheaves = new CoincidenceSheaves(ElementResponse.tabulate(system, pool, Progress.SILENT))
                .locating(new Positions(rays, true, true));
        FieldOfView view = system.fieldOfView();
        Grid fine = Grid.centred(
                odd(2 * view.radiusMm() / voxelMm),
                odd(2 * view.radiusMm() / voxelMm),
                odd(view.lengthMm() / voxelMm),
                voxelMm);
        Image exact = exact(sheaves, fine, pool);
        sampled(sheaves, fine, exact, pool);
        return 0;
    }

    private static int odd(double voxels) {
        return 2 * (int) Math.ceil(0.5 * voxels) + 1;
    }

    private Image exact(CoincidenceSheaves sheaves, Grid fine, ForkJoinPool pool) {
        long pairs = 0;
        for (int part = 0; part < sheaves.parts(); part++) {
            SheafBundle bundle = new SheafBundle(sheaves.raysPerSheaf(), sheaves.capacity(part));
            sheaves.fill(part, bundle);
            pairs += bundle.size();
        }
        List<Double> seconds = new ArrayList<>();
        Image image = Sensitivity.of(sheaves, fine, pool, Progress.SILENT); // warm-up
        for (int round = 0; round < rounds; round++) {
            long begun = System.nanoTime();
            image = Sensitivity.of(sheaves, fine, pool, Progress.SILENT);
            seconds.add((System.nanoTime() - begun) * NANO);
        }
        double median = print("exact", seconds);
        System.out.printf(
                Locale.ROOT,
                "         %.2f M pairs, %.0f ns per pair and thread, %d rays each%n",
                pairs * 1e-6,
                median / NANO * threads / pairs,
                sheaves.raysPerSheaf());
        return image;
    }

    private void sampled(CoincidenceSheaves sheaves, Grid fine, Image exact, ForkJoinPool pool) {
        FieldOfView view = sheaves.system().fieldOfView();
        boolean interpolated = coarseMm > voxelMm;
        Grid coarse = interpolated ? CoarseGrid.around(fine, coarseMm) : fine;
        List<Double> seconds = new ArrayList<>();
        SampledSensitivity found = null;
        Image image = exact;
        for (int round = 0; round < rounds; round++) {
            long begun = System.nanoTime();
            found = SampledSensitivity.of(
                    sheaves.sampler(round, interpolated ? 3 * coarseMm : 0),
                    coarse,
                    view,
                    new SampledSensitivity.Stop(error, Long.MAX_VALUE / 4),
                    pool,
                    Progress.SILENT);
            image = interpolated ? CoarseGrid.interpolate(found.mean(), fine) : found.mean();
            seconds.add((System.nanoTime() - begun) * NANO);
        }
        print("sampled", seconds);
        report(found, image, exact, view);
    }

    private static void report(@Nullable SampledSensitivity found, Image image, Image exact, FieldOfView view) {
        if (found == null) {
            return;
        }
        double[] whole = compare(image, exact, view, 0);
        double[] smooth = compare(image, exact, view, 2);
        System.out.printf(
                Locale.ROOT,
                "         %.1f M sheaves, standard error %.2f %%; over exact %.4f, scatter %.2f %% of single voxels, %.2f %% of"
                        + " blocks of 5 x 5 x 5%n",
                found.sheaves() * 1e-6,
                100 * found.relativeError(),
                whole[0],
                100 * whole[1],
                100 * smooth[1]);
    }

    /** Mean and relative scatter of the ratio of two images within the field of view, of blocks of voxels. */
    private static double[] compare(Image a, Image b, FieldOfView view, int reach) {
        Grid grid = a.grid();
        double sum = 0;
        double squares = 0;
        int n = 0;
        for (int x = reach; x < grid.nx() - reach; x += 1 + 2 * reach) {
            for (int y = reach; y < grid.ny() - reach; y += 1 + 2 * reach) {
                for (int z = reach; z < grid.nz() - reach; z += 1 + 2 * reach) {
                    Vector3 p = grid.centre(x, y, z);
                    double margin = reach * grid.spacingXMm() * Math.sqrt(2);
                    double r = Math.hypot(p.x(), p.y());
                    if (r + margin < view.radiusMm() && Math.abs(p.z()) + margin < 0.45 * view.lengthMm()) {
                        double ratio = around(a, x, y, z, reach) / around(b, x, y, z, reach);
                        sum += ratio;
                        squares += ratio * ratio;
                        n++;
                    }
                }
            }
        }
        double mean = sum / n;
        return new double[] {mean, Math.sqrt(Math.max(0, squares / n - mean * mean)) / mean};
    }

    private static double around(Image image, int x, int y, int z, int reach) {
        double sum = 0;
        for (int i = -reach; i <= reach; i++) {
            for (int j = -reach; j <= reach; j++) {
                for (int k = -reach; k <= reach; k++) {
                    sum += image.at(x + i, y + j, z + k);
                }
            }
        }
        return sum;
    }

    private static double print(String what, List<Double> seconds) {
        List<Double> sorted = seconds.stream().sorted().toList();
        double median = sorted.get(sorted.size() / 2);
        System.out.printf(
                Locale.ROOT,
                "%-8s %.2f s (%.2f to %.2f in %d rounds)%n",
                what,
                median,
                sorted.get(0),
                sorted.get(sorted.size() - 1),
                sorted.size());
        return median;
    }
}
