package org.raysheaf.geometry.solid;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.simple.RandomSource;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;
import org.raysheaf.geometry.frame.Vector3;

/** Every solid, under random poses, against its own {@code contains}: the slow and obvious way. */
class SolidTwinTest {
    private static final double HALF_LINE = 40;
    private static final double STEP = 0.2;

    static List<Shape> solids() {
        return Zoo.solids();
    }

    @ParameterizedTest
    @MethodSource("solids")
    void clipFindsTheSameSegmentAsMarching(Shape solid) {
        UniformRandomProvider random = RandomSource.XO_SHI_RO_256_PP.create(7);
        double[] span = new double[2];
        int hits = 0;
        for (int i = 0; i < 400; i++) {
            Placed placed = new Placed(solid, Zoo.pose(random));
            Vector3 direction = Zoo.direction(random);
            Vector3 origin = placed.pose().origin().plus(Zoo.point(random, 8));
            double length = random.nextDouble(0.1, 10); // of the direction vector handed in
            Vector3 d = direction.times(length);
            boolean hit = placed.clip(origin.x(), origin.y(), origin.z(), d.x(), d.y(), d.z(), span);
            double first = march(placed, origin, direction, STEP);
            double last = -march(placed, origin, direction.times(-1), STEP);
            if (first > last) { // marching found nothing: at most a sliver
                assertThat(hit ? (span[1] - span[0]) * length : 0).isLessThan(STEP);
            } else {
                hits++;
                assertThat(hit).isTrue();
                assertThat(span[0] * length).isCloseTo(first, within(1e-8));
                assertThat(span[1] * length).isCloseTo(last, within(1e-8));
            }
        }
        assertThat(hits).isGreaterThan(50);
    }

    /** The distance of the first surface, stepping forward from far behind, then halving the last step. */
    private static double march(Solid solid, Vector3 origin, Vector3 direction, double step) {
        double t = -HALF_LINE;
        while (!contains(solid, origin, direction, t)) {
            t += step;
            if (t > HALF_LINE) {
                return Double.POSITIVE_INFINITY;
            }
        }
        double outside = t - step;
        double inside = t;
        for (int i = 0; i < 40; i++) {
            double middle = 0.5 * (outside + inside);
            if (contains(solid, origin, direction, middle)) {
                inside = middle;
            } else {
                outside = middle;
            }
        }
        return inside;
    }

    private static boolean contains(Solid solid, Vector3 origin, Vector3 direction, double t) {
        Vector3 p = origin.plus(direction.times(t));
        return solid.contains(p.x(), p.y(), p.z());
    }

    @ParameterizedTest
    @MethodSource("solids")
    void volumeIsTheShareOfItsBounds(Shape solid) {
        UniformRandomProvider random = RandomSource.XO_SHI_RO_256_PP.create(8);
        Placed placed = new Placed(solid, Zoo.pose(random));
        Vector3 centre = placed.bounds().centre();
        Vector3 half = placed.bounds().halfExtents();
        int points = 200_000;
        int inside = 0;
        for (int i = 0; i < points; i++) {
            Vector3 p = Zoo.point(random, 1);
            inside += placed.contains(
                            centre.x() + p.x() * half.x(), centre.y() + p.y() * half.y(), centre.z() + p.z() * half.z())
                    ? 1
                    : 0;
        }
        double box = 8 * half.x() * half.y() * half.z();
        double share = solid.volumeMm3() / box;
        double error = Math.sqrt(share * (1 - share) / points);
        assertThat((double) inside / points).isCloseTo(share, within(3.5 * error));
    }

    /** First and second moments of picked points against points found by rejection; every picked point lies inside. */
    @ParameterizedTest
    @MethodSource("solids")
    void pickedPointsFillTheVolumeEvenly(Shape solid) {
        UniformRandomProvider random = RandomSource.XO_SHI_RO_256_PP.create(9);
        Placed placed = new Placed(solid, Zoo.pose(random));
        Vector3 centre = placed.bounds().centre();
        Vector3 half = placed.bounds().halfExtents();
        int points = 100_000;
        double[] picked = new double[6];
        double[] rejected = new double[6];
        double[] p = new double[3];
        int strays = 0;
        for (int i = 0; i < points; i++) {
            placed.pick(random::nextDouble, p);
            Vector3 v = new Vector3(p[0], p[1], p[2]);
            Vector3 shrunk = centre.plus(v.minus(centre).times(1 - 1e-12));
            strays += placed.contains(shrunk.x(), shrunk.y(), shrunk.z()) ? 0 : 1;
            addMoments(v, centre, half, picked);
            Vector3 q;
            do {
                Vector3 r = Zoo.point(random, 1);
                q = centre.plus(new Vector3(r.x() * half.x(), r.y() * half.y(), r.z() * half.z()));
            } while (!placed.contains(q.x(), q.y(), q.z()));
            addMoments(q, centre, half, rejected);
        }
        assertThat(strays).isZero();
        // scaled coordinates lie in [−1, 1], so a moment's variance is at most 1 and a difference's standard error
        // at most √(2/n); the solids here have about a third of that
        double tolerance = 2 * Math.sqrt(2.0 / points);
        for (int m = 0; m < 6; m++) {
            assertThat(picked[m] / points).as("moment %d", m).isCloseTo(rejected[m] / points, within(tolerance));
        }
    }

    private static void addMoments(Vector3 p, Vector3 centre, Vector3 half, double[] sums) {
        double x = (p.x() - centre.x()) / half.x();
        double y = (p.y() - centre.y()) / half.y();
        double z = (p.z() - centre.z()) / half.z();
        sums[0] += x;
        sums[1] += y;
        sums[2] += z;
        sums[3] += x * x;
        sums[4] += y * y;
        sums[5] += z * z;
    }
}
