package org.raysheaf.geometry.detector;

import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.Material;

/**
 * One block of a system, at its place.
 *
 * @param index number of the block in the system, from 0
 * @param kind what it is built of
 * @param material what its crystals are made of
 * @param pose its frame in the world
 * @param firstElement number of its first element in the system
 * @param placement index of the placement that it came from
 * @param station position round the ring, or 0
 * @param stations positions round the ring, 1 where the placement is no ring
 */
public record PlacedBlock(
        int index,
        BlockKind kind,
        Material material,
        Pose pose,
        int firstElement,
        int placement,
        int station,
        int stations) {
    /**
     * Centre of the block's box.
     *
     * @return the point in the world (mm)
     */
    public Vector3 centre() {
        return pose.apply(new Vector3(0, 0, 0.5 * kind.depthMm()));
    }

    /**
     * Radius of the smallest sphere around {@link #centre()} that holds the block.
     *
     * @return the radius (mm)
     */
    public double boundingRadiusMm() {
        return 0.5 * new Vector3(kind.widthMm(), kind.heightMm(), kind.depthMm()).norm();
    }

    /**
     * The corners of the block's box: the four of the front face, then the four of the back, both in the order (−u −v), (+u −v), (+u +v), (−u
     * +v).
     *
     * @return eight points in the world (mm)
     */
    public Vector3[] corners() {
        double u = 0.5 * kind.widthMm();
        double v = 0.5 * kind.heightMm();
        Vector3[] corners = new Vector3[8];
        for (int i = 0; i < 8; i++) {
            double su = i % 4 == 0 || i % 4 == 3 ? -u : u;
            double sv = i % 4 < 2 ? -v : v;
            corners[i] = pose.apply(new Vector3(su, sv, i < 4 ? 0 : kind.depthMm()));
        }
        return corners;
    }
}
