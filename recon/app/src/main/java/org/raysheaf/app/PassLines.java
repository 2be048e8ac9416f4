package org.raysheaf.app;

import java.util.Locale;
import java.util.function.Supplier;
import org.raysheaf.engine.PassListener;
import org.raysheaf.engine.PassReport;
import org.raysheaf.geometry.frame.Image;

/** Says how each pass went, a line each where no bar can redraw itself, but at most one a second. */
final class PassLines implements PassListener {
    private static final long PAUSE_NANOS = 1_000_000_000L;

    private final int passes;
    private final Common common;
    private long last = System.nanoTime();

    PassLines(int passes, Common common) {
        this.passes = passes;
        this.common = common;
    }

    @Override
    public void passed(PassReport pass, Supplier<Image> image) {
        long now = System.nanoTime();
        if (!common.onTerminal() && now - last > PAUSE_NANOS) {
            last = now;
            common.note(String.format(
                    Locale.ROOT,
                    "pass %d of %d: log-likelihood %.8g, %.1f s",
                    pass.number(),
                    passes,
                    pass.logLikelihood(),
                    pass.seconds()));
        }
    }
}
