package org.raysheaf.transport;

import org.apache.commons.rng.UniformRandomProvider;
import org.raysheaf.geometry.matter.Interaction;
import org.raysheaf.geometry.matter.KleinNishina;
import org.raysheaf.geometry.matter.Material;

/**
 * Draws the angle of coherent scatter: Thomson's (1 + cos²θ)/2 times the square of the form factor of a screened nucleus, F(q) = Z/(1 +
 * (aq)²), with the Thomas–Fermi radius a = 0.885 a₀ Z^(−1/3) (Wentzel 1927; common approximation, from memory). q² is drawn by inversion,
 * Thomson's factor is a rejection. At 511 keV the angle is a few degrees. A mixture scatters like the one element that has the mean Z
 * of its coherent scatterings at 100 keV. Immutable.
 */
final class CoherentScatter {
    /** ħc/a₀ = α m_e c² (keV): 510.99895/137.035999. */
    private static final double BOHR_KEV = KleinNishina.ELECTRON_KEV / 137.035999;

    private static final double THOMAS_FERMI = 0.885;

    private final double perKeV;

    private CoherentScatter(double perKeV) {
        this.perKeV = perKeV;
    }

    static CoherentScatter of(Material material) {
        double z = material.ideal() ? 1 : material.meanAtomicNumber(Interaction.COHERENT, 100);
        return new CoherentScatter(THOMAS_FERMI / (BOHR_KEV * Math.cbrt(z)));
    }

    /** Draws the cosine of a scattering angle for an energy (keV). */
    double drawCosine(double energyKeV, UniformRandomProvider random) {
        double most = 2 * energyKeV * perKeV; // a·q for θ = 180°
        double square = most * most;
        double cosine;
        do {
            double u = random.nextDouble();
            double reached = u * square / (1 + square - u * square);
            cosine = 1 - 2 * reached / square;
        } while (random.nextDouble() > 0.5 * (1 + cosine * cosine));
        return cosine;
    }
}
