package org.raysheaf.geometry.response;

import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

/**
 * Where every element stands, in one flat array that is looked up for every event: {@value #SIZE} numbers per element, its centre, then the
 * axes u, v, w of its block, then its half sizes along them, then its place in the frame of its block (mm).
 */
final class ElementFrames {
    static final int SIZE = 18;
    static final int U = 3;
    static final int V = 6;
    static final int W = 9;
    static final int HALF = 12;
    static final int PLACE = 15;

    private ElementFrames() {}

    static double[] of(DetectorSystem system) {
        double[] frames = new double[Math.multiplyExact(SIZE, system.elements())];
        for (PlacedBlock block : system.blocks()) {
            CrystalBlock lattice = block.kind().lattice();
            Pose pose = block.pose();
            for (int i = 0; i < lattice.elements(); i++) {
                int e = block.firstElement() + i;
                Vector3[] rows = {
                    system.centre(e),
                    pose.u(),
                    pose.v(),
                    pose.w(),
                    lattice.crystalMm().times(0.5),
                    lattice.centre(i)
                };
                for (int row = 0; row < rows.length; row++) {
                    frames[SIZE * e + 3 * row] = rows[row].x();
                    frames[SIZE * e + 3 * row + 1] = rows[row].y();
                    frames[SIZE * e + 3 * row + 2] = rows[row].z();
                }
            }
        }
        return frames;
    }

    /** Component of a direction along one axis of a block. */
    static double along(double[] frames, int axis, double x, double y, double z) {
        return frames[axis] * x + frames[axis + 1] * y + frames[axis + 2] * z;
    }
}
