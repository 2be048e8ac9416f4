package org.raysheaf.engine;

import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * How the steps of {@link RelaxedSubsets} shrink, so that subsets stop pulling the image to and fro: α_n = first / (1 + decline · n) in the
 * n-th pass after the first. Their sum is infinite and that of their squares is not, which convergence asks for.
 *
 * @param first α, step before it shrinks, in parts of one of expectation maximisation, above 0, at most 2
 * @param decline η, above 0, at most 100; more calms subsets sooner and makes what is left slower
 */
public record Relaxation(
        @Default("1") double first, @Default("0.1") double decline) {
    /** What is taken if a description says nothing. */
    static final Relaxation USUAL = new Relaxation(1, 0.1);

    /**
     * Checks the ranges.
     *
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if a value is out of range
     */
    public Relaxation {
        new Problems("relaxation")
                .rule(first > 0 && first <= 2, "first", "expected a step above 0, at most 2; found " + first)
                .rule(
                        decline > 0 && decline <= 100,
                        "decline",
                        "expected a number above 0, at most 100; found " + decline)
                .orThrow();
    }

    /** α_n. */
    double step(int n) {
        return first / (1 + decline * n);
    }
}
