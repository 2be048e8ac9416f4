package org.raysheaf.io.list;

import static org.assertj.core.api.Assertions.assertThat;
import static org.junit.jupiter.api.Assumptions.assumeTrue;

import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Objects;
import java.util.concurrent.TimeUnit;

/** Runs outside readers and writers of HDF5 where they are installed. */
final class Python {
    private static final String PYTHON =
            "/usr/bin/python3"; // where the operating system keeps the one with its own packages
    private static final long LONGEST_S = 60;

    private Python() {}

    /** Skips the test, with the reason, where Python has no h5py. */
    static void assumeH5py() {
        assumeTrue(works(PYTHON, "-c", "import h5py"), "needs " + PYTHON + " with h5py (Debian: python3-h5py)");
    }

    /** Skips the test, with the reason, where h5dump is missing. */
    static void assumeH5dump() {
        assumeTrue(works("h5dump", "--version"), "needs h5dump (Debian: hdf5-tools)");
    }

    private static boolean works(String... command) {
        try {
            run(List.of(command));
            return true;
        } catch (IOException | AssertionError e) {
            return false;
        }
    }

    /** Runs a script from the test resources beside this class and returns what it printed. */
    static String script(Path folder, String name, Path argument) throws IOException {
        Path script = folder.resolve(name);
        try (InputStream stored = Python.class.getResourceAsStream(name)) {
            Files.write(script, Objects.requireNonNull(stored).readAllBytes());
        }
        return run(List.of(PYTHON, script.toString(), argument.toString()));
    }

    /** Runs a command to its end, requires success, and returns what it printed. */
    static String run(List<String> command) throws IOException {
        Process process = new ProcessBuilder(new ArrayList<>(command))
                .redirectErrorStream(true)
                .start();
        String printed = new String(process.getInputStream().readAllBytes(), StandardCharsets.UTF_8);
        try {
            assertThat(process.waitFor(LONGEST_S, TimeUnit.SECONDS)).isTrue();
        } catch (InterruptedException e) {
            throw new IOException("interrupted while waiting for " + command, e);
        }
        assertThat(process.exitValue()).as(printed).isZero();
        return printed;
    }
}
