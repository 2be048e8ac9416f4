package org.raysheaf.engine.prior;

/**
 * The hyperbola (Charbonnier, Blanc-Féraud, Aubert &amp; Barlaud 1997, IEEE Trans. Image Process. 6:298), a square for small and a straight line
 * for large differences d = a − b:
 *
 * <pre>
 * ψ = δ²/x̄ (√(1 + d²/δ²) − 1),   ∂ψ/∂a = d / (x̄ √(1 + d²/δ²)),   ∂²ψ/∂a² = 1 / (x̄ (1 + d²/δ²)^(3/2))
 * </pre>
 *
 * @param typical x̄ (Bq/mL)
 * @param edge δ (Bq/mL)
 */
record EdgePreservingPotential(double typical, double edge) implements PairPotential {
    @Override
    public double value(double a, double b) {
        double t = (a - b) / edge;
        // √(1 + t²) − 1 without loss of digits where t is small
        return edge * edge / typical * (t * t / (Math.sqrt(1 + t * t) + 1));
    }

    @Override
    public double slope(double a, double b) {
        double t = (a - b) / edge;
        return (a - b) / (typical * Math.sqrt(1 + t * t));
    }

    @Override
    public double curvature(double a, double b) {
        double t = (a - b) / edge;
        double root = Math.sqrt(1 + t * t);
        return 1 / (typical * root * root * root);
    }

    @Override
    public void addSlopes(float[] x, float[] mask, int first, int last, int offset, float weight, float[] out) {
        float factor = (float) (weight / typical);
        float perEdge = (float) (1 / edge);
        for (int j = first; j < last; j++) {
            float d = x[j] - x[j + offset];
            float t = d * perEdge;
            out[j] += factor * mask[j + offset] * (d / (float) Math.sqrt(1 + t * t));
        }
    }

    @Override
    public void addCurvatures(float[] x, float[] mask, int first, int last, int offset, float weight, float[] out) {
        float factor = (float) (weight / typical);
        float perEdge = (float) (1 / edge);
        for (int j = first; j < last; j++) {
            float t = (x[j] - x[j + offset]) * perEdge;
            float inverse = 1 / (float) Math.sqrt(1 + t * t);
            out[j] += factor * mask[j + offset] * inverse * inverse * inverse;
        }
    }
}
