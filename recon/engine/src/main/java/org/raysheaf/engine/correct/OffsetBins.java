package org.raysheaf.engine.correct;

import java.util.Arrays;

/**
 * Distributions of the offset of scattered pairs, which is c/2 times their time difference, for many pairs of elements: values (1/mm) at whole
 * multiples of a width, linear between them. Depositing at such multiples, cells of emission and reading between values each widen a distribution
 * a little, on average by 5/12 of the width squared in all; {@link #blurred} takes that off the variance of the measured times. Immutable.
 */
final class OffsetBins {
    /** How far the normal density of the times is followed, in standard deviations. */
    private static final double REACH = 4;

    private static final double WIDENED = 5.0 / 12;

    private final double widthMm;
    private final int half;

    /**
     * Bins.
     *
     * @param leastSdMm least standard deviation of offsets (mm); two bins are as wide
     * @param reachMm furthest true offset (mm)
     * @param mostSdMm largest standard deviation of offsets (mm)
     */
    OffsetBins(double leastSdMm, double reachMm, double mostSdMm) {
        widthMm = 0.5 * leastSdMm;
        half = (int) Math.ceil((reachMm + REACH * mostSdMm) / widthMm) + 2;
    }

    double widthMm() {
        return widthMm;
    }

    int count() {
        return 2 * half + 1;
    }

    /** Where an offset lies among the values: 0 is the first. */
    double place(double offsetMm) {
        return offsetMm / widthMm + half;
    }

    /**
     * What measured offsets are distributed like.
     *
     * @param amounts sum of what has each true offset
     * @param sdMm standard deviation of the measured offset (mm)
     * @return amounts per mm; their sum times the width is the sum of the amounts
     */
    float[] blurred(double[] amounts, double sdMm) {
        double sd = Math.sqrt(sdMm * sdMm / (widthMm * widthMm) - WIDENED);
        int reach = (int) Math.ceil(REACH * sd);
        double[] kernel = new double[reach + 1];
        for (int k = 0; k <= reach; k++) {
            kernel[k] = Math.exp(-0.5 * k * k / (sd * sd));
        }
        double sum = 2 * Arrays.stream(kernel).sum() - kernel[0];
        float[] result = new float[amounts.length];
        for (int i = 0; i < amounts.length; i++) {
            if (amounts[i] == 0) {
                continue;
            }
            double amount = amounts[i] / (sum * widthMm);
            int to = Math.min(amounts.length - 1, i + reach);
            for (int k = Math.max(0, i - reach); k <= to; k++) {
                result[k] += (float) (amount * kernel[Math.abs(k - i)]);
            }
        }
        return result;
    }
}
