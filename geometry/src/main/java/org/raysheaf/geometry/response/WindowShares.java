package org.raysheaf.geometry.response;

/**
 * Signals in the energy window for every first interaction: a share over direction common to all elements, times a factor for each class of
 * elements; and how it falls for photons of less than 511 keV. Turns the effective area for first interactions into that for signals. Immutable.
 */
public final class WindowShares {
    /** Nodes of the common share along |u| and along |v|, from 0 to 1. */
    public static final int SHAPE = 26;

    private final double deeperMm;
    private final double pileUpShare;
    private final double[] shape;
    private final double[] factors;
    private final double[] energiesKeV;
    private final double[] relative;
    private final double mean;
    private final double relativeError;

    /**
     * Takes what was found.
     *
     * @param deeperMm how much deeper than the mean first interaction the line is where the named element stands (mm)
     * @param pileUpShare signals in the window with the energy of another pulse added, over those without
     * @param shape common share at {@value #SHAPE} × {@value #SHAPE} nodes of |u| and |v|
     * @param factors one for each class of elements
     * @param energiesKeV rising energies up to 511 keV (keV)
     * @param relative share at each of them relative to that at 511 keV
     * @param mean share over all elements and directions
     * @param relativeError mean relative standard error of one element's share
     */
    public WindowShares(
            double deeperMm,
            double pileUpShare,
            double[] shape,
            double[] factors,
            double[] energiesKeV,
            double[] relative,
            double mean,
            double relativeError) {
        this.deeperMm = deeperMm;
        this.pileUpShare = pileUpShare;
        this.shape = shape.clone();
        this.factors = factors.clone();
        this.energiesKeV = energiesKeV.clone();
        this.relative = relative.clone();
        this.mean = mean;
        this.relativeError = relativeError;
    }

    /** Share of a class for a direction with the components u and v. */
    double of(int classNumber, double u, double v) {
        return factors[classNumber] * shapeAt(shape, u, v);
    }

    /**
     * The node of the common share nearest to a component of the direction.
     *
     * @param component the component, −1 to 1
     * @return the node, 0 to {@value #SHAPE} − 1
     */
    public static int shapeNode(double component) {
        return (int) Math.rint(stretched(component));
    }

    /** Place among the nodes, which stand denser near 0: they are even in the square root of the component. */
    private static double stretched(double component) {
        return (SHAPE - 1) * Math.sqrt(Math.min(1, Math.abs(component)));
    }

    /**
     * The common share, interpolated between nodes.
     *
     * @param shape the table
     * @param u component of the direction along u
     * @param v component along v
     * @return the share
     */
    public static double shapeAt(double[] shape, double u, double v) {
        double pu = Math.min(SHAPE - 1 - 1e-9, stretched(u));
        double pv = Math.min(SHAPE - 1 - 1e-9, stretched(v));
        int iu = (int) pu;
        int iv = (int) pv;
        double fu = pu - iu;
        double fv = pv - iv;
        int at = iu * SHAPE + iv;
        double low = shape[at] + fv * (shape[at + 1] - shape[at]);
        double high = shape[at + SHAPE] + fv * (shape[at + SHAPE + 1] - shape[at + SHAPE]);
        return low + fu * (high - low);
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
     * How much deeper than the mean first interaction the end of a line is to be put: photons that scatter go on before they leave most of
     * their energy, so the element that is named stands farther along the line.
     *
     * @return the distance along the block's w (mm)
     */
    public double deeperMm() {
        return deeperMm;
    }

    /**
     * What pile-up leaves in the window.
     *
     * @return signals in the window with the energy of another pulse added, over those without
     */
    public double pileUpShare() {
        return pileUpShare;
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
     * All numbers, to be kept and given to {@link #restore} later.
     *
     * @return the numbers in one row
     */
    public float[] toFloats() {
        int shapeAt = 4 + 2 * energiesKeV.length + factors.length;
        float[] row = new float[shapeAt + shape.length + 1];
        row[row.length - 1] = (float) pileUpShare;
        row[0] = energiesKeV.length;
        row[1] = (float) mean;
        row[2] = (float) relativeError;
        row[3] = (float) deeperMm;
        for (int i = 0; i < energiesKeV.length; i++) {
            row[4 + i] = (float) energiesKeV[i];
            row[4 + energiesKeV.length + i] = (float) relative[i];
        }
        for (int i = 0; i < factors.length; i++) {
            row[4 + 2 * energiesKeV.length + i] = (float) factors[i];
        }
        for (int i = 0; i < shape.length; i++) {
            row[shapeAt + i] = (float) shape[i];
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
        if (n < 1 || row.length != 4 + 2 * n + classes + SHAPE * SHAPE + 1) {
            throw new IllegalArgumentException("not the window shares of this system");
        }
        double[] energies = new double[n];
        double[] relative = new double[n];
        double[] factors = new double[classes];
        for (int i = 0; i < n; i++) {
            energies[i] = row[4 + i];
            relative[i] = row[4 + n + i];
        }
        for (int i = 0; i < factors.length; i++) {
            factors[i] = row[4 + 2 * n + i];
        }
        double[] shape = new double[SHAPE * SHAPE];
        for (int i = 0; i < shape.length; i++) {
            shape[i] = row[4 + 2 * n + factors.length + i];
        }
        return new WindowShares(row[3], row[row.length - 1], shape, factors, energies, relative, row[1], row[2]);
    }
}
