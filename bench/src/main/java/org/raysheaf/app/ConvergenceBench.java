package org.raysheaf.app;

import java.io.IOException;
import java.io.PrintStream;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Objects;
import java.util.concurrent.Callable;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.EstimationSettings;
import org.raysheaf.engine.EstimationSettings.Method;
import org.raysheaf.engine.Estimator;
import org.raysheaf.engine.PassListener;
import org.raysheaf.engine.prior.Prior;
import org.raysheaf.engine.prior.RelativeDifferencePrior;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.engine.ray.Storage;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.io.list.ListFile;
import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;

/**
 * How far each method is from its end after each pass over the data, on the demo's list with the demo's corrections. The end of methods with a
 * prior is one and the same image; that of expectation maximisation, which knows no prior, is another, so its distances show only how far its
 * images are from the one wanted. In the package of the program, because it takes the program's own model of the list.
 */
@Command(
        name = "bench/run converge",
        description = "Distance to the converged image after each pass, method by method.",
        mixinStandardHelpOptions = true,
        showDefaultValues = true)
public final class ConvergenceBench implements Callable<Integer> {
    @Option(names = "--plan", paramLabel = "RECONSTRUCTION.yaml", description = "List, grid and corrections.")
    private Path plan = Path.of("sample-data/reconstructions/demo.yaml");

    @Option(names = "--phantom", paramLabel = "PHANTOM.yaml", description = "Its parts are the regions.")
    private Path phantom = Path.of("sample-data/phantoms/rods.yaml");

    @Option(names = "--strength", description = "Strength of the relative-difference prior.")
    private double strength = 0.1;

    @Option(names = "--passes", description = "Passes of each method.")
    private int passes = 12;

    @Option(names = "--methods", split = ",", paramLabel = "METHOD:SUBSETS", description = "What to run.")
    private List<String> methods = List.of("variance_reduced:32", "bsrem:32", "em:32", "em:1");

    @Option(
            names = "--end",
            split = ",",
            paramLabel = "METHOD:SUBSETS:PASSES",
            description = "What makes the converged image; if there are two, their distance is printed too.")
    private List<String> ends = List.of("variance_reduced:32:100", "bsrem:32:300");

    @Option(names = "--threads", description = "Threads; by default all processors.")
    private int threads = Runtime.getRuntime().availableProcessors();

    private final PrintStream out = System.out;

    /** For picocli. */
    public ConvergenceBench() {}

    /**
     * Runs the bench.
     *
     * @param arguments see --help
     */
    public static void main(String[] arguments) {
        System.exit(new CommandLine(new ConvergenceBench()).execute(arguments));
    }

    @Override
    public Integer call() throws IOException {
        ForkJoinPool pool = new ForkJoinPool(threads);
        try {
            measure(Data.of(plan, phantom, strength, pool));
        } finally {
            pool.shutdown();
        }
        return 0;
    }

    private void measure(Data data) throws IOException {
        Image end = null;
        double top = Double.NEGATIVE_INFINITY;
        for (String how : ends) {
            String[] words = how.split(":", -1);
            Run run = new Run(data, words[0], Integer.parseInt(words[1]), Integer.parseInt(words[2]));
            List<Image> last = run.images(false);
            Image image = last.get(last.size() - 1);
            double value = data.objective(image);
            out.printf(Locale.ROOT, "%s: objective %.4f%n", how, value);
            if (end != null) {
                out.printf(Locale.ROOT, "the two ends: %s%n", data.distance(image, end));
            } else {
                end = image;
            }
            top = Math.max(top, value);
        }
        Image converged = Objects.requireNonNull(end);
        double range = top - data.objective(data.uniform());
        out.printf(Locale.ROOT, "the objective rises by %.1f from a uniform image%n", range);
        for (String method : methods) {
            String[] words = method.split(":", -1);
            int pass = 0;
            for (Image image : new Run(data, words[0], Integer.parseInt(words[1]), passes).images(true)) {
                double gap = (top - data.objective(image)) / range;
                out.printf(
                        Locale.ROOT,
                        "%-20s pass %3d  gap %9.2e  %s%n",
                        method,
                        ++pass,
                        gap,
                        data.distance(image, converged));
            }
        }
    }

    /** A list with its model, and the regions of a phantom in its grid. */
    @SuppressWarnings("ArrayRecordComponent") // nobody compares them
    private record Data(
            ListFile list,
            CorrectedModel model,
            Phantom parts,
            int[] regions,
            Prior prior,
            EventStore store,
            ForkJoinPool pool) {
        static Data of(Path plan, Path phantom, double strength, ForkJoinPool pool) throws IOException {
            Common common = new Common();
            ReconstructionPlan described = DescriptionReader.read(plan, "reconstruction", ReconstructionPlan.class);
            Path file = plan.resolveSibling(Objects.requireNonNull(described.list(), "the plan names no list"));
            ListFile opened = ListFile.open(file);
            Systems systems =
                    SystemOfList.of(opened.header(), file, described.systemBeside(plan), common, pool, Progress.SILENT);
            ListFile list = opened.withElements(systems.system().elements());
            Grid grid = described.grid().gridFor(systems.system());
            CorrectedModel model = CorrectedModel.of(list, systems, described, plan, grid, common, pool);
            Phantom parts = Phantoms.read(phantom);
            int[] regions = new int[grid.voxels()];
            for (int x = 0; x < grid.nx(); x++) {
                for (int y = 0; y < grid.ny(); y++) {
                    for (int z = 0; z < grid.nz(); z++) {
                        Vector3 centre = grid.centre(x, y, z);
                        regions[grid.index(x, y, z)] = parts.regionAt(centre.x(), centre.y(), centre.z());
                    }
                }
            }
            return new Data(
                    list,
                    model,
                    parts,
                    regions,
                    new RelativeDifferencePrior(strength, 2),
                    load(list, model, 1, pool),
                    pool);
        }

        static EventStore load(ListFile list, CorrectedModel model, int subsets, ForkJoinPool pool) throws IOException {
            return EventLoader.load(
                    list,
                    model.sheaves(),
                    model.support(),
                    EventSelection.ALL,
                    subsets,
                    model.background(),
                    Storage.MEMORY,
                    pool,
                    Progress.SILENT);
        }

        double objective(Image image) {
            EstimationSettings settings = new EstimationSettings(1, 1, 4, 0, Method.BSREM, prior, null, null, null);
            return new Estimator(store, model.counts(), settings, pool).objective(image);
        }

        Image uniform() {
            Image image = model.support().copy();
            double expected = 0;
            for (int j = 0; j < image.values().length; j++) {
                expected += image.values()[j] * model.counts().values()[j];
            }
            for (int j = 0; j < image.values().length; j++) {
                image.values()[j] *= (float) (store.events() / expected);
            }
            return image;
        }

        String distance(Image image, Image end) {
            double[] sums = new double[parts.regions()];
            double[] ends = new double[sums.length];
            double squares = 0;
            double total = 0;
            int inside = 0;
            for (int j = 0; j < regions.length; j++) {
                if (regions[j] >= 0) {
                    double difference = image.values()[j] - end.values()[j];
                    squares += difference * difference;
                    total += end.values()[j];
                    inside++;
                    sums[regions[j]] += image.values()[j];
                    ends[regions[j]] += end.values()[j];
                }
            }
            double worst = 0;
            List<String> each = new ArrayList<>();
            for (int r = 0; r < sums.length; r++) {
                double off = 100 * (sums[r] / ends[r] - 1);
                worst = Math.max(worst, Math.abs(off));
                each.add(String.format(Locale.ROOT, "%.2f", off));
            }
            return String.format(
                    Locale.ROOT,
                    "rms %7.3f %% of the mean, regions off by at most %6.3f %% %s",
                    100 * Math.sqrt(squares / inside) / (total / inside),
                    worst,
                    each);
        }
    }

    private record Run(Data data, String method, int subsets, int count) {
        /** The image after each pass, or the last one only. */
        List<Image> images(boolean all) throws IOException {
            Method how = Method.valueOf(method.toUpperCase(Locale.ROOT));
            @Nullable Prior prior = how == Method.EM ? null : data.prior();
            EstimationSettings settings = new EstimationSettings(count, subsets, 0, 0, how, prior, null, null, null);
            List<Image> images = new ArrayList<>();
            PassListener listener = (pass, image) -> {
                if (all) {
                    images.add(image.get());
                }
            };
            try (EventStore store = Data.load(data.list(), data.model(), subsets, data.pool())) {
                Image last = new Estimator(store, data.model().counts(), settings, data.pool())
                        .run(listener, Progress.SILENT)
                        .image();
                if (!all) {
                    images.add(last);
                }
            }
            return images;
        }
    }
}
