package org.raysheaf.transport;

import org.apache.commons.rng.UniformRandomProvider;
import org.raysheaf.geometry.matter.KleinNishina;

/**
 * Draws Compton scatterings on free electrons at rest, after Klein &amp; Nishina 1929 (Z. Phys. 52:853). The fraction of energy kept, ε =
 * E'/E, has the density (1/ε + ε)(1 − ε sin²θ/(1 + ε²)) from ε₀ = 1/(1 + 2a) to 1, with a = E/m_ec². The first factor is a sum of two
 * densities that are drawn by inversion, the second is a rejection (Butcher &amp; Messel 1960, Nucl. Phys. 20:15; from memory). Binding of
 * the electrons and Doppler broadening are left out; how often Compton scatter happens at all comes from the tabulated cross sections,
 * which know of binding. Not safe for use by several threads.
 */
final class ComptonScatter {
    private final UniformRandomProvider random;
    private double cosine;
    private double keptKeV;

    ComptonScatter(UniformRandomProvider random) {
        this.random = random;
    }

    /** Draws one scattering of a photon of an energy (keV). */
    void draw(double energyKeV) {
        double a = energyKeV / KleinNishina.ELECTRON_KEV;
        double least = 1 / (1 + 2 * a);
        double logarithmic = -Math.log(least);
        double linear = 0.5 * (1 - least * least);
        double kept;
        double t; // 1 − cos θ
        double u;
        do {
            if ((logarithmic + linear) * random.nextDouble() < logarithmic) {
                kept = Math.exp(-logarithmic * random.nextDouble());
            } else {
                kept = Math.sqrt(least * least + (1 - least * least) * random.nextDouble());
            }
            t = (1 - kept) / (a * kept);
            u = random.nextDouble();
        } while (u > 1 - kept * t * (2 - t) / (1 + kept * kept));
        cosine = 1 - t;
        keptKeV = kept * energyKeV;
    }

    /** Cosine of the angle of the scattering drawn last. */
    double cosine() {
        return cosine;
    }

    /** Energy of the scattered photon (keV). */
    double keptKeV() {
        return keptKeV;
    }
}
