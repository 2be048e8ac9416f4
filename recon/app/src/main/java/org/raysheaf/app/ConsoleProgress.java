package org.raysheaf.app;

import java.io.PrintStream;
import java.util.Locale;
import java.util.concurrent.atomic.AtomicLong;
import org.raysheaf.geometry.port.Progress;

/** Shows progress on a stream: a bar that redraws itself on a terminal, otherwise a line now and then. Safe for use by several threads. */
final class ConsoleProgress implements Progress {
    private static final int BAR = 30;

    private final PrintStream out;
    private final boolean terminal;
    private final long pauseNanos;
    private final AtomicLong done = new AtomicLong();
    private final AtomicLong shown = new AtomicLong();
    private volatile String stage = "";
    private volatile String unit = "";
    private volatile String remark = "";
    private volatile long total;
    private volatile long begun;

    ConsoleProgress(PrintStream out, boolean terminal) {
        this.out = out;
        this.terminal = terminal;
        this.pauseNanos = terminal ? 100_000_000L : 5_000_000_000L;
    }

    @Override
    public void begin(String stageName, long howMuch, String what) {
        stage = stageName;
        total = Math.max(1, howMuch);
        unit = what;
        remark = "";
        begun = System.nanoTime();
        shown.set(begun);
        done.set(0);
    }

    @Override
    public void advance(long amount) {
        long now = System.nanoTime();
        long before = shown.get();
        long have = done.addAndGet(amount);
        if (now - before > pauseNanos && shown.compareAndSet(before, now)) {
            show(have, now);
        }
    }

    @Override
    public void remark(String words) {
        remark = words;
    }

    private synchronized void show(long have, long now) {
        double share = Math.min(1, have / (double) total);
        double seconds = (now - begun) * 1e-9;
        double left = share > 0 ? seconds * (1 - share) / share : 0;
        String text = String.format(Locale.ROOT, "%s: %3.0f %% of %s", stage, 100 * share, amount(have, seconds))
                + (remark.isEmpty() ? "" : ", " + remark)
                + String.format(Locale.ROOT, ", %.0f s left", left);
        if (terminal) {
            int full = (int) Math.round(BAR * share);
            out.print("\r\033[K" + "▪".repeat(full) + "·".repeat(BAR - full) + "  " + text);
            out.flush();
        } else {
            out.println(text);
        }
    }

    /** The total, and for events and bytes how fast they go. */
    private String amount(long have, double seconds) {
        if (unit.equals("events")) {
            return String.format(
                    Locale.ROOT, "%,d events, %.3g M events/s", total, have * 1e-6 / Math.max(seconds, 1e-3));
        }
        if (!unit.equals("bytes")) {
            return String.format(Locale.ROOT, "%,d %s", total, unit);
        }
        return String.format(Locale.ROOT, "%,.1f MB, %.0f MB/s", total * 1e-6, have * 1e-6 / Math.max(seconds, 1e-3));
    }

    @Override
    public synchronized void end(String outcome) {
        double seconds = (System.nanoTime() - begun) * 1e-9;
        String text =
                String.format(Locale.ROOT, "%s: %.1f s%s", stage, seconds, outcome.isEmpty() ? "" : ", " + outcome);
        out.println((terminal ? "\r\033[K" : "") + text);
    }
}
