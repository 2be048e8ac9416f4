package org.raysheaf.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.io.UncheckedIOException;
import java.nio.file.NotDirectoryException;
import java.util.List;
import java.util.concurrent.Callable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.raysheaf.geometry.settings.InvalidSettingsException;
import org.raysheaf.geometry.settings.Problems;
import picocli.CommandLine;
import picocli.CommandLine.Command;

class FailuresTest {
    /** A verb that fails. */
    @Command(name = "fails")
    private static final class Fails implements Callable<Integer> {
        private final Exception failure;

        Fails(Exception failure) {
            this.failure = failure;
        }

        @Override
        public Integer call() throws Exception {
            throw failure;
        }
    }

    private static String said(Exception failure) {
        StringWriter err = new StringWriter();
        CommandLine line = new CommandLine(new Fails(failure))
                .setExecutionExceptionHandler(new Failures())
                .setErr(new PrintWriter(err, true));
        assertThat(line.execute()).isEqualTo(1);
        return err.toString();
    }

    @Test
    void filesAndSettingsAreTheUsers() {
        assertThat(said(new IOException("a.h5: odd"))).isEqualTo(String.format("raysheaf fails: a.h5: odd%n"));
        assertThat(said(new UncheckedIOException(new IOException("a.h5: odd")))).contains("a.h5: odd");
        assertThat(said(new InvalidSettingsException("grid", List.of(new Problems.Problem("voxel_mm", "too fine")))))
                .isEqualTo(String.format("raysheaf fails: grid: voxel_mm: too fine%n"));
        assertThat(said(new NotDirectoryException("a/b"))).contains("a/b: cannot be used (NotDirectoryException)");
    }

    @Test
    void everythingElseIsOurs() {
        for (Exception ours : List.of(
                new IllegalArgumentException("expected an element from 0 to 7, found 8"),
                new IllegalStateException("x"),
                new ArrayIndexOutOfBoundsException(3),
                new IOException())) {
            assertThat(said(ours))
                    .startsWith("raysheaf fails: this should not happen and is our mistake: " + ours)
                    .contains("--verbose");
        }
    }

    /** One line says what is wrong, one where help is; nothing else. */
    @ParameterizedTest
    @CsvSource(delimiter = '|', textBlock = """
            reconstuct x            | raysheaf: unknown verb reconstuct; the nearest is reconstruct | see: raysheaf --help
            siumlate x --out y      | raysheaf: unknown verb siumlate; the nearest is simulate      | see: raysheaf --help
            --threads 2 check x     | raysheaf: expected a verb, found the option --threads; options stand behind the verb | see: raysheaf --help
            --hepl                  | raysheaf: unknown option --hepl; the nearest is --help        | see: raysheaf --help
            reconstruct x --ou=y    | raysheaf: unknown option --ou; the nearest is --out           | see: raysheaf reconstruct --help
            check x --threads many  | raysheaf: Invalid value for option '--threads': 'many' is not an int | see: raysheaf check --help
            reconstruct x.h5        | raysheaf: expected --out DIR, a folder for the results            | see: raysheaf reconstruct --help
            demo x                  | raysheaf: expected no further argument, found x               | see: raysheaf demo --help
            check                   | raysheaf: Missing required parameter: 'FILE'                  | see: raysheaf check --help
            """)
    void usageErrorsAreOneLineAndAHint(String arguments, String trouble, String hint) {
        Calls.Outcome outcome = Calls.call(arguments.split(" ", -1));
        assertThat(outcome.exit()).isEqualTo(2);
        assertThat(outcome.out()).isEmpty();
        assertThat(outcome.err().lines()).containsExactly(trouble, hint);
    }

    @Test
    void asksForAVerb() {
        Calls.Outcome outcome = Calls.call();
        assertThat(outcome.exit()).isEqualTo(2);
        assertThat(outcome.err().lines()).hasSize(2).first().asString().contains("which verb?");
    }

    @Test
    void helpIsNoError() {
        assertThat(Calls.call("demo", "--help").exit()).isZero();
    }
}
