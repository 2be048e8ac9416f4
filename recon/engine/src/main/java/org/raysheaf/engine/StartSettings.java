package org.raysheaf.engine;

import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Problems;

/**
 * What the first pass starts from, in place of a uniform image; one of the two.
 *
 * @param volume path of an image in kBq/mL, from the description's folder, on any grid
 * @param coarsePasses passes of a first estimate on voxels of twice the size, 1 to 1000; they take about half as long as others
 */
public record StartSettings(
        @Nullable String volume, @Nullable Integer coarsePasses) {
    /**
     * Checks that it is one of the two.
     *
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if both or none are given, or a value is out of range
     */
    public StartSettings {
        Problems problems = new Problems("start");
        problems.rule(
                (volume == null) != (coarsePasses == null),
                "volume",
                "expected either volume or coarse_passes, found " + (volume == null ? "neither" : "both")
                        + "; for a uniform start leave out start");
        if (coarsePasses != null) {
            problems.within("coarse_passes", coarsePasses, 1, 1000);
        }
        problems.orThrow();
    }
}
