package org.raysheaf.geometry.detector;

import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * A block of separate box-shaped crystals: columns × rows × depth layers on a regular pitch. Between crystals lie real gaps of pitch minus
 * crystal size, which stop nothing; outside the outermost crystals there is nothing.
 *
 * @param name how placements refer to this block
 * @param columns crystals along u, 1 to 1000
 * @param rows crystals along v, 1 to 1000
 * @param layers crystals along w, 1 to 100; layer 0 has the front face
 * @param pitchMm centre-to-centre distances along u, v, w (mm); the third plays no part with one layer
 * @param crystalMm size of one crystal along u, v, w (mm), from 0.00001 to 1000, at most the pitch
 * @param material name of the crystals' material
 * @param readout what the electronics make of the energy
 */
public record CrystalBlock(
        String name,
        int columns,
        int rows,
        @Default("1") int layers,
        Vector3 pitchMm,
        Vector3 crystalMm,
        String material,
        @Default("{}") Readout readout)
        implements BlockKind {
    private static final double SMALLEST_MM = 1e-5;
    private static final double LARGEST_MM = 1000;

    public CrystalBlock {
        new Problems("block " + name)
                .within("columns", columns, 1, 1000)
                .within("rows", rows, 1, 1000)
                .within("layers", layers, 1, 100)
                .within("crystal_mm[0]", crystalMm.x(), SMALLEST_MM, LARGEST_MM)
                .within("crystal_mm[1]", crystalMm.y(), SMALLEST_MM, LARGEST_MM)
                .within("crystal_mm[2]", crystalMm.z(), SMALLEST_MM, LARGEST_MM)
                .rule(fits(columns, crystalMm.x(), pitchMm.x()), "pitch_mm[0]", tight(crystalMm.x(), pitchMm.x()))
                .rule(fits(rows, crystalMm.y(), pitchMm.y()), "pitch_mm[1]", tight(crystalMm.y(), pitchMm.y()))
                .rule(fits(layers, crystalMm.z(), pitchMm.z()), "pitch_mm[2]", tight(crystalMm.z(), pitchMm.z()))
                .orThrow();
    }

    private static boolean fits(int count, double crystal, double pitch) {
        return count <= 1 || crystal <= pitch;
    }

    private static String tight(double crystal, double pitch) {
        return "expected a pitch of at least the crystal's size " + crystal + " mm, found " + pitch + " mm";
    }

    /**
     * A block with an ideal readout.
     *
     * @param name how placements refer to this block
     * @param columns crystals along u
     * @param rows crystals along v
     * @param layers crystals along w
     * @param pitchMm centre-to-centre distances along u, v, w (mm)
     * @param crystalMm size of one crystal along u, v, w (mm)
     * @param material name of the crystals' material
     */
    public CrystalBlock(
            String name, int columns, int rows, int layers, Vector3 pitchMm, Vector3 crystalMm, String material) {
        this(name, columns, rows, layers, pitchMm, crystalMm, material, Readout.IDEAL);
    }

    @Override
    public CrystalBlock lattice() {
        return this;
    }

    /**
     * Number of a crystal within its block.
     *
     * @param column column, 0 at the −u side
     * @param row row, 0 at the −v side
     * @param layer layer, 0 at the front
     * @return (layer · rows + row) · columns + column
     */
    public int crystal(int column, int row, int layer) {
        return (layer * rows + row) * columns + column;
    }

    /**
     * Column of a crystal.
     *
     * @param crystal number within the block
     * @return the column, 0 at the −u side
     */
    public int column(int crystal) {
        return crystal % columns;
    }

    /**
     * Row of a crystal.
     *
     * @param crystal number within the block
     * @return the row, 0 at the −v side
     */
    public int row(int crystal) {
        return crystal / columns % rows;
    }

    /**
     * Layer of a crystal.
     *
     * @param crystal number within the block
     * @return the layer, 0 at the front
     */
    public int layer(int crystal) {
        return crystal / columns / rows;
    }

    /**
     * Centre of a crystal in the block's frame.
     *
     * @param crystal number within the block
     * @return the point (mm)
     */
    public Vector3 centre(int crystal) {
        return new Vector3(
                (column(crystal) - 0.5 * (columns - 1)) * pitchMm.x(),
                (row(crystal) - 0.5 * (rows - 1)) * pitchMm.y(),
                layer(crystal) * pitchMm.z() + 0.5 * crystalMm.z());
    }

    /**
     * Centre of a crystal along u.
     *
     * @param crystal number within the block
     * @return the coordinate in the block's frame (mm)
     */
    public double centreU(int crystal) {
        return (column(crystal) - 0.5 * (columns - 1)) * pitchMm.x();
    }

    /**
     * Centre of a crystal along v.
     *
     * @param crystal number within the block
     * @return the coordinate in the block's frame (mm)
     */
    public double centreV(int crystal) {
        return (row(crystal) - 0.5 * (rows - 1)) * pitchMm.y();
    }

    /**
     * Centre of a crystal along w.
     *
     * @param crystal number within the block
     * @return the depth behind the front face (mm)
     */
    public double centreW(int crystal) {
        return layer(crystal) * pitchMm.z() + 0.5 * crystalMm.z();
    }

    /**
     * The crystal whose centre is nearest to a point of the block's frame, also from outside.
     *
     * @param u the point (mm)
     * @param v the point (mm)
     * @param w the point (mm)
     * @return the crystal's number within the block
     */
    public int nearest(double u, double v, double w) {
        return crystal(
                nearest(u / pitchMm.x() + 0.5 * (columns - 1), columns),
                nearest(v / pitchMm.y() + 0.5 * (rows - 1), rows),
                nearest((w - 0.5 * crystalMm.z()) / pitchMm.z(), layers));
    }

    private static int nearest(double place, int count) {
        return (int) Math.max(0, Math.min(count - 1, Math.rint(place)));
    }

    /**
     * The crystal at a point of the block's frame.
     *
     * @param local the point (mm)
     * @return the crystal's number within the block, or −1 in a gap or outside
     */
    public int crystalAt(Vector3 local) {
        int column = cell(local.x() + 0.5 * widthMm(), pitchMm.x(), crystalMm.x(), columns);
        int row = cell(local.y() + 0.5 * heightMm(), pitchMm.y(), crystalMm.y(), rows);
        int layer = cell(local.z(), pitchMm.z(), crystalMm.z(), layers);
        return column < 0 || row < 0 || layer < 0 ? -1 : crystal(column, row, layer);
    }

    private static int cell(double along, double pitch, double crystal, int count) {
        int cell = count == 1 ? 0 : (int) Math.floor(along / pitch);
        boolean inside = cell >= 0 && cell < count && along - cell * pitch >= 0 && along - cell * pitch <= crystal;
        return inside ? cell : -1;
    }
}
