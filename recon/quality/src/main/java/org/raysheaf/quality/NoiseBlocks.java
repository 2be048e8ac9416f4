package org.raysheaf.quality;

import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;

/** The sums Σ d²/m and Σ m of {@link HalfDifference}, block by block of the volume, and what follows from leaving out one block at a time. */
final class NoiseBlocks {
    /** Edge of a block in widths of the noise's correlation; simulated noise of 2.2 voxels gave errors right within a tenth. */
    private static final double WIDTHS = 4;

    private final double edgeMm;
    private final double[] squares;
    private final double[] weights;
    private double square;
    private double weight;

    NoiseBlocks(Image odd, Image even, double correlationMm) {
        Grid grid = odd.grid();
        int x = edge(correlationMm, grid.spacingXMm(), grid.nx());
        int y = edge(correlationMm, grid.spacingYMm(), grid.ny());
        int z = edge(correlationMm, grid.spacingZMm(), grid.nz());
        edgeMm = Math.max(x * grid.spacingXMm(), Math.max(y * grid.spacingYMm(), z * grid.spacingZMm()));
        int rows = (grid.ny() + y - 1) / y;
        int layers = (grid.nz() + z - 1) / z;
        int count = (grid.nx() + x - 1) / x * rows * layers;
        squares = new double[count];
        weights = new double[count];
        for (int i = 0; i < grid.nx(); i++) {
            for (int j = 0; j < grid.ny(); j++) {
                for (int k = 0; k < grid.nz(); k++) {
                    add((i / x * rows + j / y) * layers + k / z, odd.at(i, j, k), even.at(i, j, k));
                }
            }
        }
    }

    private static int edge(double correlationMm, double spacingMm, int voxels) {
        return Math.max(1, (int) Math.min(voxels, Math.rint(WIDTHS * correlationMm / spacingMm)));
    }

    private void add(int block, double odd, double even) {
        double mean = 0.5 * (odd + even);
        if (mean > 0) {
            double half = 0.5 * (odd - even);
            squares[block] += half * half / mean;
            weights[block] += mean;
            square += half * half / mean;
            weight += mean;
        }
    }

    double edgeMm() {
        return edgeMm;
    }

    double weight() {
        return weight;
    }

    double noise() {
        return Math.sqrt(square / weight);
    }

    /** (Σ w)² / Σ w². */
    double effective() {
        double sum = 0;
        for (double w : weights) {
            sum += w * w;
        }
        return weight * weight / sum;
    }

    /** √((n − 1)/n · Σ (θ_b − mean θ)²) over the n blocks with activity, θ_b the noise of all but block b. Needs two blocks at least. */
    double jackknifeError() {
        int n = 0;
        double sum = 0;
        double sumOfSquares = 0;
        double all = noise();
        for (int b = 0; b < weights.length; b++) {
            if (weights[b] > 0) {
                // Differences to the whole, so that the variance is no difference of large numbers.
                double without = Math.sqrt(Math.max(0, square - squares[b]) / (weight - weights[b])) - all;
                n++;
                sum += without;
                sumOfSquares += without * without;
            }
        }
        return Math.sqrt(Math.max(0, (n - 1.0) / n * (sumOfSquares - sum * sum / n)));
    }
}
