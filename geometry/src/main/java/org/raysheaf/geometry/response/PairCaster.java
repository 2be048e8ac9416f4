package org.raysheaf.geometry.response;

import java.util.random.RandomGenerator;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.sheaf.SheafBundle;

/** Appends sheaves to a catalogue: weight étendue / 2π times all factors, times how often the sheaf counts. Belongs to one thread. */
final class PairCaster {
    private final PairLines lines;
    private final @Nullable PairRays rays;
    private final DrawnLines drawer;
    private final PairFactor factor;
    private final boolean[] silent;
    private final LineOfResponse line = new LineOfResponse();

    /**
     * Prepares.
     *
     * @param lines the lines of pairs
     * @param rays spreads the rays of a pair, or null for its line alone
     * @param drawer draws lines between points of two elements
     * @param factor all factors
     * @param silent elements that are left out
     */
    PairCaster(PairLines lines, @Nullable PairRays rays, DrawnLines drawer, PairFactor factor, boolean[] silent) {
        this.lines = lines;
        this.rays = rays;
        this.drawer = drawer;
        this.factor = factor;
        this.silent = silent;
    }

    /** One ray along a line. */
    static void append(SheafBundle out, LineOfResponse line, double weight) {
        out.set(out.append(), line.ax, line.ay, line.az, line.bx, line.by, line.bz, weight);
    }

    /** The sheaf of a pair whose line is known, counted so many times. */
    void cast(int a, int b, LineOfResponse found, double times, SheafBundle out) {
        double weight = times * (found.etendue / (2 * Math.PI) * factor.of(a, b, found));
        if (!(weight > 0)) {
            return;
        }
        if (rays == null) {
            append(out, found, weight);
        } else {
            rays.aim(a, b, found);
            rays.append(out, weight);
        }
    }

    /** The sheaf of a pair of elements, if its line crosses the field of view. */
    void pair(int a, int b, double times, SheafBundle out) {
        if (!silent[a] && !silent[b] && lines.line(a, b, line)) {
            cast(a, b, line, times, out);
        }
    }

    /** A line between drawn points of two elements, if it crosses the field of view. */
    void drawn(int a, int b, double[] shares, RandomGenerator chance, double times, SheafBundle out) {
        if (silent[a] || silent[b]) {
            return;
        }
        drawer.draw(a, b, shares, chance, line);
        if (lines.crossesView(line)) {
            double weight = times * (line.etendue / (2 * Math.PI) * factor.of(a, b, line));
            if (weight > 0) {
                append(out, line, weight);
            }
        }
    }
}
