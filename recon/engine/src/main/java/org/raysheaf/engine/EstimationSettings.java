package org.raysheaf.engine;

import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.prior.Prior;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * How to get from events to an image.
 *
 * @param passes how often every event is visited, 1 to 10,000; with a stop rule, at most so often
 * @param subsets updates per pass; 1 is MLEM, more is OSEM, where subset s holds every S-th event used from the s-th on
 * @param lanes accumulator images, 0 to 64; 0 lets the problem decide (1 to 16). More lanes feed more threads and take more memory;
 *     results depend on the number of lanes in the last digits, never on the number of threads
 * @param postFilterFwhmMm full width at half maximum of a Gaussian filter applied once after the last pass (mm); 0 for none
 * @param method how the image gets better from update to update
 * @param prior what is believed of the image beforehand, or null for nothing
 * @param relaxation how steps shrink, for {@link Method#BSREM} only; null for the usual way
 * @param stop when to stop before all passes are made, or null to make all
 * @param start what to start from, or null for a uniform image
 */
public record EstimationSettings(
        @Default("20") int passes,
        @Default("1") int subsets,
        @Default("0") int lanes,
        @Default("0") double postFilterFwhmMm,
        @Default("em") Method method,
        @Nullable Prior prior,
        @Nullable Relaxation relaxation,
        @Nullable Stop stop,
        @Nullable StartSettings start) {
    /** How an image gets better. */
    public enum Method {
        /** Expectation maximisation, without a prior: MLEM with one subset, OSEM with several. */
        EM,
        /** Ordered subsets with steps that shrink, until the image rests at the largest penalised likelihood. */
        BSREM,
        /** Ordered subsets that remember what the others said: at the same place in fewer passes, for more memory. */
        VARIANCE_REDUCED
    }

    /**
     * Checks the ranges, and that the parts go together.
     *
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if a value is out of range
     */
    public EstimationSettings {
        new Problems("estimation")
                .within("passes", passes, 1, 10_000)
                .within("subsets", subsets, 1, 10_000)
                .within("lanes", lanes, 0, 64)
                .atLeast("post_filter_fwhm_mm", postFilterFwhmMm, 0)
                .rule(
                        prior == null || method != Method.EM,
                        "method",
                        "expected variance_reduced or bsrem, since there is a prior, found em; add method:"
                                + " variance_reduced and subsets: 32, or leave out prior")
                .rule(
                        prior != null || method == Method.EM,
                        "prior",
                        "expected a prior, since the method is meant for one, found none: with this method noise would"
                                + " be fitted to the end; add for example prior: {kind: relative_difference, strength:"
                                + " 0.1}, or take method: em")
                .rule(
                        method != Method.VARIANCE_REDUCED || subsets > 1,
                        "subsets",
                        "expected at least 2 subsets for method: variance_reduced, which goes from one to the next,"
                                + " found 1; 32 suits most lists")
                .rule(
                        relaxation == null || method == Method.BSREM,
                        "relaxation",
                        "expected only with method: bsrem; leave it out, the steps of other methods do not shrink")
                .orThrow();
    }

    /**
     * Expectation maximisation from a uniform image.
     *
     * @param passes how often every event is visited
     * @param subsets updates per pass
     * @param lanes accumulator images, or 0
     * @param postFilterFwhmMm width of the filter at the end (mm)
     */
    public EstimationSettings(int passes, int subsets, int lanes, double postFilterFwhmMm) {
        this(passes, subsets, lanes, postFilterFwhmMm, Method.EM, null, null, null, null);
    }

    /**
     * MLEM without a filter, lanes as the problem suggests.
     *
     * @param passes how often every event is visited
     * @return the settings
     */
    public static EstimationSettings mlem(int passes) {
        return new EstimationSettings(passes, 1, 0, 0);
    }

    /**
     * The same with another number of lanes.
     *
     * @param number accumulator images, or 0
     * @return new settings
     */
    public EstimationSettings withLanes(int number) {
        return new EstimationSettings(
                passes, subsets, number, postFilterFwhmMm, method, prior, relaxation, stop, start);
    }

    /**
     * A first estimate on larger voxels, as {@code start} asks for: all passes, from a uniform image, without a filter.
     *
     * @param coarsePasses its passes
     * @return new settings
     */
    public EstimationSettings coarse(int coarsePasses) {
        return new EstimationSettings(coarsePasses, subsets, lanes, 0, method, prior, relaxation, null, null);
    }

    /**
     * Into how many alike parts a store must deal the events: as many as there are subsets, or more of them if events are kept out, so that
     * these are parts of their own.
     *
     * @return the number of parts
     */
    public int parts() {
        int every = heldOutEvery();
        return every == 0 ? subsets : every * ((subsets + every - 2) / (every - 1));
    }

    /** k if every k-th event is kept out, else 0. */
    int heldOutEvery() {
        return stop == null ? 0 : stop.heldOutEvery();
    }
}
