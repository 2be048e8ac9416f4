package org.raysheaf.io;

import static org.junit.jupiter.api.Assumptions.assumeTrue;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;

/** Lets other people's programs read and write files, so that tests do not only agree with themselves. */
public final class OutsideReader {
    private static final String PYTHON = "/usr/bin/python3";

    private OutsideReader() {}

    /** Skips the calling test, with a reason, where Python or one of the modules is missing. */
    public static void assumePython(String... modules) throws IOException, InterruptedException {
        assumeTrue(Files.isExecutable(Path.of(PYTHON)), "needs " + PYTHON + " as an outside reader");
        for (String module : modules) {
            Process probe = new ProcessBuilder(PYTHON, "-c", "import " + module)
                    .redirectErrorStream(true)
                    .redirectOutput(ProcessBuilder.Redirect.DISCARD)
                    .start();
            assumeTrue(probe.waitFor() == 0, "needs the Python module " + module + " as an outside reader");
        }
    }

    /** Runs a script and returns what it printed; fails if it fails. */
    public static String python(String script, Object... arguments) throws IOException, InterruptedException {
        List<String> command = new ArrayList<>(List.of(PYTHON, "-c", script));
        for (Object argument : arguments) {
            command.add(argument.toString());
        }
        Process process = new ProcessBuilder(command).redirectErrorStream(true).start();
        String printed = new String(process.getInputStream().readAllBytes(), StandardCharsets.UTF_8);
        if (!process.waitFor(1, TimeUnit.MINUTES) || process.exitValue() != 0) {
            throw new AssertionError("Python failed: " + printed);
        }
        return printed;
    }
}
