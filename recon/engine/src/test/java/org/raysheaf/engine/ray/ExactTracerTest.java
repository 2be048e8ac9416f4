package org.raysheaf.engine.ray;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

/** The exact tracer against closed forms, and the projector against the exact tracer. */
final class ExactTracerTest {
    /** Only rounding separates a sum of pieces from the whole. */
    private static final double ROUNDING = 1e-10;

    private static final Grid BOX = new Grid(10, 8, 12, 1, 2.5, 2.5, Pose.IDENTITY);

    @Test
    void sumsToTheChordThroughTheGrid() {
        Random random = new Random(11);
        for (int i = 0; i < 2000; i++) {
            Vector3 start = point(random, 40);
            Vector3 end = point(random, 40);
            assertThat(sum(ExactTracer.row(BOX, start, end))).isCloseTo(chord(BOX, start, end), within(ROUNDING));
        }
    }

    /** The mean chord of a convex body is 4 V / S (Cauchy): the box 10 x 20 x 30 has 10.9091 (reference: Cauchy's formula). */
    @Test
    void hasTheMeanChordOfABox() {
        Random random = new Random(12);
        double sum = 0;
        double hits = 0;
        for (int i = 0; i < 40_000; i++) {
            Vector3 direction = new Vector3(random.nextGaussian(), random.nextGaussian(), random.nextGaussian()).unit();
            Vector3 side = direction
                    .cross(Math.abs(direction.x()) < 0.5 ? Vector3.X : Vector3.Y)
                    .unit();
            Vector3 other = direction.cross(side);
            Vector3 middle =
                    side.times(40 * (random.nextDouble() - 0.5)).plus(other.times(40 * (random.nextDouble() - 0.5)));
            double chord = chord(BOX, middle.minus(direction.times(100)), middle.plus(direction.times(100)));
            sum += chord;
            hits += chord > 0 ? 1 : 0;
        }
        assertThat(sum / hits).isCloseTo(10.9091, within(0.1)); // 40,000 rays: standard error about 0.035
    }

    /**
     * At a side of the grid the projector's weight falls from 1 to 0 within half a voxel on either side. A ray that crosses all of that
     * ramp gets the right length; one that begins, ends or enters another ramp within it need not, and is left out here.
     */
    @Test
    void josephAgreesToWithinOneStep() {
        Grid cube = Grid.centred(20, 20, 20, 0.7);
        Lattice lattice = new Lattice(cube);
        float[] ones = lattice.fromImage(Image.filled(cube, 1));
        Walks walks = new Walks(lattice, 1);
        Random random = new Random(13);
        int compared = 0;
        for (int i = 0; i < 4000; i++) {
            Vector3 start = point(random, 30);
            Vector3 end = point(random, 30);
            if (crossesWholeRamps(cube, start, end)) {
                walks.set(0, JosephTest.ray(start, end), 0, 1);
                Vector3 d = end.minus(start);
                double step = 0.7 * d.norm() / Math.max(Math.abs(d.x()), Math.max(Math.abs(d.y()), Math.abs(d.z())));
                assertThat((double) JosephTest.forward(walks, 0, ones))
                        .isCloseTo(sum(ExactTracer.row(cube, start, end)), within(step));
                compared++;
            }
        }
        assertThat(compared).isGreaterThan(2000);
    }

    private static boolean crossesWholeRamps(Grid cube, Vector3 start, Vector3 end) {
        double[] o = array(cube.indices(start));
        double[] e = array(cube.indices(end));
        int w = 0;
        for (int axis = 1; axis < 3; axis++) {
            w = Math.abs(e[axis] - o[axis]) > Math.abs(e[w] - o[w]) ? axis : w;
        }
        double from = Math.max(-0.5, Math.min(o[w], e[w]));
        double to = Math.min(cube.nx() - 0.5, Math.max(o[w], e[w]));
        int pieces = 500;
        for (int i = 0; i <= pieces && from < to; i++) {
            double t = (from + (to - from) * i / pieces - o[w]) / (e[w] - o[w]);
            int ramps = 0;
            for (int axis = 0; axis < 3; axis++) {
                double distance = Math.abs(o[axis] + t * (e[axis] - o[axis]) - 0.5 * (cube.nx() - 1)) - 0.5 * cube.nx();
                ramps += axis != w && Math.abs(distance) < 0.5 ? 1 : 0;
            }
            boolean atEnd = i == 0 || i == pieces;
            if (ramps > (atEnd ? 0 : 1)) {
                return false;
            }
        }
        return true;
    }

    private static double[] array(Vector3 p) {
        return new double[] {p.x(), p.y(), p.z()};
    }

    private static Vector3 point(Random random, double extent) {
        return new Vector3(
                extent * (random.nextDouble() - 0.5),
                extent * (random.nextDouble() - 0.5),
                extent * (random.nextDouble() - 0.5));
    }

    private static double sum(double[] row) {
        return Arrays.stream(row).sum();
    }

    /** Length of a segment within the grid's box: the slab method. */
    private static double chord(Grid grid, Vector3 start, Vector3 end) {
        Vector3 d = end.minus(start);
        double[] o = {start.x(), start.y(), start.z()};
        double[] e = {d.x(), d.y(), d.z()};
        double[] half = {
            grid.nx() * grid.spacingXMm() / 2, grid.ny() * grid.spacingYMm() / 2, grid.nz() * grid.spacingZMm() / 2
        };
        double in = 0;
        double out = 1;
        for (int axis = 0; axis < 3; axis++) {
            double a = (-half[axis] - o[axis]) / e[axis];
            double b = (half[axis] - o[axis]) / e[axis];
            in = Math.max(in, Math.min(a, b));
            out = Math.min(out, Math.max(a, b));
        }
        return Math.max(0, out - in) * d.norm();
    }
}
