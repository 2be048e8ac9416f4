package org.raysheaf.io.records;

import java.util.Arrays;

/**
 * Time offsets o of channels from the mean differences m of pairs: least squares over all pairs,
 *
 * <pre>
 * Σ n_ab (m_ab − (o_b − o_a))²  →  min,   Σ o = 0 over the largest group of channels that pairs connect
 * </pre>
 *
 * <p>The normal equations are a graph Laplacian, solved by conjugate gradients with its diagonal as preconditioner (Hestenes & Stiefel 1952, J. Res. Natl.
 * Bur. Stand. 49:409). Channels outside the largest group have no common zero with it and get NaN. One thread.
 */
final class OffsetSolver {
    private static final int MOST_ROUNDS = 500;
    private static final double ENOUGH = 1e-10;

    private final PairSums pairs;
    private final int channels;
    private final double[] diagonal;
    private final boolean[] inside;

    OffsetSolver(PairSums pairs, int channels) {
        this.pairs = pairs;
        this.channels = channels;
        this.diagonal = new double[channels];
        this.inside = new boolean[channels];
    }

    /** Solves; NaN for channels that are not connected. */
    double[] solve() {
        connect();
        double[] right = new double[channels];
        pairs.forEach((a, b, count, sum) -> {
            if (inside[a]) {
                diagonal[a] += count;
                diagonal[b] += count;
                right[a] -= sum;
                right[b] += sum;
            }
        });
        double[] offsets = conjugateGradients(right);
        double mean = 0;
        int members = 0;
        for (int i = 0; i < channels; i++) {
            mean += inside[i] ? offsets[i] : 0;
            members += inside[i] ? 1 : 0;
        }
        for (int i = 0; i < channels; i++) {
            offsets[i] = inside[i] ? offsets[i] - mean / members : Double.NaN;
        }
        return offsets;
    }

    /** Marks the largest group of channels that pairs connect. */
    private void connect() {
        int[] parent = new int[channels];
        Arrays.setAll(parent, i -> i);
        pairs.forEach((a, b, count, sum) -> parent[root(parent, a)] = root(parent, b));
        int[] sizes = new int[channels];
        int largest = 0;
        for (int i = 0; i < channels; i++) {
            int root = root(parent, i);
            sizes[root]++;
            largest = sizes[root] > sizes[largest] ? root : largest;
        }
        for (int i = 0; i < channels; i++) {
            inside[i] = root(parent, i) == largest && sizes[largest] > 1;
        }
    }

    private static int root(int[] parent, int of) {
        int at = of;
        while (parent[at] != at) {
            parent[at] = parent[parent[at]];
            at = parent[at];
        }
        return at;
    }

    private double[] conjugateGradients(double[] right) {
        double[] x = new double[channels];
        double[] residual = right.clone();
        double[] search = preconditioned(residual);
        double old = dot(residual, search);
        double first = old;
        for (int round = 0; round < MOST_ROUNDS && old > ENOUGH * ENOUGH * first; round++) {
            double[] image = times(search);
            double step = old / dot(search, image);
            for (int i = 0; i < channels; i++) {
                x[i] += step * search[i];
                residual[i] -= step * image[i];
            }
            double[] next = preconditioned(residual);
            double now = dot(residual, next);
            for (int i = 0; i < channels; i++) {
                search[i] = next[i] + now / old * search[i];
            }
            old = now;
        }
        return x;
    }

    private double[] preconditioned(double[] v) {
        double[] result = new double[channels];
        for (int i = 0; i < channels; i++) {
            result[i] = diagonal[i] > 0 ? v[i] / diagonal[i] : 0;
        }
        return result;
    }

    private double[] times(double[] v) {
        double[] result = new double[channels];
        pairs.forEach((a, b, count, sum) -> {
            if (inside[a]) {
                double flow = count * (v[b] - v[a]);
                result[a] -= flow;
                result[b] += flow;
            }
        });
        return result;
    }

    private static double dot(double[] a, double[] b) {
        double sum = 0;
        for (int i = 0; i < a.length; i++) {
            sum += a[i] * b[i];
        }
        return sum;
    }
}
