package org.raysheaf.app;

import java.io.ByteArrayOutputStream;
import java.io.PrintStream;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.Stream;
import picocli.CommandLine;

/** Calls verbs as a user does, within the test's own Java. */
final class Calls {
    private Calls() {}

    /** What a call printed and how it ended. */
    record Outcome(int exit, String out, String err) {}

    /** Calls with these arguments and no others. */
    static Outcome call(String... arguments) {
        StringWriter err = new StringWriter();
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        PrintStream before = System.out;
        PrintStream out = new PrintStream(bytes, true, StandardCharsets.UTF_8);
        System.setOut(out);
        try {
            CommandLine line = Raysheaf.commandLine();
            line.setErr(new PrintWriter(err, true));
            line.setOut(new PrintWriter(out, true, StandardCharsets.UTF_8));
            line.getSubcommands().values().forEach(verb -> verb.setErr(new PrintWriter(err, true)));
            int exit = line.execute(arguments);
            return new Outcome(exit, bytes.toString(StandardCharsets.UTF_8), err.toString());
        } finally {
            System.setOut(before);
        }
    }

    /** Calls without progress, keeping responses in a folder. */
    static Outcome work(Path cache, Object... arguments) {
        List<String> all = Stream.concat(
                        Stream.of(arguments).map(Object::toString), Stream.of("--quiet", "--cache", cache.toString()))
                .toList();
        return call(all.toArray(String[]::new));
    }
}
