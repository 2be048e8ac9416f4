package org.raysheaf.bench;

import java.io.IOException;
import java.io.PrintStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.Comparator;
import java.util.List;
import java.util.Locale;
import java.util.concurrent.Callable;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.Stream;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.Estimate;
import org.raysheaf.engine.EstimationSettings;
import org.raysheaf.engine.Estimator;
import org.raysheaf.engine.FieldOfView;
import org.raysheaf.engine.PassListener;
import org.raysheaf.engine.PassReport;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/**
 * How many events per second a pass of list-mode EM visits, and what memory it takes. With a yardstick, a program in C that makes the
 * same passes, both run in turns, so that what else the machine does hits both alike; only their ratio means anything.
 *
 * <p>A round is the best of three passes of each program; printed are the medians of the rounds. The engine's time includes adding up
 * its lanes and the update of the image, the yardstick's does not.
 */
@Command(
        name = "bench/run",
        description = "Throughput and memory of a list-mode pass.",
        mixinStandardHelpOptions = true,
        showDefaultValues = true)
public final class ThroughputBench implements Callable<Integer> {
    private static final int PASSES_PER_ROUND = 3;

    /** Passes before the two images are compared. */
    private static final int CHECKED_PASSES = 3;

    /** Voxels below this share of the maximum are not compared. */
    private static final double TINY = 1e-3;

    @Parameters(
            arity = "0..1",
            paramLabel = "EVENTS.f32",
            description = "Lines: six little-endian floats each, two end points in mm. Without it, lines are made up.")
    private @Nullable Path events;

    @Option(names = "--lines", defaultValue = "2000000", description = "How many lines to make up.")
    private int lines;

    @Option(
            names = "--ring",
            arity = "2",
            paramLabel = "MM",
            description = "Radius and length of the ring that sees made-up lines (mm); by default 42 and 62.")
    private double[] ring = {42, 62};

    @Option(
            names = "--grid",
            arity = "4",
            paramLabel = "N",
            description = "Voxels along x, y and z, and their size in mm; by default 128 128 192 0.5.")
    private double[] gridSize = {128, 128, 192, 0.5};

    @Option(names = "--threads", description = "Threads; by default all processors.")
    private int threads = Runtime.getRuntime().availableProcessors();

    @Option(names = "--lanes", defaultValue = "0", description = "Accumulator images; 0: as the problem suggests.")
    private int lanes;

    @Option(names = "--rounds", defaultValue = "5", description = "Rounds to take the median of.")
    private int rounds;

    @Option(names = "--yardstick", paramLabel = "SOURCE.c", description = "Compile this with gcc, and compare.")
    private @Nullable Path source;

    @Option(names = "--check", description = "Also compare the images of engine and yardstick after three passes.")
    private boolean check;

    private final PrintStream out = System.out;

    /** For picocli. */
    public ThroughputBench() {}

    /**
     * Runs the bench.
     *
     * @param arguments see --help
     */
    public static void main(String[] arguments) {
        System.exit(new CommandLine(new ThroughputBench()).execute(arguments));
    }

    @Override
    public Integer call() throws IOException {
        Path folder = Files.createTempDirectory("raysheaf-bench");
        ForkJoinPool pool = new ForkJoinPool(threads);
        try {
            run(folder, pool);
        } finally {
            pool.shutdown();
            try (Stream<Path> files = Files.walk(folder)) {
                for (Path file : files.sorted(Comparator.reverseOrder()).toList()) {
                    Files.delete(file);
                }
            }
        }
        return 0;
    }

    private void run(Path folder, ForkJoinPool pool) throws IOException {
        Path file = events;
        if (file == null) {
            file = folder.resolve("events.f32");
            new RingLines(ring[0], ring[1]).write(file, lines, 1);
        }
        LineFile list = LineFile.open(file);
        Grid grid = Grid.centred((int) gridSize[0], (int) gridSize[1], (int) gridSize[2], gridSize[3]);
        Yardstick yardstick = source == null ? null : Yardstick.compile(source, folder, file, grid, threads);
        measure(list, grid, pool, yardstick);
        if (check && yardstick != null) {
            compare(list, grid, pool, yardstick);
        }
    }

    private void measure(LineFile list, Grid grid, ForkJoinPool pool, @Nullable Yardstick yardstick)
            throws IOException {
        Image ones = Image.filled(grid, 1);
        long before = Memory.retained();
        long start = System.nanoTime();
        EventStore store = load(list, ones, pool);
        double loadingS = 1e-9 * (System.nanoTime() - start);
        double bytesPerEvent =
                (Memory.retained() - before - Float.BYTES * (double) store.support().length) / store.events();
        Estimator em = new Estimator(store, ones, new EstimationSettings(PASSES_PER_ROUND, 1, lanes, 0), pool);
        Estimate warm = em.run(PassListener.SILENT, Progress.SILENT);
        print(
                "%,d events, %d x %d x %d voxels of %s mm, %d threads, %d lanes, %.1f planes per event, read and sorted in %.1f s",
                store.events(),
                grid.nx(),
                grid.ny(),
                grid.nz(),
                grid.spacingXMm(),
                threads,
                warm.lanes(),
                store.planes() / (double) store.events(),
                loadingS);
        double[][] table = new double[3][rounds];
        print("%-8s %8s %8s %8s   million events per second", "round", "plain", "tuned", "ours");
        for (int round = 0; round < rounds; round++) {
            Yardstick.Throughput other =
                    yardstick == null ? new Yardstick.Throughput(Double.NaN, Double.NaN) : yardstick.throughput();
            table[0][round] = other.plain();
            table[1][round] = other.tuned();
            table[2][round] = store.events()
                    / best(em.run(PassListener.SILENT, Progress.SILENT).passes())
                    / 1e6;
            print("%-8d %8.3f %8.3f %8.3f", round + 1, table[0][round], table[1][round], table[2][round]);
        }
        report(table);
        print(
                "memory: %.1f bytes per event, peak heap %.0f MiB, peak resident %s",
                bytesPerEvent, mebi(Memory.peakHeap()), peakResident());
    }

    private void report(double[][] table) {
        print("%-8s %8.3f %8.3f %8.3f", "median", median(table[0]), median(table[1]), median(table[2]));
        if (source != null) {
            double[] toPlain = new double[rounds];
            double[] toTuned = new double[rounds];
            for (int round = 0; round < rounds; round++) {
                toPlain[round] = table[2][round] / table[0][round];
                toTuned[round] = table[2][round] / table[1][round];
            }
            print(
                    "ours / plain %.2f, ours / tuned %.2f (medians of the rounds' ratios)",
                    median(toPlain), median(toTuned));
        }
    }

    /** Both programs get a sensitivity of 1 in the cylinder that fits into the grid and 0 outside. */
    private void compare(LineFile list, Grid grid, ForkJoinPool pool, Yardstick yardstick) throws IOException {
        double radiusMm = 0.5 * grid.spacingXMm() * Math.min(grid.nx(), grid.ny());
        Image sensitivity = FieldOfView.support(Image.filled(grid, 1), FieldOfView.cylinder(radiusMm));
        EventStore store = load(list, sensitivity, pool);
        EstimationSettings settings = new EstimationSettings(CHECKED_PASSES, 1, lanes, 0);
        float[] ours = new Estimator(store, sensitivity, settings, pool)
                .run(PassListener.SILENT, Progress.SILENT)
                .image()
                .values();
        float[] theirs = yardstick.image(sensitivity, CHECKED_PASSES).values();
        double largest = 0;
        for (float value : theirs) {
            largest = Math.max(largest, value);
        }
        double difference = 0;
        double squares = 0;
        int compared = 0;
        for (int j = 0; j < ours.length; j++) {
            if (theirs[j] > TINY * largest) {
                double relative = ours[j] / (double) theirs[j] - 1;
                difference = Math.max(difference, Math.abs(relative));
                squares += relative * relative;
                compared++;
            }
        }
        print(
                "check: after %d passes the images differ by at most %.1e (root mean square %.1e) in %,d voxels above %s of the maximum",
                CHECKED_PASSES, difference, Math.sqrt(squares / compared), compared, TINY);
    }

    private static EventStore load(LineFile list, Image support, ForkJoinPool pool) throws IOException {
        return EventLoader.load(
                list, list, support, EventSelection.ALL, 1, EventBackground.NONE, pool, Progress.SILENT);
    }

    private static double best(List<PassReport> passes) {
        return passes.stream().mapToDouble(PassReport::seconds).min().orElseThrow();
    }

    private static double median(double[] values) {
        double[] sorted = values.clone();
        Arrays.sort(sorted);
        return sorted[sorted.length / 2];
    }

    private static String peakResident() throws IOException {
        var peak = Memory.peakResident();
        return peak.isPresent() ? String.format(Locale.ROOT, "%.0f MiB", mebi(peak.getAsLong())) : "unknown";
    }

    private static double mebi(long bytes) {
        return bytes / (1024.0 * 1024.0);
    }

    private void print(String format, Object... values) {
        out.println(String.format(Locale.ROOT, format, values));
    }
}
