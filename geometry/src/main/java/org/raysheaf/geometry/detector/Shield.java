package org.raysheaf.geometry.detector;

import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;
import org.raysheaf.geometry.solid.Placed;
import org.raysheaf.geometry.solid.Shape;

/**
 * Matter of a detector system that detects nothing: shields, end plates, a bore. A later one replaces earlier ones wherever they
 * overlap (so a ring of lead is a cylinder of lead followed by a narrower one of air), the phantom replaces them all, and crystals
 * replace everything.
 *
 * @param name how messages call it
 * @param shape the solid, in its own frame: centred on the origin, its axis along z
 * @param centreMm where its centre goes (mm)
 * @param turnDeg how it is turned before it is moved there, like a part of a phantom (degrees)
 * @param material name of what it is made of
 */
public record Shield(
        String name,
        Shape shape,
        @Default("[0, 0, 0]") Vector3 centreMm,
        @Default("[0, 0, 0]") Vector3 turnDeg,
        String material) {
    private static final double FARTHEST_MM = 1e4;

    public Shield {
        new Problems("shield " + name)
                .rule(!name.isBlank(), "name", "expected a name, found an empty text")
                .within("centre_mm", centreMm.norm(), 0, FARTHEST_MM)
                .finite("turn_deg", turnDeg.norm())
                .rule(!material.isBlank(), "material", "expected the name of a material, found an empty text")
                .orThrow();
    }

    /**
     * The solid in its place.
     *
     * @return the placed solid
     */
    public Placed placed() {
        return Placed.turned(shape, turnDeg, centreMm);
    }
}
