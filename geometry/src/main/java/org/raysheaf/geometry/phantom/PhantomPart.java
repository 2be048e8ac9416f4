package org.raysheaf.geometry.phantom;

import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;
import org.raysheaf.geometry.solid.Placed;
import org.raysheaf.geometry.solid.Shape;

/**
 * One part of a phantom, as a description gives it.
 *
 * @param name how reports call the part
 * @param shape the solid, in its own frame: centred on the origin, its axis along z
 * @param centreMm where its centre goes (mm)
 * @param turnDeg how it is turned before it is moved there: about the world's x axis by the first angle, then about y
 *     by the second, then about z by the third (degrees, right-hand rule). {@code [90, 0, 0]} lays a cylinder along y,
 *     {@code [0, 90, 0]} along x.
 * @param material name of what it is made of
 * @param concentrationKBqPerMl activity concentration at the start of the acquisition (kBq/mL), at least 0
 */
public record PhantomPart(
        String name,
        Shape shape,
        @Default("[0, 0, 0]") Vector3 centreMm,
        @Default("[0, 0, 0]") Vector3 turnDeg,
        @Default("water") String material,
        @Default("0") double concentrationKBqPerMl) {
    /** Farthest that a part may stand from the origin (mm); beyond it a unit was surely mistaken. */
    private static final double FARTHEST_MM = 1e4;

    public PhantomPart {
        new Problems("phantom part " + name)
                .rule(!name.isBlank(), "name", "expected a name, found an empty text")
                .within("centre_mm[0]", centreMm.x(), -FARTHEST_MM, FARTHEST_MM)
                .within("centre_mm[1]", centreMm.y(), -FARTHEST_MM, FARTHEST_MM)
                .within("centre_mm[2]", centreMm.z(), -FARTHEST_MM, FARTHEST_MM)
                .finite("turn_deg[0]", turnDeg.x())
                .finite("turn_deg[1]", turnDeg.y())
                .finite("turn_deg[2]", turnDeg.z())
                .rule(!material.isBlank(), "material", "expected the name of a material, found an empty text")
                .atLeast("concentration_kBq_per_mL", concentrationKBqPerMl, 0)
                .orThrow();
    }

    /**
     * A part that is neither turned nor radioactive.
     *
     * @param name how reports call the part
     * @param shape the solid
     * @return the part, of water, at the origin
     */
    public static PhantomPart of(String name, Shape shape) {
        return new PhantomPart(name, shape, Vector3.ZERO, Vector3.ZERO, "water", 0);
    }

    /**
     * The same part elsewhere.
     *
     * @param centre where its centre goes (mm)
     * @return a changed copy
     */
    public PhantomPart at(Vector3 centre) {
        return new PhantomPart(name, shape, centre, turnDeg, material, concentrationKBqPerMl);
    }

    /**
     * The same part with another activity.
     *
     * @param kBqPerMl activity concentration (kBq/mL)
     * @return a changed copy
     */
    public PhantomPart holding(double kBqPerMl) {
        return new PhantomPart(name, shape, centreMm, turnDeg, material, kBqPerMl);
    }

    /**
     * The solid in its place.
     *
     * @return the placed solid
     */
    public Placed placed() {
        return Placed.turned(shape, turnDeg, centreMm);
    }

    /**
     * Activity concentration in the unit used in memory.
     *
     * @return the concentration (Bq/mL)
     */
    public double concentrationBqPerMl() {
        return 1000 * concentrationKBqPerMl;
    }
}
