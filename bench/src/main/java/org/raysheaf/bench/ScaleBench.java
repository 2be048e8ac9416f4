package org.raysheaf.bench;

import java.io.IOException;
import java.nio.file.Path;
import java.util.Locale;
import java.util.concurrent.Callable;
import java.util.concurrent.ForkJoinPool;
import java.util.concurrent.atomic.AtomicLong;
import org.raysheaf.engine.EstimationSettings;
import org.raysheaf.engine.Estimator;
import org.raysheaf.engine.PassListener;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.engine.ray.Storage;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.scratch.ScratchFolder;
import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;

/** How loading, a pass and memory grow with the number of events, with the events in memory or in a scratch file. */
@Command(
        name = "bench/run scale",
        description = "Time and memory against the number of events, in memory or on disk.",
        mixinStandardHelpOptions = true,
        showDefaultValues = true)
public final class ScaleBench implements Callable<Integer> {
    @Option(
            names = "--lines",
            split = ",",
            defaultValue = "1000000,10000000,100000000",
            description = "Numbers of events.")
    private int[] sizes = {};

    @Option(
            names = "--grid",
            arity = "4",
            paramLabel = "N",
            description = "Voxels along x, y and z, and their size in mm.")
    private double[] gridSize = {128, 128, 192, 0.5};

    @Option(
            names = "--memory",
            paramLabel = "MB",
            defaultValue = "100",
            description = "Events that take more than this go to the scratch file.")
    private long memoryMb;

    @Option(names = "--scratch", paramLabel = "DIR", defaultValue = ".", description = "Where the scratch file lies.")
    private Path scratch = Path.of(".");

    @Option(names = "--threads", description = "Threads; by default all processors.")
    private int threads = Runtime.getRuntime().availableProcessors();

    private final AtomicLong peakAnonymous = new AtomicLong();

    /** For picocli. */
    ScaleBench() {}

    /**
     * Runs the bench.
     *
     * @param arguments see {@code --help}
     */
    public static void main(String[] arguments) {
        System.exit(new CommandLine(new ScaleBench()).execute(arguments));
    }

    @Override
    public Integer call() throws IOException {
        Grid grid = Grid.centred((int) gridSize[0], (int) gridSize[1], (int) gridSize[2], gridSize[3]);
        ForkJoinPool pool = new ForkJoinPool(threads);
        System.out.printf(
                Locale.ROOT,
                "%12s %8s %10s %10s %14s   heap at most %.0f MiB%n",
                "events",
                "where",
                "load s",
                "pass s",
                "peak anon MiB",
                Runtime.getRuntime().maxMemory() / 1048576.0);
        for (int size : sizes) {
            measure(size, grid, pool);
        }
        return 0;
    }

    private void measure(int size, Grid grid, ForkJoinPool pool) throws IOException {
        Progress watch = new Progress() {
            @Override
            public void advance(long amount) {
                peakAnonymous.accumulateAndGet(Memory.anonymous(), Math::max);
            }
        };
        peakAnonymous.set(0);
        Image ones = Image.filled(grid, 1);
        RingList list = new RingList(new RingLines(42, 62), size);
        Storage storage = new Storage(memoryMb << 20, new ScratchFolder(scratch));
        long begun = System.nanoTime();
        try (EventStore store =
                EventLoader.load(list, list, ones, EventSelection.ALL, 1, EventBackground.NONE, storage, pool, watch)) {
            double loadS = 1e-9 * (System.nanoTime() - begun);
            double passS = new Estimator(store, ones, EstimationSettings.mlem(2), pool)
                    .run(PassListener.SILENT, watch).passes().stream()
                            .mapToDouble(pass -> pass.seconds())
                            .min()
                            .orElseThrow();
            System.out.printf(
                    Locale.ROOT,
                    "%,12d %8s %10.1f %10.1f %14.0f%n",
                    store.events(),
                    24L * size > memoryMb << 20 ? "disk" : "memory",
                    loadS,
                    passS,
                    peakAnonymous.get() / 1048576.0);
        }
    }
}
