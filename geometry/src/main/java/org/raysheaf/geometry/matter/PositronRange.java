package org.raysheaf.geometry.matter;

import org.apache.commons.math3.analysis.UnivariateFunction;
import org.apache.commons.math3.analysis.interpolation.SplineInterpolator;
import org.apache.commons.rng.UniformRandomProvider;

/**
 * How far from its decay a positron annihilates: the straight distance between the two points, in water; not the length of its crooked
 * path, and not a distance seen from one side.
 *
 * <p>Levin &amp; Hoffman 1999 (Phys. Med. Biol. 44:781; coefficients from memory) give the profile along one axis for four nuclides, P(x) = C
 * e^(−k₁x) + (1−C) e^(−k₂x). The one isotropic distribution in space with that profile has the radial density r [C k₁ e^(−k₁r) + (1−C) k₂
 * e^(−k₂r)]: with weights C/k₁ and (1−C)/k₂, r is the sum of two exponential numbers of mean 1/k₁ or 1/k₂. Distances beyond the CSDA range R of
 * the endpoint (NIST ESTAR stopping powers) cannot be and are drawn again, 0.5 % of them.
 *
 * <p>For other endpoints: k₂R is 7.5 within 1.5 % in all four fits, so k₂ = 7.5/R there; k₁R and C are interpolated over ln R, and kept
 * beyond the outermost fits. That is a scaling of our own, not a measurement. Immutable, safe for use by several threads.
 */
public final class PositronRange {
    /** Endpoint (keV), C, k₁ (1/mm), k₂ (1/mm) for F-18, C-11, N-13, O-15. */
    private static final double[][] FITS = {
        {633.5, 0.516, 37.9, 3.10},
        {960.4, 0.488, 23.8, 1.80},
        {1198.5, 0.426, 20.2, 1.40},
        {1732.0, 0.379, 18.1, 0.904}
    };

    private static final double SAME_KEV = 0.5;
    private static final double SCALED_K2 = 7.5;

    /** Energy (keV) and CSDA range in water (mm), from NIST ESTAR stopping powers (SRD 124), integrated. */
    private static final double[][] CSDA = {
        {216.4, 0.51}, {249.8, 0.64}, {278.0, 0.75}, {385.7, 1.22}, {491.8, 1.73}, {546.7, 2.00}, {633.5, 2.43},
        {652.6, 2.53}, {735.3, 2.96}, {901.9, 3.84}, {960.4, 4.16}, {1198.5, 5.44}, {1473.7, 6.93}, {1732.0, 8.33},
        {1894.5, 9.19}, {2137.6, 10.53}, {3141.2, 15.88}, {3382.0, 17.15}
    };

    private static final UnivariateFunction LOG_CSDA = spline(CSDA);

    private final double csdaMm;
    private final double k1;
    private final double k2;
    private final double shareOfFirst;

    private PositronRange(double csdaMm, double c, double k1, double k2) {
        this.csdaMm = csdaMm;
        this.k1 = k1;
        this.k2 = k2;
        this.shareOfFirst = c / k1 / (c / k1 + (1 - c) / k2);
    }

    /**
     * The range of positrons of one branch.
     *
     * @param endpointKeV largest kinetic energy of the branch (keV), greater than 0
     * @return the distribution of distances in water
     * @throws IllegalArgumentException if the energy is not finite and above 0
     */
    public static PositronRange of(double endpointKeV) {
        if (!(endpointKeV > 0 && Double.isFinite(endpointKeV))) {
            throw new IllegalArgumentException("endpoint energy: expected more than 0 keV, found " + endpointKeV);
        }
        double range = csdaRangeMm(endpointKeV);
        for (double[] fit : FITS) {
            if (Math.abs(fit[0] - endpointKeV) < SAME_KEV) {
                return new PositronRange(range, fit[1], fit[2], fit[3]);
            }
        }
        int i = 0;
        while (i < FITS.length - 2 && endpointKeV > FITS[i + 1][0]) {
            i++;
        }
        double from = csdaRangeMm(FITS[i][0]);
        double to = csdaRangeMm(FITS[i + 1][0]);
        double share = Math.max(0, Math.min(1, Math.log(range / from) / Math.log(to / from)));
        double c = FITS[i][1] + share * (FITS[i + 1][1] - FITS[i][1]);
        double k1Range = FITS[i][2] * from + share * (FITS[i + 1][2] * to - FITS[i][2] * from);
        return new PositronRange(range, c, k1Range / range, SCALED_K2 / range);
    }

    /**
     * Path length of an electron in water until it stops, in continuous slowing down: a bound for every distance.
     *
     * @param energyKeV its kinetic energy (keV), greater than 0
     * @return the CSDA range (mm), interpolated log-log; beyond 216 to 3382 keV continued as a power law
     */
    public static double csdaRangeMm(double energyKeV) {
        return Math.exp(LOG_CSDA.value(Math.log(energyKeV)));
    }

    private static UnivariateFunction spline(double[][] table) {
        int n = table.length;
        double[] x = new double[n];
        double[] y = new double[n];
        for (int i = 0; i < n; i++) {
            x[i] = Math.log(table[i][0]);
            y[i] = Math.log(table[i][1]);
        }
        UnivariateFunction inside = new SplineInterpolator().interpolate(x, y);
        double low = (y[1] - y[0]) / (x[1] - x[0]);
        double high = (y[n - 1] - y[n - 2]) / (x[n - 1] - x[n - 2]);
        return at -> {
            if (at < x[0]) {
                return y[0] + low * (at - x[0]);
            }
            return at > x[n - 1] ? y[n - 1] + high * (at - x[n - 1]) : inside.value(at);
        };
    }

    /**
     * The bound of all distances.
     *
     * @return CSDA range of the endpoint energy in water (mm)
     */
    public double boundMm() {
        return csdaMm;
    }

    /**
     * Draws a distance.
     *
     * @param random the stream to draw from
     * @return distance from decay to annihilation in water (mm), from 0 to {@link #boundMm()}; in other matter, divide it by the density in
     *     g/cm³
     */
    public double drawMm(UniformRandomProvider random) {
        double distance;
        do {
            double k = random.nextDouble() < shareOfFirst ? k1 : k2;
            // 1 − u is above 0, so the logarithm is finite
            distance = -Math.log((1 - random.nextDouble()) * (1 - random.nextDouble())) / k;
        } while (distance > csdaMm);
        return distance;
    }

    /**
     * The distribution seen along one axis: what {@link #drawMm} draws, in a direction drawn at random.
     *
     * @param xMm distance along the axis from the decay (mm), on either side
     * @return share of annihilations per mm; over all x it adds up to 1
     */
    public double profile(double xMm) {
        double x = Math.abs(xMm);
        if (x >= csdaMm) {
            return 0;
        }
        // A distance r is spread evenly over −r … r, so the profile is ∫ f(r)/2r dr from x to the bound.
        double within = shareOfFirst * within(k1) + (1 - shareOfFirst) * within(k2);
        return (shareOfFirst * farther(k1, x) + (1 - shareOfFirst) * farther(k2, x)) / within;
    }

    private double farther(double k, double x) {
        return k / 2 * (Math.exp(-k * x) - Math.exp(-k * csdaMm));
    }

    /** Share of k² r e^(−kr) that lies within the bound. */
    private double within(double k) {
        return 1 - Math.exp(-k * csdaMm) * (1 + k * csdaMm);
    }
}
