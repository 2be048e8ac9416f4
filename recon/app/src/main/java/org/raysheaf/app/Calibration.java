package org.raysheaf.app;

import java.io.IOException;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.settings.Problems;
import org.raysheaf.quality.ReferenceFactor;

/**
 * What an image of a known, uniform phantom must be multiplied with ({@code raysheaf: calibration/1}): 1 for a perfect model. Measured once,
 * applied to later images of the same system.
 *
 * @param factor true over found concentration
 * @param relativeError relative standard error of the factor, from the scatter of its slices
 * @param system name of the system
 */
record Calibration(double factor, double relativeError, String system) {
    Calibration {
        new Problems("calibration")
                .above("factor", factor, 0)
                .atLeast("relative_error", relativeError, 0)
                .orThrow();
    }

    /** Compares an image with its phantom, whose activity holds at the start of the list. */
    static Calibration of(Image activityBqPerMl, Phantom phantom, double viewHalfLengthMm, String system)
            throws IOException {
        ReferenceFactor found = ReferenceFactor.of(activityBqPerMl, phantom, viewHalfLengthMm)
                .orElseThrow(() -> new IOException("the reference phantom "
                        + phantom.description().name() + ": expected a radioactive part that reaches "
                        + ReferenceFactor.EDGE_MM + " mm around some voxels in at least "
                        + ReferenceFactor.FEWEST_SLICES + " slices, found fewer"));
        return new Calibration(found.factor(), found.relativeError(), system);
    }
}
