package org.raysheaf.engine.prior;

import org.raysheaf.geometry.settings.Problems;

/** The kinds of prior, as settings. What {@code strength} means stands in the package comment. */
public sealed interface Prior permits QuadraticPrior, RelativeDifferencePrior, EdgePreservingPrior {
    /**
     * How strong the prior is.
     *
     * @return the strength, above 0; no unit
     */
    double strength();

    /**
     * The penalty ψ of one pair of neighbours.
     *
     * @param typical activity concentration x̄ of the image (Bq/mL), above 0
     * @return ψ
     */
    PairPotential potential(double typical);

    /** The rule that all kinds share. */
    static Problems problems(double strength) {
        return new Problems("prior")
                .rule(
                        strength > 0 && strength <= 1000,
                        "strength",
                        "expected a number above 0, at most 1000; found " + strength
                                + "; 0.01 smooths a little, 1 much; for no prior leave out prior");
    }
}
