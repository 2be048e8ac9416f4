package org.raysheaf.app;

import java.nio.file.Path;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;

/**
 * Ends a long reconstruction at a safe point when the program is told to stop (Ctrl-C, SIGTERM): right after the next checkpoint, or, if that
 * takes too long, at once; the last checkpoint is whole in either case.
 */
final class Interruption implements AutoCloseable {
    private static final long PATIENCE_S = 20;

    private final Path results;
    private final Thread hook = new Thread(this::stop, "stop");
    private final CountDownLatch atSafePoint = new CountDownLatch(1);
    private volatile boolean wanted;
    private volatile boolean kept;

    private Interruption(Path results) {
        this.results = results;
    }

    /** Begins to listen. */
    static Interruption of(Path results) {
        Interruption interruption = new Interruption(results);
        Runtime.getRuntime().addShutdownHook(interruption.hook);
        return interruption;
    }

    /** A checkpoint was just written. If the program is to stop, this does not return. */
    void safePoint() {
        kept = true;
        if (wanted) {
            atSafePoint.countDown();
            awaitTheEnd();
        }
    }

    /** The hook ends the program as soon as it has said what is kept. */
    private static void awaitTheEnd() {
        while (true) {
            try {
                Thread.sleep(TimeUnit.SECONDS.toMillis(PATIENCE_S));
            } catch (InterruptedException e) {
                // Nothing but the end of the program may end this.
            }
        }
    }

    private void stop() {
        wanted = true;
        System.err.println("\nraysheaf: stopping after this pass, within " + PATIENCE_S + " s");
        boolean reached = false;
        try {
            reached = atSafePoint.await(PATIENCE_S, TimeUnit.SECONDS);
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        }
        if (kept || WorkFolder.isUnfinished(results)) {
            System.err.println(
                    "raysheaf: stopped; " + (reached ? "all passes made so far are" : "the last full pass is")
                            + " kept. Go on with: raysheaf reconstruct --resume " + results);
        } else {
            System.err.println("raysheaf: stopped before the first pass was done; nothing is kept");
        }
        System.err.flush();
    }

    /** Stops listening. */
    @Override
    public void close() {
        try {
            Runtime.getRuntime().removeShutdownHook(hook);
        } catch (IllegalStateException e) {
            // The program is ending already, and the hook is at work.
        }
    }
}
