package org.raysheaf.app;

import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.settings.Problems;

/**
 * The voxels of an image. What is left out follows from the detector.
 *
 * @param voxelMm edge of a voxel (mm); without it, half the smallest crystal pitch
 * @param radiusMm half the width of the grid (mm); without it, the radius of the field of view
 * @param lengthMm length of the grid along z (mm); without it, the length of the field of view
 */
record GridSettings(
        @Nullable Double voxelMm,
        @Nullable Double radiusMm,
        @Nullable Double lengthMm) {
    GridSettings {
        Problems problems = new Problems("grid");
        if (voxelMm != null) {
            problems.above("voxel_mm", voxelMm, 0);
        }
        if (radiusMm != null) {
            problems.above("radius_mm", radiusMm, 0);
        }
        if (lengthMm != null) {
            problems.above("length_mm", lengthMm, 0);
        }
        problems.orThrow();
    }

    /** The grid for a system: centred, whole voxels, odd counts so that the axis runs through the middle of a voxel. */
    Grid gridFor(DetectorSystem system) {
        double voxel = voxelMm != null ? voxelMm : 0.5 * smallestPitch(system);
        double radius = radiusMm != null ? radiusMm : system.fieldOfView().radiusMm();
        double length = lengthMm != null ? lengthMm : system.fieldOfView().lengthMm();
        int across = odd(2 * radius / voxel);
        return Grid.centred(across, across, odd(length / voxel), voxel);
    }

    private static int odd(double voxels) {
        int whole = (int) Math.ceil(voxels - 1e-9);
        return whole % 2 == 0 ? whole + 1 : whole;
    }

    private static double smallestPitch(DetectorSystem system) {
        double smallest = Double.POSITIVE_INFINITY;
        for (PlacedBlock placed : system.blocks()) {
            CrystalBlock block = placed.kind().lattice();
            smallest = Math.min(
                    smallest, Math.min(block.pitchMm().x(), block.pitchMm().y()));
        }
        return smallest;
    }
}
