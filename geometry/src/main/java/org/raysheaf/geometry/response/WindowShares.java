package org.raysheaf.geometry.response;

/**
 * Signals in the energy window for every first interaction: for each class of elements a quadratic polynomial in the direction, and how it
 * falls for photons of less than 511 keV. Turns the effective area for first interactions into that for signals. Immutable.
 */
public final class WindowShares {
    /** Coefficients of one class: of 1, u, v, u², uv, v², with the components u and v of the unit direction in the block's frame. */
    public static final int TERMS = 6;

    private final double[] coefficients;
    private final double[] energiesKeV;
    private final double[] relative;
    private final double mean;
    private final double relativeError;
    private final double reducedChiSquare;

    /**
     * Takes what was found.
     *
     * @param coefficients {@value #TERMS} for each class of elements
     * @param energiesKeV rising energies up to 511 keV (keV)
     * @param relative share at each of them relative to that at 511 keV
     * @param mean share over all elements and directions
     * @param relativeError mean relative standard error of one element's share
     * @param reducedChiSquare goodness of the fits; NaN if unknown
     */
    public WindowShares(
            double[] coefficients,
            double[] energiesKeV,
            double[] relative,
            double mean,
            double relativeError,
            double reducedChiSquare) {
        this.coefficients = coefficients.clone();
        this.energiesKeV = energiesKeV.clone();
        this.relative = relative.clone();
        this.mean = mean;
        this.relativeError = relativeError;
        this.reducedChiSquare = reducedChiSquare;
    }

    /**
     * The terms of the polynomial.
     *
     * @param u component of the unit direction along u
     * @param v component along v
     * @param terms receives the {@value #TERMS} terms
     */
    public static void terms(double u, double v, double[] terms) {
        terms[0] = 1;
        terms[1] = u;
        terms[2] = v;
        terms[3] = u * u;
        terms[4] = u * v;
        terms[5] = v * v;
    }

    /** Share of a class for a direction, at least 0. */
    double of(int classNumber, double u, double v) {
        int at = TERMS * classNumber;
        double share = coefficients[at]
                + u * (coefficients[at + 1] + u * coefficients[at + 3] + v * coefficients[at + 4])
                + v * (coefficients[at + 2] + v * coefficients[at + 5]);
        return Math.max(0, share);
    }

    /**
     * Share at a lower energy, relative to that at 511 keV: linear between the energies found, 0 below them.
     *
     * @param energyKeV energy of the photon (keV)
     * @return the ratio
     */
    public double relativeAt(double energyKeV) {
        int last = energiesKeV.length - 1;
        if (energyKeV >= energiesKeV[last]) {
            return relative[last];
        }
        if (energyKeV < energiesKeV[0]) {
            return 0;
        }
        int i = 0;
        while (energyKeV >= energiesKeV[i + 1]) {
            i++;
        }
        double share = (energyKeV - energiesKeV[i]) / (energiesKeV[i + 1] - energiesKeV[i]);
        return relative[i] + share * (relative[i + 1] - relative[i]);
    }

    /**
     * The share over all elements and directions.
     *
     * @return signals in the window per first interaction
     */
    public double mean() {
        return mean;
    }

    /**
     * Statistical error of one element's share.
     *
     * @return mean relative standard error
     */
    public double relativeError() {
        return relativeError;
    }

    /**
     * Whether the polynomials describe what was found.
     *
     * @return χ² per degree of freedom; about 1 if they do
     */
    public double reducedChiSquare() {
        return reducedChiSquare;
    }

    /**
     * All numbers, to be kept and given to {@link #restore} later.
     *
     * @return the numbers in one row
     */
    public float[] toFloats() {
        float[] row = new float[4 + 2 * energiesKeV.length + coefficients.length];
        row[0] = energiesKeV.length;
        row[1] = (float) mean;
        row[2] = (float) relativeError;
        row[3] = (float) reducedChiSquare;
        for (int i = 0; i < energiesKeV.length; i++) {
            row[4 + i] = (float) energiesKeV[i];
            row[4 + energiesKeV.length + i] = (float) relative[i];
        }
        for (int i = 0; i < coefficients.length; i++) {
            row[4 + 2 * energiesKeV.length + i] = (float) coefficients[i];
        }
        return row;
    }

    /**
     * Takes numbers that were kept.
     *
     * @param row what {@link #toFloats()} gave
     * @param classes number of classes of the system
     * @return the shares
     * @throws IllegalArgumentException if the row has another length
     */
    public static WindowShares restore(float[] row, int classes) {
        int n = row.length < 4 ? -1 : (int) row[0];
        if (n < 1 || row.length != 4 + 2 * n + TERMS * classes) {
            throw new IllegalArgumentException("not the window shares of this system");
        }
        double[] energies = new double[n];
        double[] relative = new double[n];
        double[] coefficients = new double[TERMS * classes];
        for (int i = 0; i < n; i++) {
            energies[i] = row[4 + i];
            relative[i] = row[4 + n + i];
        }
        for (int i = 0; i < coefficients.length; i++) {
            coefficients[i] = row[4 + 2 * n + i];
        }
        return new WindowShares(coefficients, energies, relative, row[1], row[2], row[3]);
    }
}
