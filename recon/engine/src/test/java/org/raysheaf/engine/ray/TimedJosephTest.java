package org.raysheaf.engine.ray;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafBundle.WeightLaw;

/** Rays with a normal density along them. */
final class TimedJosephTest {
    /** As in {@link JosephTest}, for coordinates and centre each. */
    private static final double SINGLE = 6e-5;

    @Test
    void agreesWithTheTwinOnRandomRays() {
        Random random = new Random(51);
        List<Grid> grids = List.of(
                Grid.centred(16, 12, 20, 0.5),
                Grid.centred(1, 5, 2, 1),
                new Grid(9, 7, 5, 0.4, 1.1, 2.3, Pose.IDENTITY),
                new Grid(
                        6,
                        8,
                        7,
                        1,
                        0.8,
                        1.3,
                        Pose.shift(new Vector3(1, -2, 0.5)).after(Pose.rotation(new Vector3(1, 2, 3), 0.7))));
        int met = 0;
        for (Grid grid : grids) {
            for (int i = 0; i < 600; i++) {
                Vector3 start = point(random, i % 3 == 0 ? 3 : 30);
                Vector3 end = point(random, i % 3 == 0 ? 3 : 30);
                double length = end.minus(start).norm();
                double sd = Math.exp(6 * random.nextDouble() - 3);
                met += check(grid, start, end, length * random.nextDouble(), sd);
            }
        }
        assertThat(met).isGreaterThan(400);
    }

    /** Returns 1 if the ray met the grid. */
    private static int check(Grid grid, Vector3 start, Vector3 end, double centreMm, double sdMm) {
        Lattice lattice = new Lattice(grid);
        Walks walks = walks(lattice, start, end, centreMm, sdMm);
        double[] expected = JosephTwin.row(grid, start, end, centreMm, sdMm);
        double largest = Arrays.stream(expected).max().orElseThrow();
        double tolerance = SINGLE * (1e-3 + largest * (1 + 1 / sdMm));
        Joseph joseph = new Joseph(lattice);
        joseph.aim(walks, 0);
        float[] back = new float[lattice.size()];
        joseph.back(1, back);
        float[] found = lattice.toImage(back).values();
        for (int j = 0; j < expected.length; j++) {
            assertThat((double) found[j]).isCloseTo(expected[j], within(tolerance));
        }
        float[] image = new float[grid.voxels()];
        double integral = 0;
        for (int j = 0; j < image.length; j++) {
            image[j] = (j * 7 % 11) / 11f;
            integral += image[j] * expected[j];
        }
        assertThat((double) joseph.forward(lattice.fromImage(new Image(grid, image))))
                .isCloseTo(integral, within(tolerance * 20));
        return largest > 0 ? 1 : 0;
    }

    private static Walks walks(Lattice lattice, Vector3 start, Vector3 end, double centreMm, double sdMm) {
        SheafBundle bundle = new SheafBundle(1, 1, WeightLaw.GAUSSIAN);
        bundle.set(bundle.append(), start.x(), start.y(), start.z(), end.x(), end.y(), end.z(), 1);
        bundle.place(0, centreMm, sdMm);
        Walks walks = new Walks(lattice, 1, WeightLaw.GAUSSIAN);
        walks.set(0, bundle, 0);
        return walks;
    }

    private static Vector3 point(Random random, double extent) {
        return new Vector3(
                extent * (random.nextDouble() - 0.5),
                extent * (random.nextDouble() - 0.5),
                extent * (random.nextDouble() - 0.5));
    }

    @Test
    void weightsFollowTheExponential() {
        float[] counting = new float[200];
        for (int j = 0; j < counting.length; j++) {
            counting[j] = j;
        }
        float[] weights = new float[200];
        for (double width : new double[] {0.41, 1, 7.3, 33}) {
            int planes = (int) (6 * width);
            Joseph.weigh(planes, counting, (float) (3 * width), (float) (1 / width), weights);
            for (int j = 0; j < planes; j++) {
                double y = 0.5 * (j / width - 3) * (j / width - 3);
                // the rounding of the centre alone shifts by 2e-7 widths, and the slope is 3 at most
                assertThat((double) weights[j] / Math.exp(-y)).isCloseTo(1, within(6e-6));
            }
        }
    }

    /**
     * Over all time differences the weights of every voxel are those of the plain ray, truncation made good: even where the density is narrower
     * than a voxel, and where the ray's weight is cut by the grid.
     */
    @Test
    void weightsOfAllTimesAddUpToThePlainRay() {
        Grid grid = new Grid(12, 10, 9, 1, 1.2, 0.8, Pose.IDENTITY);
        Lattice lattice = new Lattice(grid);
        Vector3 start = new Vector3(-20, -3, 2);
        Vector3 end = new Vector3(25, 4, -3);
        double[] plain = JosephTwin.row(grid, start, end);
        for (double sd : new double[] {0.1, 0.7, 3}) {
            // planes come and go at the cut-off, so the rectangle rule is off by the cut-off's density times half a
            // step
            double step = 0.004;
            double[] sum = new double[lattice.size()];
            Joseph joseph = new Joseph(lattice);
            for (double centre = 0.5 * step; centre < end.minus(start).norm(); centre += step) {
                Walks walks = walks(lattice, start, end, centre, sd);
                if (walks.planes(0) > 0) {
                    joseph.aim(walks, 0);
                    float[] back = new float[lattice.size()];
                    joseph.back((float) step, back);
                    for (int j = 0; j < sum.length; j++) {
                        sum[j] += back[j];
                    }
                }
            }
            float[] sums = new float[sum.length];
            for (int j = 0; j < sums.length; j++) {
                sums[j] = (float) sum[j];
            }
            float[] found = lattice.toImage(sums).values();
            for (int j = 0; j < plain.length; j++) {
                assertThat((double) found[j]).as("sd %s", sd).isCloseTo(plain[j], within(1e-4));
            }
        }
    }

    /** What lies out of reach of the density, or has no place or width that is a number, is an empty walk. */
    @Test
    void isEmptyWhereThereIsNoDensity() {
        Lattice lattice = new Lattice(Grid.centred(10, 10, 10, 1));
        Vector3 start = new Vector3(-50, 0, 0);
        Vector3 end = new Vector3(50, 0, 0);
        assertThat(walks(lattice, start, end, 50, 2).planes(0)).isEqualTo(10);
        assertThat(walks(lattice, start, end, 50, 0.5).planes(0)).isEqualTo(4); // ±1.94 planes
        assertThat(walks(lattice, start, end, 20, 2).planes(0)).isZero();
        assertThat(walks(lattice, start, end, Double.NaN, 2).planes(0)).isZero();
        assertThat(walks(lattice, start, end, 50, Double.NaN).planes(0)).isZero();
        assertThat(walks(lattice, start, end, Double.POSITIVE_INFINITY, 2).planes(0))
                .isZero();
        assertThat(walks(lattice, start, end, 50, Double.POSITIVE_INFINITY).planes(0))
                .isZero();
    }

    /** Trimmed to activity on one side, the density stays where it was. */
    @Test
    void trimmingLeavesTheDensityInPlace() {
        Grid grid = Grid.centred(20, 4, 4, 1);
        Lattice lattice = new Lattice(grid);
        Image support = new Image(grid);
        for (int x = 9; x < 14; x++) {
            for (int j = 0; j < 16; j++) {
                support.values()[grid.index(x, j / 4, j % 4)] = 1;
            }
        }
        float[] ones = lattice.fromImage(support);
        for (Vector3 end : List.of(new Vector3(30, 0.3, 0.2), new Vector3(-30, 0.3, 0.2))) {
            Walks walks = walks(lattice, new Vector3(-end.x(), 0.1, 0.4), end, 31, 4);
            Joseph joseph = new Joseph(lattice);
            joseph.aim(walks, 0);
            float before = joseph.forward(ones);
            assertThat(walks.trim(0, ones)).isTrue();
            assertThat(walks.planes(0)).isEqualTo(5);
            joseph.aim(walks, 0);
            assertThat(joseph.forward(ones)).isCloseTo(before, within(1e-6f));
        }
    }
}
