package org.raysheaf.geometry.phantom;

import java.util.ArrayList;
import java.util.List;
import java.util.function.DoubleSupplier;
import org.apache.commons.math3.random.SobolSequenceGenerator;
import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.simple.RandomSource;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.solid.Placed;

/**
 * The volume of a part that later parts leave to it.
 *
 * <p>If every later part is separated from it by a plane that is found at once (see {@link #apart}), this is the volume
 * of its solid, exactly. Otherwise it is estimated by randomised quasi-Monte Carlo: a Sobol sequence in three
 * dimensions fills the solid, the share of its points that no later part holds is the answer, and {@value #REPLICATES}
 * copies of the sequence under random shifts modulo 1 (Cranley &amp; Patterson 1976, SIAM J. Numer. Anal. 13:904) give
 * its mean and standard error. The shifts have a fixed seed for each part, so a phantom always gives the same numbers.
 */
final class VisibleVolume {
    private static final int REPLICATES = 16;
    private static final int POINTS = 1 << 14;
    private static final long SEED = 0x5eed_0001L;

    private VisibleVolume() {}

    static Estimate of(Placed[] solids, int part) {
        Placed solid = solids[part];
        List<Placed> covers = new ArrayList<>();
        for (int later = part + 1; later < solids.length; later++) {
            if (!apart(solid, solids[later])) {
                covers.add(solids[later]);
            }
        }
        return covers.isEmpty()
                ? Estimate.exactly(solid.volumeMm3())
                : visibleShare(solid, covers, SEED + part).times(solid.volumeMm3());
    }

    private static Estimate visibleShare(Placed solid, List<Placed> covers, long seed) {
        UniformRandomProvider random = RandomSource.XO_SHI_RO_256_PP.create(seed);
        double sum = 0;
        double squares = 0;
        for (int r = 0; r < REPLICATES; r++) {
            double share = visibleShare(solid, covers, random.nextDouble(), random.nextDouble(), random.nextDouble());
            sum += share;
            squares += share * share;
        }
        double mean = sum / REPLICATES;
        double variance = Math.max(0, squares / REPLICATES - mean * mean) / (REPLICATES - 1);
        // Shares that all agree do not mean that there is no error: one point more or less is the least that can be
        // seen.
        double resolution = 1.0 / ((double) REPLICATES * POINTS);
        return new Estimate(mean, Math.max(Math.sqrt(variance), resolution));
    }

    private static double visibleShare(Placed solid, List<Placed> covers, double... shift) {
        SobolSequenceGenerator sobol = new SobolSequenceGenerator(3);
        double[] point = new double[3];
        int visible = 0;
        for (int i = 0; i < POINTS; i++) {
            solid.pick(coordinates(sobol.nextVector(), shift), point);
            visible += covered(covers, point) ? 0 : 1;
        }
        return (double) visible / POINTS;
    }

    private static DoubleSupplier coordinates(double[] vector, double[] shift) {
        int[] next = {0};
        return () -> {
            int i = next[0]++;
            double x = vector[i] + shift[i];
            return x < 1 ? x : x - 1;
        };
    }

    private static boolean covered(List<Placed> covers, double[] point) {
        for (Placed cover : covers) {
            if (cover.contains(point[0], point[1], point[2])) {
                return true;
            }
        }
        return false;
    }

    /**
     * Whether some plane that is easy to guess separates two solids: perpendicular to an axis of either, to the line
     * between their centres, or to that line's part across an axis of either. That settles spheres, and cylinders,
     * cones and boxes side by side or end to end.
     */
    static boolean apart(Placed a, Placed b) {
        Vector3 between = b.pose().origin().minus(a.pose().origin());
        if (separates(between, a, b)) {
            return true;
        }
        for (Placed solid : List.of(a, b)) {
            for (Vector3 axis :
                    List.of(solid.pose().u(), solid.pose().v(), solid.pose().w())) {
                Vector3 across = between.minus(axis.times(axis.dot(between)));
                if (separates(axis, a, b) || separates(axis.times(-1), a, b) || separates(across, a, b)) {
                    return true;
                }
            }
        }
        return false;
    }

    /**
     * Whether a lies wholly on the near side and b wholly on the far side of a plane across n; touching is allowed,
     * rounding too.
     */
    private static boolean separates(Vector3 n, Placed a, Placed b) {
        double farthestOfA = a.reach(n.x(), n.y(), n.z());
        double nearestOfB = -b.reach(-n.x(), -n.y(), -n.z());
        return n.norm() > 0 && farthestOfA <= nearestOfB + 1e-9 * n.norm();
    }
}
