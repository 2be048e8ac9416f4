package org.raysheaf.app;

import java.io.IOException;
import java.io.PrintStream;
import java.nio.file.Path;
import java.util.Optional;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.cache.Cache;
import org.raysheaf.io.file.AtomicFile;
import org.raysheaf.io.result.ResultFile;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Option;
import picocli.CommandLine.ParameterException;
import picocli.CommandLine.Spec;

/** The options that all verbs share, and what they stand for: threads, progress, cache, what may be overwritten. */
final class Common {
    static final String CAUTION = "Research use only: not for diagnosis or patient care.";

    @Option(
            names = "--threads",
            paramLabel = "N",
            description = "Threads, 1 to 1024; results do not depend on it. Default: one per processor.")
    private int threads;

    @Option(
            names = "--lanes",
            paramLabel = "N",
            description =
                    "Accumulator images, 1 to 64; results depend on it in the last digits. Default: from the problem.")
    private int lanes;

    @Option(
            names = "--seed",
            paramLabel = "N",
            description = "Start of all random numbers, in place of the one in the description.")
    private @Nullable Long seed;

    @Option(
            names = "--cache",
            paramLabel = "DIR",
            description =
                    "Where to keep responses and sensitivities. Default: $XDG_CACHE_HOME/raysheaf or ~/.cache/raysheaf.")
    private @Nullable Path cacheFolder;

    @Option(names = "--json", description = "Print one JSON object instead of text.")
    private boolean json;

    @Option(names = "--quiet", description = "No progress on the error stream.")
    private boolean quiet;

    @Option(names = "--verbose", description = "A stack trace with every error.")
    private boolean verbose;

    @Option(names = "--replace", description = "Overwrite results that are already there.")
    private boolean replace;

    @Spec(Spec.Target.MIXEE)
    private CommandSpec verb;

    Common() {}

    ForkJoinPool pool() {
        within("--threads", threads, 1024);
        within("--lanes", lanes, 64);
        return new ForkJoinPool(threads > 0 ? threads : Runtime.getRuntime().availableProcessors());
    }

    private void within(String option, int value, int most) {
        if (value < 0 || value > most) {
            throw misused(option + ": expected a number from 1 to " + most + ", found " + value);
        }
    }

    /** A call that the parser takes but that makes no sense; to be thrown. */
    ParameterException misused(String message) {
        return new ParameterException(verb.commandLine(), message);
    }

    int lanes() {
        return lanes;
    }

    Optional<Long> seed() {
        return Optional.ofNullable(seed);
    }

    boolean verbose() {
        return verbose;
    }

    boolean replace() {
        return replace;
    }

    Progress progress() {
        return quiet ? Progress.SILENT : new ConsoleProgress(System.err, onTerminal());
    }

    /** Whether progress goes to a terminal, where a bar can redraw itself. */
    boolean onTerminal() {
        return Boolean.getBoolean("raysheaf.terminal");
    }

    /** Something worth knowing that is no result. */
    void note(String text) {
        if (!quiet) {
            System.err.println(text);
        }
    }

    Cache cache() {
        if (cacheFolder != null) {
            return new Cache(cacheFolder);
        }
        String base = System.getenv("XDG_CACHE_HOME");
        Path home = Path.of(System.getProperty("user.home", "."), ".cache");
        return new Cache((base == null || base.isEmpty() ? home : Path.of(base)).resolve("raysheaf"));
    }

    void keep(Cache cache, String kind, String digest, float[] values) {
        try {
            cache.keep(kind, digest, values);
        } catch (IOException e) {
            note("the " + kind + " could not be kept for next time: " + e.getMessage());
        }
    }

    /** Refuses early what a long run could not write at its end. */
    void requireFree(Path target) throws IOException {
        AtomicFile.requireFree(target, replace);
    }

    /** Prints a result: an object as JSON if that was asked for, else the lines. */
    void print(Object results, Iterable<String> lines) {
        PrintStream out = System.out;
        if (json) {
            out.print(ResultFile.render(results));
        } else {
            lines.forEach(out::println);
        }
        out.flush();
    }
}
