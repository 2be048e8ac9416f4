package org.raysheaf.engine;

import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * How to get from events to an image.
 *
 * @param passes how often every event is visited, 1 to 10,000
 * @param subsets updates per pass; 1 is MLEM, more is OSEM, where subset s holds every S-th event used from the s-th on
 * @param lanes accumulator images, 0 to 64; 0 lets the problem decide (1 to 16). More lanes feed more threads and take more memory;
 *     results depend on the number of lanes in the last digits, never on the number of threads
 * @param postFilterFwhmMm full width at half maximum of a Gaussian filter applied once after the last pass (mm); 0 for none
 */
public record EstimationSettings(
        @Default("20") int passes,
        @Default("1") int subsets,
        @Default("0") int lanes,
        @Default("0") double postFilterFwhmMm) {
    /**
     * Checks the ranges.
     *
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if a value is out of range
     */
    public EstimationSettings {
        new Problems("estimation")
                .within("passes", passes, 1, 10_000)
                .within("subsets", subsets, 1, 10_000)
                .within("lanes", lanes, 0, 64)
                .atLeast("post_filter_fwhm_mm", postFilterFwhmMm, 0)
                .orThrow();
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
}
