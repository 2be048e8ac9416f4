package org.raysheaf.app;

import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * How the sensitivity is found.
 *
 * @param method as a sum over all pairs, or from samples
 * @param voxelMm edge of the voxels of a sampled one (mm), which is then interpolated; without it, or where they are not larger, those of the image. Structure that is
 *     finer than these voxels is lost, and estimators make much of it: see DEVELOPERS.md
 * @param relativeError sampling goes on until the standard error of a voxel is below this share of its sensitivity (root mean square over the
 *     field of view), above 0
 * @param mostSheaves and stops when so many sheaves were tried, at least 1
 */
record SensitivitySettings(
        @Default("auto") Method method,
        @Nullable Double voxelMm,
        @Default("0.01") double relativeError,
        @Default("400000000") long mostSheaves) {
    static final SensitivitySettings AUTO = new SensitivitySettings(Method.AUTO, null, 0.01, 400_000_000);

    /** Rays beyond which a sum over all pairs takes minutes. */
    private static final long MANY_RAYS = 300_000_000;

    /** Where a sensitivity comes from. */
    enum Method {
        /** Sampled where events end anywhere or rays are too many, else exact. */
        AUTO,
        /** The sum over all pairs of elements. */
        EXACT,
        /** From quasi-random samples of the same integral. */
        SAMPLED
    }

    SensitivitySettings {
        Problems problems = new Problems("sensitivity");
        if (voxelMm != null) {
            problems.above("voxel_mm", voxelMm, 0);
        }
        problems.above("relative_error", relativeError, 0)
                .atLeast("most_sheaves", (double) mostSheaves, 1)
                .orThrow();
    }

    /** Whether to sample, and why. */
    record Choice(boolean sampled, String why) {}

    Choice choiceFor(CoincidenceSheaves sheaves) {
        if (method != Method.AUTO) {
            return new Choice(method == Method.SAMPLED, "the reconstruction asks for it");
        }
        if (sheaves.continuous()) {
            return new Choice(true, "rays end at measured points, not in the middle of elements");
        }
        long rays = 0;
        for (int part = 0; part < sheaves.parts(); part++) {
            rays += (long) sheaves.capacity(part) * sheaves.raysPerSheaf();
        }
        return rays > MANY_RAYS
                ? new Choice(true, "the pairs of elements have more than " + MANY_RAYS + " rays")
                : new Choice(false, "the pairs of elements have no more than " + MANY_RAYS + " rays");
    }
}
