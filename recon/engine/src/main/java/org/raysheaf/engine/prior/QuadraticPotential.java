package org.raysheaf.engine.prior;

/**
 * ψ(a, b) = (a − b)² / 2 x̄.
 *
 * @param typical x̄ (Bq/mL)
 */
record QuadraticPotential(double typical) implements PairPotential {
    @Override
    public double value(double a, double b) {
        return 0.5 * (a - b) * (a - b) / typical;
    }

    @Override
    public double slope(double a, double b) {
        return (a - b) / typical;
    }

    @Override
    public double curvature(double a, double b) {
        return 1 / typical;
    }

    @Override
    public void addSlopes(float[] x, float[] mask, int first, int last, int offset, float weight, float[] out) {
        float factor = (float) (weight / typical);
        for (int j = first; j < last; j++) {
            out[j] += factor * mask[j + offset] * (x[j] - x[j + offset]);
        }
    }

    @Override
    public void addCurvatures(float[] x, float[] mask, int first, int last, int offset, float weight, float[] out) {
        float factor = (float) (weight / typical);
        for (int j = first; j < last; j++) {
            out[j] += factor * mask[j + offset];
        }
    }
}
