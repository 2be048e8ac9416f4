package org.raysheaf.bench;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.Locale;
import java.util.SplittableRandom;
import java.util.concurrent.Callable;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.engine.EstimationSettings;
import org.raysheaf.engine.Estimator;
import org.raysheaf.engine.FieldOfView;
import org.raysheaf.engine.PassListener;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafMaker;
import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;

/**
 * What times of flight make of the speed of a pass: the same lines with and without, in one Java machine, in turns. A uniform cylinder of 300 mm
 * in a ring of 400 mm radius, 200 mm long, voxels of 2 mm.
 */
@Command(
        name = "bench/run flight",
        description = "Throughput of list-mode passes with and without times of flight.",
        mixinStandardHelpOptions = true,
        showDefaultValues = true)
public final class FlightBench implements Callable<Integer> {
    private static final double RING_MM = 400;
    private static final double BODY_MM = 150;
    private static final double LENGTH_MM = 200;
    /** Passes of each kind in a round, in turns; the best of each counts. */
    private static final int TURNS = 5;

    private static final double FWHM_PER_SD = 2.354820045;
    private static final double MM_PER_PS = 0.299792458 / 2;

    @Option(names = "--lines", defaultValue = "4000000", description = "How many lines.")
    private int lines;

    @Option(
            names = "--difference-fwhm-ps",
            defaultValue = "200",
            description = "Full width at half maximum of the time difference.")
    private double fwhmPs;

    @Option(names = "--rounds", defaultValue = "5", description = "Rounds to take the median of.")
    private int rounds;

    @Option(names = "--threads", description = "Threads; by default all processors.")
    private int threads = Runtime.getRuntime().availableProcessors();

    /** For picocli. */
    public FlightBench() {}

    /**
     * Runs the bench.
     *
     * @param arguments see --help
     */
    public static void main(String[] arguments) {
        System.exit(new CommandLine(new FlightBench()).execute(arguments));
    }

    @Override
    public Integer call() throws IOException {
        Path file = Files.createTempFile("raysheaf-bench", ".f32");
        ForkJoinPool pool = new ForkJoinPool(threads);
        try {
            new RingLines(RING_MM, LENGTH_MM, BODY_MM / RING_MM).write(file, lines, 1);
            run(LineFile.open(file), pool);
        } finally {
            pool.shutdown();
            Files.delete(file);
        }
        return 0;
    }

    private void run(LineFile list, ForkJoinPool pool) throws IOException {
        Image ones = Image.filled(Grid.centred(150, 150, 100, 2), 1);
        Image support = FieldOfView.support(ones, FieldOfView.cylinder(BODY_MM));
        EventStore plain = load(list, list, support, pool);
        EventStore timed = load(list, new Timed(list, fwhmPs / FWHM_PER_SD * MM_PER_PS), support, pool);
        EstimationSettings settings = EstimationSettings.mlem(1);
        Estimator[] both = {new Estimator(plain, ones, settings, pool), new Estimator(timed, ones, settings, pool)};
        EventStore[] stores = {plain, timed};
        print(
                "%,d and %,d events, %.1f and %.1f planes per event, %d threads",
                plain.events(),
                timed.events(),
                plain.planes() / (double) plain.events(),
                timed.planes() / (double) timed.events(),
                threads);
        double[][] speeds = new double[3][rounds];
        for (int round = -1; round < rounds; round++) {
            double[] speed = new double[2];
            for (int turn = 0; turn < TURNS; turn++) {
                for (int i = 0; i < 2; i++) {
                    double seconds = both[i].run(PassListener.SILENT, Progress.SILENT)
                            .passes()
                            .get(0)
                            .seconds();
                    speed[i] = Math.max(speed[i], stores[i].events() / seconds / 1e6);
                }
            }
            if (round >= 0) { // the first warms up
                speeds[0][round] = speed[0];
                speeds[1][round] = speed[1];
                speeds[2][round] = speed[1] / speed[0];
                print(
                        "round %d: %.3f without, %.3f with times, million events per second",
                        round + 1, speed[0], speed[1]);
            }
        }
        print(
                "median: %.3f without, %.3f with times; ratio %.2f (median of the rounds' ratios, %.2f to %.2f)",
                median(speeds[0]),
                median(speeds[1]),
                median(speeds[2]),
                Arrays.stream(speeds[2]).min().orElseThrow(),
                Arrays.stream(speeds[2]).max().orElseThrow());
    }

    private static EventStore load(LineFile list, SheafMaker maker, Image support, ForkJoinPool pool)
            throws IOException {
        return EventLoader.load(
                list, maker, support, EventSelection.ALL, 1, EventBackground.NONE, pool, Progress.SILENT);
    }

    private static double median(double[] values) {
        double[] sorted = values.clone();
        Arrays.sort(sorted);
        return sorted[sorted.length / 2];
    }

    private static void print(String format, Object... values) {
        System.out.println(String.format(Locale.ROOT, format, values));
    }

    /** Lines with times: on a given line, decays of a uniform body are uniform along what it shares with the body. */
    private record Timed(LineFile lines, double sdMm) implements SheafMaker {
        @Override
        public java.util.Set<Attribute> attributes() {
            return lines.attributes();
        }

        @Override
        public int raysPerSheaf() {
            return 1;
        }

        @Override
        public SheafBundle.WeightLaw law() {
            return SheafBundle.WeightLaw.GAUSSIAN;
        }

        @Override
        public void make(EventBlock events, SheafBundle out, EventTally tally) {
            int first = out.size();
            lines.make(events, out, tally);
            for (int k = first; k < out.size(); k++) {
                place(out, k, new SplittableRandom(events.ints(Attribute.ELEMENT_A)[k - first]));
            }
        }

        private void place(SheafBundle out, int k, SplittableRandom random) {
            float[] r = out.rays();
            double dx = r[6 * k + 3] - r[6 * k];
            double dy = r[6 * k + 4] - r[6 * k + 1];
            double dz = r[6 * k + 5] - r[6 * k + 2];
            double across = dx * dx + dy * dy;
            double half = (r[6 * k] * dx + r[6 * k + 1] * dy) / across;
            double outside =
                    (r[6 * k] * (double) r[6 * k] + r[6 * k + 1] * (double) r[6 * k + 1] - BODY_MM * BODY_MM) / across;
            double chord = Math.sqrt(Math.max(0, half * half - outside));
            double decay = -half + chord * (2 * random.nextDouble() - 1);
            double normal =
                    Math.sqrt(-2 * Math.log(1 - random.nextDouble())) * Math.cos(2 * Math.PI * random.nextDouble());
            out.place(k, decay * Math.sqrt(across + dz * dz) + sdMm * normal, sdMm);
        }
    }
}
