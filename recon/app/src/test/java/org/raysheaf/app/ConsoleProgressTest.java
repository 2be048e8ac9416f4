package org.raysheaf.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.ByteArrayOutputStream;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;
import org.junit.jupiter.api.Test;

class ConsoleProgressTest {
    /** Longer than the pause between two pictures of the bar. */
    private static final long PAUSE_MS = 150;

    @Test
    void bytesAreShownWithTheirSpeedAndTheRemark() throws InterruptedException {
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        ConsoleProgress progress = new ConsoleProgress(new PrintStream(bytes, true, StandardCharsets.UTF_8), true);
        progress.begin("importing", 200_000_000, "bytes");
        progress.remark("1,234 records");
        Thread.sleep(PAUSE_MS);
        progress.advance(50_000_000);
        progress.end("done");
        assertThat(bytes.toString(StandardCharsets.UTF_8))
                .containsPattern("importing:  25 % of 200\\.0 MB, \\d+ MB/s, 1,234 records, \\d+ s left")
                .contains("importing: 0.", "s, done");
    }

    @Test
    void otherUnitsAreCounted() throws InterruptedException {
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        ConsoleProgress progress = new ConsoleProgress(new PrintStream(bytes, true, StandardCharsets.UTF_8), true);
        progress.begin("pairing", 4000, "singles");
        Thread.sleep(PAUSE_MS);
        progress.advance(1000);
        assertThat(bytes.toString(StandardCharsets.UTF_8)).contains("pairing:  25 % of 4,000 singles, ");
    }
}
