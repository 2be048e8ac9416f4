package org.raysheaf.io;

import static org.junit.jupiter.api.Assumptions.assumeTrue;

import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.List;
import java.util.Objects;
import java.util.concurrent.TimeUnit;

/** Lets other people's programs read and write files, so that tests do not only agree with themselves. */
public final class OutsideReader {
    /** Where the operating system keeps the Python that has its own packages. */
    private static final String PYTHON = "/usr/bin/python3";

    private static final long LONGEST_S = 60;

    private OutsideReader() {}

    /** Skips the calling test, with a reason, where Python or one of the modules is missing. */
    public static void assumePython(String... modules) {
        String imports = "import " + String.join(", ", modules);
        assumeTrue(works(PYTHON, "-c", imports), "needs " + PYTHON + " with " + imports + " as an outside reader");
    }

    /** Skips the calling test, with a reason, where h5dump is missing. */
    public static void assumeH5dump() {
        assumeTrue(works("h5dump", "--version"), "needs h5dump (Debian: hdf5-tools) as an outside reader");
    }

    private static boolean works(String... command) {
        try {
            run(List.of(command));
            return true;
        } catch (IOException | AssertionError e) {
            return false;
        }
    }

    /** Runs a script and returns what it printed; fails if it fails. */
    public static String python(String script, Object... arguments) throws IOException {
        List<String> command = new ArrayList<>(List.of(PYTHON, "-c", script));
        for (Object argument : arguments) {
            command.add(argument.toString());
        }
        return run(command);
    }

    /** The same with a script from the test resources beside a class. */
    public static String pythonFile(Class<?> beside, String name, Object... arguments) throws IOException {
        try (InputStream stored = beside.getResourceAsStream(name)) {
            byte[] bytes = Objects.requireNonNull(stored, name).readAllBytes();
            return python(new String(bytes, StandardCharsets.UTF_8), arguments);
        }
    }

    /** Runs a command to its end and returns what it printed; fails if it fails. */
    public static String run(List<String> command) throws IOException {
        Process process = new ProcessBuilder(command).redirectErrorStream(true).start();
        String printed = new String(process.getInputStream().readAllBytes(), StandardCharsets.UTF_8);
        try {
            if (!process.waitFor(LONGEST_S, TimeUnit.SECONDS) || process.exitValue() != 0) {
                throw new AssertionError(command.get(0) + " failed: " + printed);
            }
        } catch (InterruptedException e) {
            throw new IOException("interrupted while waiting for " + command, e);
        }
        return printed;
    }
}
