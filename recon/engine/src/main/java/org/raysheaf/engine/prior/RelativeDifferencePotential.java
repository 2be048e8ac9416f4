package org.raysheaf.engine.prior;

/**
 * ψ(a, b) = d² / (a + b + γ |d| + ε), d = a − b: Nuyts et al. (2002), eq. (5) there.
 *
 * <pre>
 * D = a + b + γ |d| + ε
 * ∂ψ/∂a = d (a + 3 b + γ |d| + 2 ε) / D²
 * ∂²ψ/∂a² = 2 (2 b + ε)² / D³
 * </pre>
 *
 * <p>Difference from the publication: ε keeps the quotient finite where both values vanish; being a part of the typical activity it does not
 * depend on the unit or the count level. Where a = b = x̄ the curvature is 1/x̄, up to ε.
 *
 * @param gamma γ
 * @param epsilon ε (Bq/mL), above 0
 */
record RelativeDifferencePotential(double gamma, double epsilon) implements PairPotential {
    @Override
    public double value(double a, double b) {
        double d = a - b;
        return d * d / (a + b + gamma * Math.abs(d) + epsilon);
    }

    @Override
    public double slope(double a, double b) {
        double d = a - b;
        double rest = gamma * Math.abs(d) + epsilon;
        double denominator = a + b + rest;
        return d * (a + 3 * b + rest + epsilon) / (denominator * denominator);
    }

    @Override
    public double curvature(double a, double b) {
        double denominator = a + b + gamma * Math.abs(a - b) + epsilon;
        double numerator = 2 * b + epsilon;
        return 2 * numerator * numerator / (denominator * denominator * denominator);
    }

    @Override
    public void addSlopes(float[] x, float[] mask, int first, int last, int offset, float weight, float[] out) {
        float g = (float) gamma;
        float e = (float) epsilon;
        for (int j = first; j < last; j++) {
            float a = x[j];
            float b = x[j + offset];
            float d = a - b;
            float rest = g * Math.abs(d) + e;
            float inverse = 1 / (a + b + rest);
            out[j] += weight * mask[j + offset] * (d * inverse) * ((a + 3 * b + rest + e) * inverse);
        }
    }

    @Override
    public void addCurvatures(float[] x, float[] mask, int first, int last, int offset, float weight, float[] out) {
        float g = (float) gamma;
        float e = (float) epsilon;
        for (int j = first; j < last; j++) {
            float a = x[j];
            float b = x[j + offset];
            float inverse = 1 / (a + b + g * Math.abs(a - b) + e);
            float ratio = (2 * b + e) * inverse;
            out[j] += weight * mask[j + offset] * 2 * ratio * ratio * inverse;
        }
    }
}
