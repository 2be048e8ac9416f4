package org.raysheaf.geometry.matter;

import org.raysheaf.geometry.settings.Problems;

/**
 * A radionuclide, as far as counting needs it.
 *
 * @param name for example {@code "F-18"}
 * @param halfLifeS half-life (s), greater than 0
 * @param positronBranching positrons per decay, 0 to 1
 */
public record Nuclide(String name, double halfLifeS, double positronBranching) {
    public Nuclide {
        new Problems("nuclide")
                .above("half_life_s", halfLifeS, 0)
                .atLeast("positron_branching", positronBranching, 0)
                .rule(!(positronBranching > 1), "positron_branching", "expected at most 1, found " + positronBranching)
                .orThrow();
    }

    /**
     * Decays in a time span per unit of activity at its start: ∫₀ᵀ exp(−λt) dt with λ = ln 2 / half-life.
     *
     * @param durationS the span T (s), at least 0
     * @return the integral (s); tends to T for a long half-life
     */
    public double effectiveTimeS(double durationS) {
        double lambda = Math.log(2) / halfLifeS;
        return -Math.expm1(-lambda * durationS) / lambda;
    }
}
