package org.raysheaf.geometry.detector;

/** What a detector block is built of. Sealed, so that a new kind of block makes every place that must know about it fail to compile. */
public sealed interface BlockKind permits CrystalBlock, MonolithicBlock {
    /**
     * The name by which placements refer to this kind of block.
     *
     * @return the name
     */
    String name();

    /**
     * The name of the material that stops photons.
     *
     * @return the name of a material of the same system or of the library
     */
    String material();

    /**
     * What the electronics make of the energy that photons leave in a block of this kind.
     *
     * @return the readout
     */
    Readout readout();

    /**
     * The block as a lattice of elements: real crystals with gaps between them, or cells that a block of one piece is cut into in thought.
     *
     * @return the lattice, the same at every call
     */
    CrystalBlock lattice();

    /**
     * How many elements a block of this kind has.
     *
     * @return the number of separately numbered elements
     */
    default int elements() {
        CrystalBlock lattice = lattice();
        return lattice.columns() * lattice.rows() * lattice.layers();
    }

    /**
     * Extent along the columns.
     *
     * @return outer size along u (mm)
     */
    default double widthMm() {
        CrystalBlock lattice = lattice();
        return extent(
                lattice.columns(), lattice.pitchMm().x(), lattice.crystalMm().x());
    }

    /**
     * Extent along the rows.
     *
     * @return outer size along v (mm)
     */
    default double heightMm() {
        CrystalBlock lattice = lattice();
        return extent(lattice.rows(), lattice.pitchMm().y(), lattice.crystalMm().y());
    }

    /**
     * Extent in depth.
     *
     * @return outer size along w (mm)
     */
    default double depthMm() {
        CrystalBlock lattice = lattice();
        return extent(
                lattice.layers(), lattice.pitchMm().z(), lattice.crystalMm().z());
    }

    private static double extent(int count, double pitch, double crystal) {
        return (count - 1) * pitch + crystal;
    }
}
