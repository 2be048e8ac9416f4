package org.raysheaf.geometry.detector;

import java.util.ArrayList;
import java.util.List;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/** Where blocks of one kind stand. */
public sealed interface Placement permits Placement.Rings, Placement.Panel, Placement.Single {
    /** Largest distance that anything may have from the origin (mm): ten metres, beyond which a unit was surely mistaken. */
    double FARTHEST_MM = 10_000;

    /**
     * The kind of block.
     *
     * @return the name of a block of the same system
     */
    String block();

    /**
     * The places, in the order in which blocks are numbered.
     *
     * @param block the kind of block that {@link #block()} names
     * @return one site per block
     */
    List<Site> sites(BlockKind block);

    /**
     * The place of one block.
     *
     * @param pose the block's frame in the world
     * @param station position round the ring, or 0
     * @param stations number of positions round the ring; 1 where the placement is no ring
     */
    record Site(Pose pose, int station, int stations) {}

    /**
     * Rings of blocks around the z axis. Blocks are numbered ring by ring in the order of {@code axialMm}, in each ring counter-clockwise from
     * the start angle.
     *
     * @param block the kind of block
     * @param count blocks in one ring, 2 to 10,000
     * @param innerRadiusMm distance from the axis to the centre of each front face (mm)
     * @param startAngleDeg direction of the first block, counter-clockwise from +x (degrees)
     * @param axialMm z of the centre of each ring (mm), at least one
     */
    record Rings(
            String block,
            int count,
            double innerRadiusMm,
            @Default("0") double startAngleDeg,
            @Default("[0]") List<Double> axialMm)
            implements Placement {
        public Rings {
            axialMm = List.copyOf(axialMm);
            Problems problems = new Problems("rings of " + block)
                    .within("count", count, 2, 10_000)
                    .above("inner_radius_mm", innerRadiusMm, 0)
                    .within("inner_radius_mm", innerRadiusMm, 0, FARTHEST_MM)
                    .finite("start_angle_deg", startAngleDeg)
                    .rule(!axialMm.isEmpty(), "axial_mm", "expected at least one position, found none");
            for (int i = 0; i < axialMm.size(); i++) {
                problems.within("axial_mm[" + i + "]", axialMm.get(i), -FARTHEST_MM, FARTHEST_MM);
            }
            problems.orThrow();
        }

        @Override
        public List<Site> sites(BlockKind kind) {
            List<Site> sites = new ArrayList<>();
            for (double z : axialMm) {
                for (int station = 0; station < count; station++) {
                    double angle = Math.toRadians(startAngleDeg) + 2 * Math.PI * station / count;
                    Vector3 outward = new Vector3(Math.cos(angle), Math.sin(angle), 0);
                    Vector3 centre = outward.times(innerRadiusMm).plus(new Vector3(0, 0, z));
                    sites.add(new Site(Facing.pose(centre, outward.times(-1), Vector3.Z), station, count));
                }
            }
            return sites;
        }
    }

    /**
     * A flat panel of blocks. Blocks are numbered along the columns first, from the −u, −v corner.
     *
     * @param block the kind of block
     * @param columns blocks along u, 1 to 1000
     * @param rows blocks along v, 1 to 1000
     * @param pitchMm centre-to-centre distances of blocks along u and v (mm); the third number is not used
     * @param centreMm centre of the front plane (mm)
     * @param facing direction in which the front looks, toward the field of view; any length
     * @param rowsAlong direction of +v, perpendicular to facing; any length
     */
    record Panel(
            String block,
            @Default("1") int columns,
            @Default("1") int rows,
            @Default("[0, 0, 0]") Vector3 pitchMm,
            Vector3 centreMm,
            Vector3 facing,
            @Default("[0, 0, 1]") Vector3 rowsAlong)
            implements Placement {
        public Panel {
            Problems problems = new Problems("panel of " + block)
                    .within("columns", columns, 1, 1000)
                    .within("rows", rows, 1, 1000)
                    .within("centre_mm", centreMm.norm(), 0, FARTHEST_MM);
            if (columns > 1) {
                problems.above("pitch_mm[0]", pitchMm.x(), 0);
            }
            if (rows > 1) {
                problems.above("pitch_mm[1]", pitchMm.y(), 0);
            }
            Facing.check(problems, facing, rowsAlong);
            problems.orThrow();
        }

        @Override
        public List<Site> sites(BlockKind kind) {
            Pose plane = Facing.pose(centreMm, facing, rowsAlong);
            List<Site> sites = new ArrayList<>();
            for (int row = 0; row < rows; row++) {
                for (int column = 0; column < columns; column++) {
                    Vector3 offset = new Vector3(
                            (column - 0.5 * (columns - 1)) * pitchMm.x(), (row - 0.5 * (rows - 1)) * pitchMm.y(), 0);
                    sites.add(new Site(plane.after(Pose.shift(offset)), 0, 1));
                }
            }
            return sites;
        }
    }

    /**
     * One block, placed freely.
     *
     * @param block the kind of block
     * @param centreMm centre of the front face (mm)
     * @param facing direction in which the front looks, toward the field of view; any length
     * @param rowsAlong direction of +v, perpendicular to facing; any length
     */
    record Single(
            String block,
            Vector3 centreMm,
            Vector3 facing,
            @Default("[0, 0, 1]") Vector3 rowsAlong) implements Placement {
        public Single {
            Problems problems = new Problems("block " + block).within("centre_mm", centreMm.norm(), 0, FARTHEST_MM);
            Facing.check(problems, facing, rowsAlong);
            problems.orThrow();
        }

        @Override
        public List<Site> sites(BlockKind kind) {
            return List.of(new Site(Facing.pose(centreMm, facing, rowsAlong), 0, 1));
        }
    }
}
