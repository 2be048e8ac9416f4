package org.raysheaf.engine.prior;

import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * Neighbours differ little, but differences above a chosen size cost only in proportion to it, whatever the values themselves are.
 *
 * @param strength how strong, above 0; see the package comment
 * @param edge difference from which on neighbours count as two sides of an edge, in parts of the typical activity, above 0
 */
public record EdgePreservingPrior(
        double strength, @Default("0.5") double edge) implements Prior {
    public EdgePreservingPrior {
        Problems problems = Prior.problems(strength);
        problems.rule(
                        edge >= 1e-6 && edge <= 1e6,
                        "edge",
                        "expected the size of an edge in parts of the typical activity, from 0.000001 to 1000000;"
                                + " found " + edge)
                .orThrow();
    }

    @Override
    public PairPotential potential(double typical) {
        return new EdgePreservingPotential(typical, edge * typical);
    }
}
