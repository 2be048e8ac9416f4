package org.raysheaf.bench;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.concurrent.Callable;
import java.util.stream.Stream;
import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;

/**
 * What all corrections together add to the time of a reconstruction: the same list with all and with none, in turn, as a user calls the program.
 * The cylinder of water that the corrections are proved on, in heron-12, with scatter and random coincidences in its list. What is kept once for each
 * system is made beforehand; the sensitivity, which attenuation makes anew for each object, is not.
 */
@Command(
        name = "bench/run corrections",
        description = "What all corrections together add to the time of a reconstruction.",
        mixinStandardHelpOptions = true,
        showDefaultValues = true)
public final class CorrectionsBench implements Callable<Integer> {
    @Option(names = "--events", defaultValue = "5000000", description = "Events of the list.")
    private long events;

    @Option(names = "--passes", defaultValue = "10", description = "Passes of the reconstruction.")
    private int passes;

    @Option(names = "--rounds", defaultValue = "3", description = "Rounds, each with none and with all.")
    private int rounds;

    @Option(
            names = "--folder",
            defaultValue = "bench/target/corrections",
            description = "Where list, cache and images go; a list that is there is taken.")
    private Path folder = Path.of("");

    private final Path home = Path.of(System.getProperty("raysheaf.home", "."));

    /** For picocli. */
    CorrectionsBench() {}

    /**
     * Runs the bench.
     *
     * @param arguments see {@code --help}
     */
    public static void main(String[] arguments) {
        System.exit(new CommandLine(new CorrectionsBench()).execute(arguments));
    }

    @Override
    public Integer call() throws IOException, InterruptedException {
        Files.createDirectories(folder);
        Files.writeString(folder.resolve("cylinder.yaml"), """
                raysheaf: phantom/1
                name: cylinder
                parts:
                  - {name: body, shape: {kind: cylinder, radius_mm: 12.5, length_mm: 70}, concentration_kBq_per_mL: 60}
                """);
        Files.writeString(folder.resolve("run.yaml"), """
                raysheaf: acquisition/1
                system: %s
                phantom: cylinder.yaml
                nuclide: F-18
                start: 2026-12-01T09:00:00Z
                duration_s: 20000
                max_events: %d
                seed: 77
                pairing: {window_ns: 3, lowest_keV: 350, highest_keV: 650, delay_ns: 200}
                """.formatted(
                        home.resolve("sample-data/systems/heron-12.yaml").toAbsolutePath(), events));
        Path list = folder.resolve("list-" + events + ".h5");
        if (!Files.exists(list)) {
            run("simulate", "run.yaml", "--out", list.getFileName().toString());
        }
        plan("none", "window: false, randoms: none, scatter: false, losses: false");
        plan("all", "attenuation: {phantom: cylinder.yaml}, randoms: delayed");
        run("reconstruct", "all.yaml", "--out", "all", "--replace"); // fills the cache, and that of the disk
        List<Double> none = new ArrayList<>();
        List<Double> all = new ArrayList<>();
        List<Double> added = new ArrayList<>();
        for (int round = 0; round < rounds; round++) {
            none.add(reconstruct("none"));
            all.add(reconstruct("all"));
            added.add(100 * (all.get(round) / none.get(round) - 1));
        }
        print("none", none, "s");
        print("all", all, "s");
        print("added", added, "%");
        return 0;
    }

    private void plan(String name, String corrections) throws IOException {
        Files.writeString(folder.resolve(name + ".yaml"), """
                raysheaf: reconstruction/1
                list: list-%d.h5
                grid: {voxel_mm: 0.925, radius_mm: 20, length_mm: 62}
                estimation: {passes: %d, subsets: 1}
                corrections: {%s}
                """.formatted(events, passes, corrections));
    }

    /** Seconds of a call that finds everything of the system in the cache, but no sensitivity. */
    private double reconstruct(String plan) throws IOException, InterruptedException {
        try (Stream<Path> kept = Files.list(folder.resolve("cache"))) {
            for (Path file : kept.toList()) {
                if (file.getFileName().toString().startsWith("sensitivity")) {
                    Files.delete(file);
                }
            }
        }
        long begun = System.nanoTime();
        run("reconstruct", plan + ".yaml", "--out", plan, "--replace");
        return (System.nanoTime() - begun) * 1e-9;
    }

    private void run(String... arguments) throws IOException, InterruptedException {
        List<String> command = new ArrayList<>();
        command.add(home.resolve("recon/raysheaf").toAbsolutePath().toString());
        command.addAll(List.of(arguments));
        command.addAll(List.of("--quiet", "--cache", "cache"));
        Path output = folder.resolve("output.txt");
        int exit = new ProcessBuilder(command)
                .directory(folder.toFile())
                .redirectErrorStream(true)
                .redirectOutput(output.toFile())
                .start()
                .waitFor();
        if (exit != 0) {
            throw new IOException(String.join(" ", command) + ": ended with " + exit + ", see " + output);
        }
    }

    private static void print(String what, List<Double> values, String unit) {
        List<Double> sorted = values.stream().sorted().toList();
        System.out.printf(
                Locale.ROOT,
                "%-6s %6.1f %s (%.1f to %.1f in %d rounds)%n",
                what,
                sorted.get(sorted.size() / 2),
                unit,
                sorted.get(0),
                sorted.get(sorted.size() - 1),
                sorted.size());
    }
}
