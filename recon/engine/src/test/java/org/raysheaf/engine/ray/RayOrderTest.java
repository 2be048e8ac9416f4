package org.raysheaf.engine.ray;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.Comparator;
import java.util.HashMap;
import java.util.Map;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.frame.Grid;

final class RayOrderTest {
    @Test
    void sortsByCodeAndKeepsTheOrderOfEquals() {
        Random random = new Random(31);
        for (int n : new int[] {0, 1, 2, 1000, 70_000}) {
            long[] entries = new long[n + 2];
            for (int i = 0; i < entries.length; i++) {
                entries[i] = (random.nextLong() & (n > 10 ? -1L : 1L << 40)) >>> 30 << 30 | (entries.length - i);
            }
            Long[] expected = Arrays.stream(entries, 1, n + 1).boxed().toArray(Long[]::new);
            Arrays.sort(expected, Comparator.comparing((Long entry) -> entry >>> 30));
            long first = entries[0];
            long last = entries[n + 1];
            RayOrder.sort(entries, 1, n + 1);
            assertThat(Arrays.stream(entries, 1, n + 1).boxed().toArray()).isEqualTo(expected);
            assertThat(entries[0]).isEqualTo(first);
            assertThat(entries[n + 1]).isEqualTo(last);
        }
    }

    /** Neighbours should share voxels: against an order by chance, the mean distance at both ends must fall by a large factor. */
    @Test
    void bringsLikeRaysTogether() {
        Grid grid = Grid.centred(64, 64, 96, 1);
        int rays = 20_000;
        Walks walks = new Walks(new Lattice(grid), rays);
        float[][] ends = new float[rays][];
        Random random = new Random(32);
        long[] order = new long[rays];
        for (int k = 0; k < rays; k++) {
            ends[k] = line(random);
            walks.set(k, ends[k], 0, 1);
            order[k] = RayOrder.entry(walks, k, 1);
        }
        double before = meanStep(ends, order);
        RayOrder.sort(order, 0, rays);
        assertThat(Arrays.stream(order).mapToInt(RayOrder::number).distinct().count())
                .isEqualTo(rays);
        assertThat(meanStep(ends, order)).isLessThan(before / 5);
    }

    /** Along x, from one plane to the other. */
    private static float[] line(Random random) {
        return new float[] {
            -32, 64 * random.nextFloat() - 32, 64 * random.nextFloat() - 32,
            32, 64 * random.nextFloat() - 32, 64 * random.nextFloat() - 32
        };
    }

    private static double meanStep(float[][] ends, long[] order) {
        double sum = 0;
        for (int i = 1; i < order.length; i++) {
            float[] a = ends[RayOrder.number(order[i - 1])];
            float[] b = ends[RayOrder.number(order[i])];
            sum += Math.hypot(a[1] - b[1], a[2] - b[2]) + Math.hypot(a[4] - b[4], a[5] - b[5]);
        }
        return sum / order.length;
    }

    /** The published loops, for any number of coordinates. */
    private static long twin(int bits, int... x) {
        for (int bit = 1 << (bits - 1); bit > 1; bit >>= 1) {
            for (int i = 0; i < x.length; i++) {
                if ((x[i] & bit) != 0) {
                    x[0] ^= bit - 1;
                } else {
                    int swap = (x[0] ^ x[i]) & (bit - 1);
                    x[0] ^= swap;
                    x[i] ^= swap;
                }
            }
        }
        for (int i = 1; i < x.length; i++) {
            x[i] ^= x[i - 1];
        }
        int gray = 0;
        for (int bit = 1 << (bits - 1); bit > 1; bit >>= 1) {
            if ((x[x.length - 1] & bit) != 0) {
                gray ^= bit - 1;
            }
        }
        long index = 0;
        for (int bit = bits - 1; bit >= 0; bit--) {
            for (int coordinate : x) {
                index = (index << 1) | (((coordinate ^ gray) >> bit) & 1);
            }
        }
        return index;
    }

    @Test
    void indexIsThatOfThePublishedLoops() {
        Random random = new Random(33);
        for (int i = 0; i < 10_000; i++) {
            int[] x = random.ints(4, 0, 256).toArray();
            assertThat(RayOrder.hilbert(x[0], x[1], x[2], x[3])).isEqualTo(twin(8, x.clone()));
            int[] y = {x[0] >> 1, x[1] >> 1, x[2] >> 1};
            assertThat(RayOrder.hilbert(y[0], y[1], y[2])).isEqualTo(twin(7, y.clone()));
        }
    }

    /** What makes a Hilbert curve: it fills each aligned cube in one go, and each step goes to a neighbour. */
    @Test
    void curveNeverJumps() {
        for (int corner : new int[] {0, 100, 252}) {
            long[] indices = new long[256];
            Map<Long, int[]> cells = new HashMap<>();
            for (int i = 0; i < 256; i++) {
                int[] x = {corner + (i >> 6), 252 - corner + ((i >> 4) & 3), corner + ((i >> 2) & 3), 16 + (i & 3)};
                indices[i] = RayOrder.hilbert(x[0], x[1], x[2], x[3]);
                cells.put(indices[i], x);
            }
            Arrays.sort(indices);
            for (int i = 1; i < 256; i++) {
                assertThat(indices[i]).isEqualTo(indices[0] + i);
                assertThat(steps(cells, indices[i] - 1, indices[i])).isEqualTo(1);
            }
        }
    }

    private static int steps(Map<Long, int[]> cells, long from, long to) {
        int[] a = cells.getOrDefault(from, new int[4]);
        int[] b = cells.getOrDefault(to, new int[4]);
        int sum = 0;
        for (int i = 0; i < a.length; i++) {
            sum += Math.abs(a[i] - b[i]);
        }
        return sum;
    }
}
