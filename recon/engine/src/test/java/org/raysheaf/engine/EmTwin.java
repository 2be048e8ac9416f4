package org.raysheaf.engine;

import java.util.Arrays;

/** Expectation maximisation as it is written on paper: dense rows, double precision. */
final class EmTwin {
    private EmTwin() {}

    /** The image after some updates from 1. */
    static double[] run(double[][] rows, int[] counts, double background, int updates) {
        double[] x = new double[rows[0].length];
        Arrays.fill(x, 1);
        for (int update = 0; update < updates; update++) {
            double[] ratio = new double[x.length];
            double[] sensitivity = new double[x.length];
            for (int i = 0; i < rows.length; i++) {
                double mean = mean(rows[i], x) + background;
                for (int j = 0; j < x.length; j++) {
                    ratio[j] += rows[i][j] * counts[i] / mean;
                    sensitivity[j] += rows[i][j];
                }
            }
            for (int j = 0; j < x.length; j++) {
                x[j] *= ratio[j] / sensitivity[j];
            }
        }
        return x;
    }

    /** Σ n ln ȳ − Σ ȳ. */
    static double logLikelihood(double[][] rows, int[] counts, double background, double[] x) {
        double sum = 0;
        for (int i = 0; i < rows.length; i++) {
            double mean = mean(rows[i], x) + background;
            sum += counts[i] * Math.log(mean) - mean;
        }
        return sum;
    }

    private static double mean(double[] row, double[] x) {
        double mean = 0;
        for (int j = 0; j < x.length; j++) {
            mean += row[j] * x[j];
        }
        return mean;
    }
}
