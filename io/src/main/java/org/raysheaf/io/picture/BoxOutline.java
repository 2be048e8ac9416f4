package org.raysheaf.io.picture;

import java.util.List;
import org.raysheaf.geometry.frame.Vector3;

/**
 * A box to draw, anywhere in the world.
 *
 * @param corners its eight corners (mm): the four of one face in order round it, then the four opposite them in the same order
 * @param colour number of its colour, 0 or more; 0 is the ordinary one, others stand out; beyond 5 they begin again at 1
 */
public record BoxOutline(List<Vector3> corners, int colour) {
    /**
     * Checks the form.
     *
     * @param corners its eight corners
     * @param colour number of its colour
     * @throws IllegalArgumentException if there are not eight corners, or the colour is negative
     */
    public BoxOutline {
        corners = List.copyOf(corners);
        if (corners.size() != 8) {
            throw new IllegalArgumentException("a box needs 8 corners: found " + corners.size());
        }
        if (colour < 0) {
            throw new IllegalArgumentException("a colour needs a number >= 0: found " + colour);
        }
    }
}
