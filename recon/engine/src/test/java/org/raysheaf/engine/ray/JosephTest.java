package org.raysheaf.engine.ray;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

final class JosephTest {
    /** Single precision: weights are differences of coordinates up to a few tens, good to about 10⁻⁵ of a voxel each. */
    private static final double SINGLE = 3e-5;

    @Test
    void takesOneBilinearSamplePerPlane() {
        // Two planes across x at x = -0.5 and 0.5; the ray passes y = 0.25, z = 0 (rows y = -0.5 and 0.5, one row z =
        // 0).
        Grid grid = new Grid(2, 2, 1, 1, 1, 1, Pose.IDENTITY);
        Image image = new Image(grid, new float[] {1, 2, 3, 5});
        float integral = forward(grid, image, new Vector3(-4, 0.25, 0), new Vector3(4, 0.25, 0));
        assertThat((double) integral).isCloseTo(0.25 * 1 + 0.75 * 2 + 0.25 * 3 + 0.75 * 5, within(1e-6));
    }

    @Test
    void countsSamplesNearTheEdgeWithTheirInsideShare() {
        Grid grid = Grid.centred(4, 4, 4, 1);
        float integral =
                forward(grid, Image.filled(grid, 1), new Vector3(-9, 1.5 + 0.75, 0.5), new Vector3(9, 1.5 + 0.75, 0.5));
        assertThat((double) integral).isCloseTo(4 * 0.25, within(1e-5));
    }

    @Test
    void endsAtTheEndPoints() {
        Grid grid = Grid.centred(10, 10, 10, 1);
        float integral = forward(grid, Image.filled(grid, 1), new Vector3(-1.2, 0, 0), new Vector3(1.8, 0, 0));
        assertThat((double) integral).isCloseTo(3, within(1e-6)); // planes at -0.5, 0.5, 1.5
    }

    @Test
    void agreesWithTheTwinOnRandomRays() {
        Random random = new Random(21);
        List<Grid> grids = List.of(
                Grid.centred(16, 12, 20, 0.5),
                Grid.centred(1, 1, 1, 2),
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
        for (Grid grid : grids) {
            for (int i = 0; i < 600; i++) {
                double extent = i % 3 == 0 ? 3 : 30;
                check(grid, point(random, extent), point(random, extent));
            }
        }
    }

    @Test
    void agreesWithTheTwinOnAwkwardRays() {
        Grid grid = Grid.centred(6, 6, 6, 1);
        List<Vector3[]> rays = new ArrayList<>();
        double[] heights = {0, 0.5, 2.5, 2.75, 3, 3.25, 3.499, 3.6, -2.5, -3, -3.25, -7};
        for (double a : heights) {
            for (double b : heights) {
                rays.add(new Vector3[] {new Vector3(-9, a, b), new Vector3(9, a, b)});
                rays.add(new Vector3[] {new Vector3(a, 9, b), new Vector3(a, -9, b)});
                rays.add(new Vector3[] {new Vector3(a, b, -9), new Vector3(a, b, 9)});
                rays.add(new Vector3[] {new Vector3(a, b, -0.3), new Vector3(a, b, 0.4)}); // ends between two planes
                rays.add(new Vector3[] {new Vector3(-9, a, b), new Vector3(9, b, a)});
                rays.add(new Vector3[] {new Vector3(-9, -9, a), new Vector3(9, 9, b)});
            }
        }
        rays.add(new Vector3[] {new Vector3(-9, -9, -9), new Vector3(9, 9, 9)});
        rays.add(new Vector3[] {new Vector3(9, -9, -9), new Vector3(-9, 9, 9)});
        rays.add(new Vector3[] {new Vector3(1, 1, 1), new Vector3(1, 1, 1)});
        rays.forEach(ray -> check(grid, ray[0], ray[1]));
    }

    /** On some plane such a ray stands exactly on the outermost row of the border, which has no upper neighbour. */
    @Test
    void agreesWithTheTwinOnRaysThatLeaveThroughTheLastRow() {
        for (int n : new int[] {5, 6}) {
            Grid grid = Grid.centred(n, n, n, 1);
            for (double offset = -9; offset <= 9; offset += 0.5) {
                check(grid, new Vector3(offset - 4.5, -9, 0), new Vector3(offset + 4.5, 9, 0));
                check(grid, new Vector3(offset - 4.5, 0, -9), new Vector3(offset + 4.5, 0, 9));
            }
        }
    }

    @Test
    void staysWithinLargeGrids() {
        Grid grid = new Grid(32_000, 2, 2, 0.1, 0.1, 0.1, Pose.IDENTITY);
        Lattice lattice = new Lattice(grid);
        float[] ones = lattice.fromImage(Image.filled(grid, 1));
        Walks walks = new Walks(lattice, 1);
        Random random = new Random(22);
        for (int i = 0; i < 300; i++) {
            walks.set(0, ray(point(random, 4000), point(random, 0.6)), 0, 1);
            walks.trim(0, ones);
            back(walks, 0, 1, ones.clone());
        }
        assertThat(ones[lattice.stride(0) + lattice.stride(1) + 1]).isEqualTo(1f);
    }

    @Test
    void ignoresRaysThatAreNoRays() {
        Lattice lattice = new Lattice(Grid.centred(4, 4, 4, 1));
        Walks walks = new Walks(lattice, 1);
        for (float bad : new float[] {Float.NaN, Float.POSITIVE_INFINITY, Float.NEGATIVE_INFINITY}) {
            walks.set(0, new float[] {0, 0, 0, 9, bad, 0}, 0, 1);
            assertThat(walks.planes(0)).isZero();
        }
        walks.set(0, new float[] {1, 1, 1, 1, 1, 1}, 0, 1);
        assertThat(walks.planes(0)).isZero();
        assertThat(forward(walks, 0, new float[lattice.size()])).isZero();
    }

    @Test
    void forwardAndBackAreTransposed() {
        Lattice lattice = new Lattice(new Grid(12, 9, 15, 0.5, 0.7, 0.6, Pose.IDENTITY));
        Random random = new Random(23);
        float[] image = lattice.fromImage(noise(lattice.grid(), random));
        float[] accumulator = new float[lattice.size()];
        int rays = 3000;
        Walks walks = new Walks(lattice, rays);
        double measured = 0;
        for (int k = 0; k < rays; k++) {
            walks.set(k, ray(point(random, 20), point(random, 20)), 0, random.nextDouble());
            float amount = random.nextFloat();
            measured += (double) amount * forward(walks, k, image);
            back(walks, k, amount, accumulator);
        }
        double spread = 0;
        for (int j = 0; j < image.length; j++) {
            spread += (double) image[j] * accumulator[j];
        }
        assertThat(spread / measured).isCloseTo(1, within(1e-6)); // <A x, y> = <x, Aᵀ y>, single-precision sums
    }

    @Test
    void trimmingLosesNothing() {
        Grid grid = Grid.centred(20, 20, 20, 1);
        Lattice lattice = new Lattice(grid);
        float[] support = new float[lattice.size()];
        Image image = new Image(grid);
        for (int x = 6; x < 13; x++) {
            for (int y = 8; y < 15; y++) {
                for (int z = 3; z < 11; z++) {
                    image.values()[grid.index(x, y, z)] = 1;
                }
            }
        }
        System.arraycopy(lattice.fromImage(image), 0, support, 0, support.length);
        Walks walks = new Walks(lattice, 2);
        Random random = new Random(24);
        int shorter = 0;
        int missed = 0;
        for (int i = 0; i < 1000; i++) {
            float[] ray = ray(point(random, 40), point(random, 40));
            walks.set(0, ray, 0, 1);
            walks.set(1, ray, 0, 1);
            boolean meets = walks.trim(1, support);
            double whole = forward(walks, 0, support);
            assertThat(meets || whole < 1e-3).isTrue();
            assertThat(meets && whole == 0).isFalse();
            assertThat((double) forward(walks, 1, support)).isCloseTo(whole, within(1e-3)); // at most 10⁻⁴ per plane
            shorter += walks.planes(1) < walks.planes(0) ? 1 : 0;
            missed += meets ? 0 : 1;
        }
        assertThat(shorter).isGreaterThan(300);
        assertThat(missed).isBetween(100, 900);
    }

    private static void check(Grid grid, Vector3 start, Vector3 end) {
        Lattice lattice = new Lattice(grid);
        Walks walks = new Walks(lattice, 1);
        float[] ray = ray(start, end);
        walks.set(0, ray, 0, 1);
        float[] accumulator = new float[lattice.size()];
        back(walks, 0, 1, accumulator);
        float[] row = lattice.toImage(accumulator).values();
        // The twin starts from the same single-precision end points.
        double[] expected =
                JosephTwin.row(grid, new Vector3(ray[0], ray[1], ray[2]), new Vector3(ray[3], ray[4], ray[5]));
        for (int j = 0; j < row.length; j++) {
            assertThat((double) row[j])
                    .as("ray %s to %s, voxel %d", start, end, j)
                    .isCloseTo(expected[j], within(SINGLE));
        }
    }

    private static float forward(Grid grid, Image image, Vector3 start, Vector3 end) {
        Lattice lattice = new Lattice(grid);
        Walks walks = new Walks(lattice, 1);
        walks.set(0, ray(start, end), 0, 1);
        return forward(walks, 0, lattice.fromImage(image));
    }

    static float forward(Walks walks, int k, float[] image) {
        Joseph joseph = new Joseph(walks.lattice());
        joseph.aim(walks, k);
        return joseph.forward(image);
    }

    private static void back(Walks walks, int k, float amount, float[] accumulator) {
        Joseph joseph = new Joseph(walks.lattice());
        joseph.aim(walks, k);
        joseph.back(amount, accumulator);
    }

    static float[] ray(Vector3 start, Vector3 end) {
        return new float[] {
            (float) start.x(), (float) start.y(), (float) start.z(), (float) end.x(), (float) end.y(), (float) end.z()
        };
    }

    private static Vector3 point(Random random, double extent) {
        return new Vector3(
                extent * (random.nextDouble() - 0.5),
                extent * (random.nextDouble() - 0.5),
                extent * (random.nextDouble() - 0.5));
    }

    private static Image noise(Grid grid, Random random) {
        Image image = new Image(grid);
        for (int j = 0; j < image.values().length; j++) {
            image.values()[j] = random.nextFloat();
        }
        return image;
    }
}
