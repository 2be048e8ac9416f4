package org.raysheaf.engine.correct;

import java.util.concurrent.ForkJoinPool;
import java.util.function.DoubleSupplier;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.BlockPairKinds;

/**
 * Climbs the likelihood of a Poisson product model, one group of factors after the other: a factor that stands once in a pair takes the ratio
 * of pairs wanted and expected, one that stands in both ends its root, which never overshoots. Mutable; one thread.
 */
final class EfficiencyFit {
    private static final int MOST_ROUNDS = 150;
    private static final double SETTLED = 1e-5;

    /** A geometry factor of fewer pairs, known to no better than 2 %, stays at 1. */
    private static final double ENOUGH_PAIRS = 2500;

    private final ExpectedPairs pairs;
    private final BlockPairKinds kinds;
    private final Margins wanted;
    private final ForkJoinPool pool;
    private final Progress progress;
    private final double[] efficiencies;
    private final double[] pair;
    private final double[] column;
    private final double[] row;
    private int rounds;
    private double lastChange;

    EfficiencyFit(
            ExpectedPairs pairs,
            BlockPairKinds kinds,
            Margins wanted,
            double[] start,
            ForkJoinPool pool,
            Progress progress) {
        this.pairs = pairs;
        this.kinds = kinds;
        this.wanted = wanted;
        this.pool = pool;
        this.progress = progress;
        this.efficiencies = start.clone();
        GeometryFactors ones = GeometryFactors.ones(kinds);
        pair = ones.pair();
        column = ones.column();
        row = ones.row();
    }

    double[] efficiencies() {
        return efficiencies;
    }

    GeometryFactors geometry() {
        return new GeometryFactors(kinds, pair, column, row);
    }

    Margins expected() {
        return Margins.expected(pairs, efficiencies, geometry(), pool);
    }

    int rounds() {
        return rounds;
    }

    double lastChange() {
        return lastChange;
    }

    void climbEfficiencies() {
        double[] fans = wanted.ofElements();
        climb("finding efficiencies", () -> stepOfEfficiencies(fans));
    }

    void climbAll() {
        double[] fans = wanted.ofElements();
        double[] wantedPair = wanted.ofKinds(kinds);
        double[] wantedColumn = wanted.ofColumns(kinds);
        double[] wantedRow = wanted.ofRows(kinds);
        climb("finding block geometry", () -> {
            // of kinds each pair counts twice
            double change = step(pair, wantedPair, expected().ofKinds(kinds), 1, 2 * ENOUGH_PAIRS);
            change = Math.max(change, step(column, wantedColumn, expected().ofColumns(kinds), 0.5, ENOUGH_PAIRS));
            change = Math.max(change, step(row, wantedRow, expected().ofRows(kinds), 0.5, ENOUGH_PAIRS));
            return Math.max(change, stepOfEfficiencies(fans));
        });
        new GeometrySplit(kinds, wanted).apply(efficiencies, pair, column, row);
    }

    private void climb(String what, DoubleSupplier step) {
        progress.begin(what, MOST_ROUNDS, "rounds");
        rounds = 0;
        lastChange = 1;
        while (lastChange > SETTLED && rounds < MOST_ROUNDS) {
            lastChange = step.getAsDouble();
            rounds++;
            progress.advance(1);
        }
        progress.end(rounds + " rounds");
    }

    private double stepOfEfficiencies(double[] fans) {
        double[] expected = expected().ofElements();
        double change = 0;
        for (int e = 0; e < efficiencies.length; e++) {
            if (efficiencies[e] > 0) {
                double ratio = expected[e] > 0 ? Math.max(0, fans[e]) / expected[e] : 0;
                double next = Math.max(efficiencies[e] * Math.sqrt(ratio), 1e-9);
                change = Math.max(change, Math.abs(next / efficiencies[e] - 1));
                efficiencies[e] = next;
            }
        }
        return change;
    }

    private static double step(double[] factors, double[] wanted, double[] expected, double power, double enough) {
        double change = 0;
        for (int i = 0; i < factors.length; i++) {
            if (wanted[i] >= enough && expected[i] > 0) {
                double ratio = Math.pow(wanted[i] / expected[i], power);
                change = Math.max(change, Math.abs(ratio - 1));
                factors[i] *= ratio;
            }
        }
        return change;
    }
}
