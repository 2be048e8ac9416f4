package org.raysheaf.geometry.response;

/**
 * Nodes of a table along one slope of the direction (u/w or v/w), dense near 0 where the direction runs along the crystals and the response
 * changes fastest: node k stands for the slope sign(k) · t₀ · (exp(|k| h) − 1).
 */
final class SlopeAxis {
    /** Below this slope nodes are about evenly spaced: a gap is narrower than a crystal is deep by about this factor. */
    private static final double T0 = 0.04;

    private final double step;
    private final int half;

    /** Nodes that cover slopes from −most to +most, spaced by at most a step of the stretched coordinate. */
    SlopeAxis(double most, double largestStep) {
        double span = Math.log1p(most / T0);
        half = Math.max(2, (int) Math.ceil(span / largestStep));
        step = span / half;
    }

    int nodes() {
        return 2 * half + 1;
    }

    double slope(int node) {
        int k = node - half;
        return Math.signum(k) * T0 * Math.expm1(Math.abs(k) * step);
    }

    /** Fractional node of a slope, kept within the table. */
    double position(double slope) {
        double stretched = Math.log1p(Math.abs(slope) / T0) / step;
        double position = half + Math.copySign(stretched, slope);
        return Math.max(0, Math.min(nodes() - 1 - 1e-9, position));
    }
}
