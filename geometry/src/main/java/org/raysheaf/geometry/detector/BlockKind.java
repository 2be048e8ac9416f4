package org.raysheaf.geometry.detector;

/** What a detector block is built of. Sealed, so that a new kind of block makes every place that must know about it fail to compile. */
public sealed interface BlockKind permits CrystalBlock {
    /**
     * The name by which placements refer to this kind of block.
     *
     * @return the name
     */
    String name();

    /**
     * The name of the material that stops photons.
     *
     * @return the name of a material of the same system
     */
    String material();

    /**
     * How many elements a block of this kind has.
     *
     * @return the number of separately numbered elements
     */
    int elements();

    /**
     * Extent along the columns.
     *
     * @return outer size along u (mm)
     */
    double widthMm();

    /**
     * Extent along the rows.
     *
     * @return outer size along v (mm)
     */
    double heightMm();

    /**
     * Extent in depth.
     *
     * @return outer size along w (mm)
     */
    double depthMm();
}
