package org.raysheaf.app;

import java.nio.file.Path;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.EstimationSettings;
import org.raysheaf.geometry.response.Positions;
import org.raysheaf.geometry.settings.Default;

/**
 * How to get from a list to an image, as a description file ({@code raysheaf: reconstruction/1}) gives it.
 *
 * @param list path of the list, from the description's folder
 * @param system path of the system, from the description's folder: for a list that carries none, or a sensitivity without a list; if the
 *     list carries one too it must be the same
 * @param grid the voxels
 * @param estimation method, prior, passes, subsets, lanes, filter
 * @param halves whether to make the images of the odd and of the even events as well
 * @param corrections which corrections to make
 * @param frames parts of the list that get images of their own, or null for none
 * @param motion path of a description of how detector or subject moved, or null if both stood still
 * @param raysPerEvent lines that stand for an event: 1, or more that are spread over its crystals or the blur of its measured points
 * @param blur what blurs activity before rays see it, to be undone; null to undo nothing
 * @param sensitivity how the sensitivity is found
 */
record ReconstructionPlan(
        @Nullable String list,
        @Nullable String system,
        @Default("{}") GridSettings grid,
        @Default("{}") EstimationSettings estimation,
        @Default("false") boolean halves,
        @Default("{}") Corrections corrections,
        @Nullable FrameSettings frames,
        @Nullable String motion,
        @Default("1") int raysPerEvent,
        @Nullable BlurSettings blur,
        @Default("{}") SensitivitySettings sensitivity) {
    ReconstructionPlan {
        new Positions(raysPerEvent, false, false); // states the bounds
    }

    /** What is done with a bare list. */
    static ReconstructionPlan bare() {
        return new ReconstructionPlan(
                null,
                null,
                new GridSettings(null, null, null),
                EstimationSettings.mlem(20),
                false,
                Corrections.OF_A_BARE_LIST,
                null,
                null,
                1,
                null,
                SensitivitySettings.AUTO);
    }

    /** The file of the system, or null; paths start from the folder of the file that the plan came from. */
    @Nullable
    Path systemBeside(@Nullable Path base) {
        if (system == null) {
            return null;
        }
        return base == null ? Path.of(system) : base.resolveSibling(system);
    }

    /** The same with the number of lanes given on the command line, and halves if asked for there. */
    ReconstructionPlan with(int lanes, boolean wantHalves) {
        return new ReconstructionPlan(
                list,
                system,
                grid,
                lanes > 0 ? estimation.withLanes(lanes) : estimation,
                halves || wantHalves,
                corrections,
                frames,
                motion,
                raysPerEvent,
                blur,
                sensitivity);
    }
}
