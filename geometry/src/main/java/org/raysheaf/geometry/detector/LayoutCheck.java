package org.raysheaf.geometry.detector;

import java.util.List;
import java.util.Locale;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Problems;

/** Looks for blocks that cannot stand where a description puts them. */
final class LayoutCheck {
    /** Penetration that is taken for rounding of the figures in a description (mm). */
    private static final double TOUCH_MM = 1e-6;

    /** Enough examples; a wrong radius makes every neighbour overlap. */
    private static final int MOST_REPORTED = 5;

    private LayoutCheck() {}

    static void check(Problems problems, FieldOfView view, PairRule pairs, List<PlacedBlock> blocks) {
        checkFacing(problems, view, blocks);
        checkOverlaps(problems, blocks);
        boolean anyPair = false;
        for (int i = 0; i < blocks.size() && !anyPair; i++) {
            for (int j = 0; j < i && !anyPair; j++) {
                anyPair = pairs.admits(blocks.get(i), blocks.get(j));
            }
        }
        problems.rule(
                anyPair,
                "pairs.blocks_apart",
                "expected a distance that lets some pair of blocks through, found " + pairs.blocksApart());
    }

    private static void checkFacing(Problems problems, FieldOfView view, List<PlacedBlock> blocks) {
        int reported = 0;
        for (PlacedBlock block : blocks) {
            String field = "placements[" + block.placement() + "]";
            boolean faces = toward(block, view) > TOUCH_MM;
            boolean clear = !reachesInto(block, view);
            if (reported < MOST_REPORTED && !(faces && clear)) {
                reported++;
                problems.rule(
                        faces,
                        field,
                        "block " + block.index() + " does not face the field of view; turn its front toward the axis");
                problems.rule(
                        clear || !faces,
                        field,
                        "block " + block.index() + " reaches into the field of view of radius " + view.radiusMm()
                                + " mm; move it outward or make the field smaller");
            }
        }
    }

    /** How far the field of view reaches in front of the block's front plane (mm); negative if all of it lies behind. */
    private static double toward(PlacedBlock block, FieldOfView view) {
        Vector3 front = block.pose().w().times(-1);
        double support =
                view.radiusMm() * Math.hypot(front.x(), front.y()) + 0.5 * view.lengthMm() * Math.abs(front.z());
        return support - front.dot(block.pose().origin());
    }

    /** Whether a point of the block's box lies inside the cylinder; tried on a lattice of points over its surface. */
    private static boolean reachesInto(PlacedBlock block, FieldOfView view) {
        final int steps = 20;
        BlockKind kind = block.kind();
        for (int i = 0; i <= steps; i++) {
            for (int j = 0; j <= steps; j++) {
                for (int k = 0; k <= steps; k++) {
                    if (i % steps != 0 && j % steps != 0 && k % steps != 0) {
                        continue;
                    }
                    Vector3 p = block.pose()
                            .apply(new Vector3(
                                    (i / (double) steps - 0.5) * kind.widthMm(),
                                    (j / (double) steps - 0.5) * kind.heightMm(),
                                    k / (double) steps * kind.depthMm()));
                    double r = Math.hypot(p.x(), p.y());
                    if (r < view.radiusMm() - TOUCH_MM && Math.abs(p.z()) < 0.5 * view.lengthMm() - TOUCH_MM) {
                        return true;
                    }
                }
            }
        }
        return false;
    }

    private static void checkOverlaps(Problems problems, List<PlacedBlock> blocks) {
        int reported = 0;
        for (int i = 0; i < blocks.size() && reported < MOST_REPORTED; i++) {
            for (int j = 0; j < i && reported < MOST_REPORTED; j++) {
                double depth = penetration(blocks.get(i), blocks.get(j));
                if (depth > TOUCH_MM) {
                    reported++;
                    problems.rule(
                            false,
                            "placements[" + blocks.get(i).placement() + "]",
                            String.format(
                                    Locale.ROOT,
                                    "block %d overlaps block %d by %.3g mm; move them apart",
                                    i,
                                    j,
                                    depth));
                }
            }
        }
    }

    /** Separating-axis test for two boxes: the smallest overlap over the 15 candidate axes (mm), not positive if they are apart. */
    static double penetration(PlacedBlock a, PlacedBlock b) {
        Vector3 between = b.centre().minus(a.centre());
        if (between.norm() >= a.boundingRadiusMm() + b.boundingRadiusMm()) {
            return 0;
        }
        Vector3[] axesA = {a.pose().u(), a.pose().v(), a.pose().w()};
        Vector3[] axesB = {b.pose().u(), b.pose().v(), b.pose().w()};
        double least = Double.POSITIVE_INFINITY;
        for (int i = 0; i < 3; i++) {
            least = Math.min(least, overlap(axesA[i], between, a, b));
            least = Math.min(least, overlap(axesB[i], between, a, b));
            for (int j = 0; j < 3; j++) {
                Vector3 edge = axesA[i].cross(axesB[j]);
                if (edge.norm() > 1e-6) {
                    least = Math.min(least, overlap(edge.unit(), between, a, b));
                }
            }
        }
        return least;
    }

    private static double overlap(Vector3 axis, Vector3 between, PlacedBlock a, PlacedBlock b) {
        return reach(axis, a) + reach(axis, b) - Math.abs(axis.dot(between));
    }

    private static double reach(Vector3 axis, PlacedBlock block) {
        return 0.5
                * (block.kind().widthMm() * Math.abs(axis.dot(block.pose().u()))
                        + block.kind().heightMm()
                                * Math.abs(axis.dot(block.pose().v()))
                        + block.kind().depthMm()
                                * Math.abs(axis.dot(block.pose().w())));
    }
}
