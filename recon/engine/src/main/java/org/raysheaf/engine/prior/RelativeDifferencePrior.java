package org.raysheaf.engine.prior;

import org.raysheaf.geometry.settings.Default;

/**
 * Neighbours differ little <em>relative to their values</em> (Nuyts, Beque, Dupont &amp; Mortelmans 2002, IEEE Trans. Nucl. Sci. 49:56): cold and hot
 * regions are smoothed alike, and large relative differences cost only in proportion, which spares edges.
 *
 * @param strength how strong, above 0; see the package comment
 * @param gamma γ, how much edges are spared, 0 to 1000; 0 spares them least, 2 is usual
 */
public record RelativeDifferencePrior(
        double strength, @Default("2") double gamma) implements Prior {
    /** ε in parts of the typical activity: voxels of less are compared by their difference, not by its ratio. */
    private static final double EPSILON = 1e-3;

    public RelativeDifferencePrior {
        Prior.problems(strength).within("gamma", gamma, 0, 1000).orThrow();
    }

    @Override
    public PairPotential potential(double typical) {
        return new RelativeDifferencePotential(gamma, EPSILON * typical);
    }
}
