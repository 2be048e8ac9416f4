package org.raysheaf.geometry.response;

import org.apache.commons.math3.analysis.integration.gauss.GaussIntegrator;
import org.apache.commons.math3.analysis.integration.gauss.GaussIntegratorFactory;

/** Nodes and weights of a Gauss–Legendre rule on [−1, 1]. Immutable. */
final class QuadratureRule {
    private final double[] nodes;
    private final double[] weights;

    private QuadratureRule(double[] nodes, double[] weights) {
        this.nodes = nodes;
        this.weights = weights;
    }

    static QuadratureRule gaussLegendre(int points) {
        GaussIntegrator rule = new GaussIntegratorFactory().legendre(points);
        double[] nodes = new double[points];
        double[] weights = new double[points];
        for (int i = 0; i < points; i++) {
            nodes[i] = rule.getPoint(i);
            weights[i] = rule.getWeight(i);
        }
        return new QuadratureRule(nodes, weights);
    }

    int size() {
        return nodes.length;
    }

    double node(int i) {
        return nodes[i];
    }

    double weight(int i) {
        return weights[i];
    }
}
