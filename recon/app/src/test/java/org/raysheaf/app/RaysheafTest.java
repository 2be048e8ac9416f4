package org.raysheaf.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.PrintWriter;
import java.io.StringWriter;
import org.junit.jupiter.api.Test;
import picocli.CommandLine;

class RaysheafTest {

    private final StringWriter out = new StringWriter();
    private final StringWriter err = new StringWriter();
    private final CommandLine raysheaf =
            Raysheaf.commandLine().setOut(new PrintWriter(out)).setErr(new PrintWriter(err));

    @Test
    void tellsItsVersionOnStandardOutput() {
        assertThat(raysheaf.execute("--version")).isZero();
        assertThat(out.toString()).startsWith("raysheaf ");
        assertThat(err.toString()).isEmpty();
    }

    @Test
    void refusesToStartWithoutAVerb() {
        assertThat(raysheaf.execute()).isEqualTo(2);
        assertThat(err.toString()).contains("--help");
    }
}
