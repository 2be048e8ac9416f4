package org.raysheaf.engine.prior;

/**
 * Neighbours differ little, and large differences are as unlikely as their squares say: smooths noise and edges alike.
 *
 * @param strength how strong, above 0; see the package comment
 */
public record QuadraticPrior(double strength) implements Prior {
    public QuadraticPrior {
        Prior.problems(strength).orThrow();
    }

    @Override
    public PairPotential potential(double typical) {
        return new QuadraticPotential(typical);
    }
}
