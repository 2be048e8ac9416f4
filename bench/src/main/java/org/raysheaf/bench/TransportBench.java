package org.raysheaf.bench;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.concurrent.Callable;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.transport.Acquisition;
import org.raysheaf.transport.Simulated;
import org.raysheaf.transport.Simulation;
import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/**
 * How many decays per second a simulation follows, how that grows with threads, and whether memory grows with the number of decays. All
 * physics of the acquisition is on; the list is thrown away, so that no disk is measured.
 */
@Command(
        name = "bench/run transport",
        description = "Speed and memory of a simulated acquisition.",
        mixinStandardHelpOptions = true,
        showDefaultValues = true)
public final class TransportBench implements Callable<Integer> {
    @Parameters(
            arity = "0..1",
            paramLabel = "ACQUISITION.yaml",
            description =
                    "What to simulate; by default the mouse-sized scatter phantom in heron-12 of the sample data.")
    private Path file = Path.of("sample-data", "acquisitions", "heron-mouse-scatter.yaml");

    @Option(names = "--threads", description = "Threads, beside one; by default all processors.")
    private int threads = Runtime.getRuntime().availableProcessors();

    @Option(names = "--rounds", defaultValue = "5", description = "Rounds, each with one thread and with all.")
    private int rounds;

    /** For picocli. */
    TransportBench() {}

    /**
     * Runs the bench.
     *
     * @param arguments see {@code --help}
     */
    public static void main(String[] arguments) {
        System.exit(new CommandLine(new TransportBench()).execute(arguments));
    }

    @Override
    public Integer call() throws IOException {
        Acquisition acquisition = DescriptionReader.read(file, "acquisition", Acquisition.class);
        Path systemFile = file.resolveSibling(acquisition.system());
        String text = Files.readString(systemFile, StandardCharsets.UTF_8);
        DetectorSystem system = new DetectorSystem(
                DescriptionReader.readText(text, systemFile.toString(), "system", SystemDescription.class));
        Phantom phantom = new Phantom(DescriptionReader.read(
                file.resolveSibling(acquisition.phantom()), "phantom", PhantomDescription.class));
        Simulation simulation = new Simulation(acquisition, phantom, system, text);
        ForkJoinPool one = new ForkJoinPool(1);
        ForkJoinPool all = new ForkJoinPool(threads);
        List<Double> alone = new ArrayList<>();
        List<Double> together = new ArrayList<>();
        List<Double> ratios = new ArrayList<>();
        decaysPerSecond(simulation, all); // warm-up
        for (int round = 0; round < rounds; round++) {
            alone.add(decaysPerSecond(simulation, one));
            together.add(decaysPerSecond(simulation, all));
            ratios.add(together.get(round) / alone.get(round));
        }
        print("1 thread", alone, "M decays/s", 1e-6);
        print(threads + " threads", together, "M decays/s", 1e-6);
        print("scaling", ratios, "times", 1);
        memory(acquisition, phantom, system, text, all);
        return 0;
    }

    private static double decaysPerSecond(Simulation simulation, ForkJoinPool pool) throws IOException {
        long begun = System.nanoTime();
        Simulated simulated = simulation.run(block -> {}, pool, Progress.SILENT);
        return simulated.decays() / ((System.nanoTime() - begun) * 1e-9);
    }

    private static void print(String what, List<Double> values, String unit, double scale) {
        List<Double> sorted = values.stream().sorted().toList();
        System.out.printf(
                Locale.ROOT,
                "%-12s %6.2f %s (%.2f to %.2f in %d rounds)%n",
                what,
                scale * sorted.get(sorted.size() / 2),
                unit,
                scale * sorted.get(0),
                scale * sorted.get(sorted.size() - 1),
                sorted.size());
    }

    /** Live memory after a collection in the middle of a run, for one length of acquisition and for four times as much. */
    private void memory(Acquisition a, Phantom phantom, DetectorSystem system, String text, ForkJoinPool pool)
            throws IOException {
        for (int times : new int[] {1, 4}) {
            Acquisition longer = new Acquisition(
                    a.system(),
                    a.phantom(),
                    a.nuclide(),
                    times * a.durationS(),
                    a.start(),
                    a.seed(),
                    a.maxEvents(),
                    a.output(),
                    a.energies(),
                    a.timeDifferences(),
                    a.truth(),
                    a.physics(),
                    a.pairing());
            long[] blocks = new long[1];
            long[] most = new long[1];
            Simulated simulated = new Simulation(longer, phantom, system, text)
                    .run(
                            block -> {
                                if (++blocks[0] % 8 == 0) {
                                    most[0] = Math.max(most[0], Memory.retained());
                                }
                            },
                            pool,
                            Progress.SILENT);
            System.out.printf(
                    Locale.ROOT,
                    "memory       %6.1f MiB live at most, %.1f M decays%n",
                    most[0] / 1048576.0,
                    simulated.decays() * 1e-6);
        }
    }
}
