package org.raysheaf.geometry.detector;

import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * A block of one piece, in which the interaction point is estimated continuously in three dimensions. For numbering, for the
 * response and for the sensitivity it is cut in thought into equal cells without gaps: the element of an event is the cell that
 * holds its estimated point, and the list carries the point itself and its standard deviations beside it.
 *
 * @param name how placements refer to this block
 * @param sizeMm outer size along u, v, w (mm)
 * @param cellMm wanted size of the cells along u, v, w (mm); as many whole cells as come nearest to it are made
 * @param material name of the block's material
 * @param positionSdMm standard deviation of the estimated point along u, v, w (mm), each at least 0
 * @param readout what the electronics make of the energy
 */
public record MonolithicBlock(
        String name,
        Vector3 sizeMm,
        @Default("[2, 2, 2]") Vector3 cellMm,
        String material,
        Vector3 positionSdMm,
        @Default("{}") Readout readout)
        implements BlockKind {
    private static final double SMALLEST_MM = 1e-2;
    private static final double LARGEST_MM = 1000;

    public MonolithicBlock {
        new Problems("block " + name)
                .within("size_mm[0]", sizeMm.x(), SMALLEST_MM, LARGEST_MM)
                .within("size_mm[1]", sizeMm.y(), SMALLEST_MM, LARGEST_MM)
                .within("size_mm[2]", sizeMm.z(), SMALLEST_MM, LARGEST_MM)
                .within("cell_mm[0]", cellMm.x(), SMALLEST_MM, LARGEST_MM)
                .within("cell_mm[1]", cellMm.y(), SMALLEST_MM, LARGEST_MM)
                .within("cell_mm[2]", cellMm.z(), SMALLEST_MM, LARGEST_MM)
                .atLeast("position_sd_mm[0]", positionSdMm.x(), 0)
                .atLeast("position_sd_mm[1]", positionSdMm.y(), 0)
                .atLeast("position_sd_mm[2]", positionSdMm.z(), 0)
                .rule(
                        readout.channel() == Readout.Channel.BLOCK,
                        "readout.channel",
                        "expected block, found crystal; a block of one piece has one channel")
                .rule(
                        readout.decoding() == Readout.Decoding.LARGEST && readout.depthFwhmMm() == null,
                        "readout",
                        "expected neither decoding: centroid nor depth_fwhm_mm; give position_sd_mm of the block instead")
                .orThrow();
    }

    @Override
    public CrystalBlock lattice() {
        int columns = cells(sizeMm.x(), cellMm.x());
        int rows = cells(sizeMm.y(), cellMm.y());
        int layers = cells(sizeMm.z(), cellMm.z());
        Vector3 cell = new Vector3(sizeMm.x() / columns, sizeMm.y() / rows, sizeMm.z() / layers);
        return new CrystalBlock(name, columns, rows, layers, cell, cell, material, readout);
    }

    private static int cells(double size, double cell) {
        return (int) Math.max(1, Math.rint(size / cell));
    }
}
