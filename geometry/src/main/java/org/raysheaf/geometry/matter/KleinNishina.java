package org.raysheaf.geometry.matter;

/**
 * Compton scatter on a free electron at rest (Klein &amp; Nishina 1929, Z. Phys. 52:853; Evans, The Atomic Nucleus, 1955). With a = E/m_ec²
 * and P = E'/E = 1/(1 + a(1 − cos θ)).
 */
public final class KleinNishina {
    /** Rest energy of the electron m_ec² (keV), and so the energy of an annihilation photon: CODATA 2018. */
    public static final double ELECTRON_KEV = 510.99895;

    /** Square of the classical electron radius r_e = 2.8179403262e-15 m (CODATA 2018), in barn. */
    private static final double RADIUS_SQUARED_B = 2.8179403262e-15 * 2.8179403262e-15 * 1e28;

    private KleinNishina() {}

    /**
     * Total cross section of one electron: 2πr_e² { (1+a)/a² · [2(1+a)/(1+2a) − ln(1+2a)/a] + ln(1+2a)/(2a) − (1+3a)/(1+2a)² }.
     *
     * @param energyKeV energy of the photon E (keV), at least 1; below, terms cancel too much
     * @return the cross section (barn per electron)
     */
    public static double totalB(double energyKeV) {
        double a = energyKeV / ELECTRON_KEV;
        double b = 1 + 2 * a;
        double log = Math.log1p(2 * a);
        double bracket = (1 + a) / (a * a) * (2 * (1 + a) / b - log / a) + log / (2 * a) - (1 + 3 * a) / (b * b);
        return 2 * Math.PI * RADIUS_SQUARED_B * bracket;
    }

    /**
     * Differential cross section ½ r_e² P² (P + 1/P − sin²θ).
     *
     * @param energyKeV energy of the photon (keV)
     * @param cosine cosine of the scattering angle θ
     * @return the cross section (barn per steradian and electron)
     */
    public static double perSteradianB(double energyKeV, double cosine) {
        double p = keptShare(energyKeV, cosine);
        return 0.5 * RADIUS_SQUARED_B * p * p * (p + 1 / p - (1 - cosine * cosine));
    }

    /**
     * Share of its energy that a photon keeps, P = E'/E.
     *
     * @param energyKeV energy of the photon (keV)
     * @param cosine cosine of the scattering angle
     * @return the share, above 0, at most 1
     */
    public static double keptShare(double energyKeV, double cosine) {
        return 1 / (1 + energyKeV / ELECTRON_KEV * (1 - cosine));
    }
}
