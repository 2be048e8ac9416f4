package org.raysheaf.engine.correct;

import java.util.Arrays;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.response.BlockPairKinds;
import org.raysheaf.geometry.response.PairFactor;

/**
 * How much more often than the model says pairs are recorded because of where their blocks stand and where in them the elements are, beside
 * the efficiencies of elements:
 *
 * <pre>
 * g_ab = pair[kind of the two blocks] · column[end, column of a] · row[end, row of a] · column[end', column of b] · row[end', row of b]
 * </pre>
 *
 * <p>with kinds and ends as {@link BlockPairKinds} counts them: an element at the edge of its block may answer to partners on one side
 * differently than to those on the other, which no efficiency can say. Immutable, safe for use by several threads.
 */
public final class GeometryFactors implements PairFactor.Maker {
    private final BlockPairKinds kinds;
    private final DetectorSystem system;
    private final double[] pair;
    private final double[] column;
    private final double[] row;

    /**
     * Takes the factors.
     *
     * @param kinds the pairs of blocks of the system
     * @param pair one for each kind of pairs of blocks
     * @param column one for each column of each end, at end · {@link BlockPairKinds#columns()} + column
     * @param row one for each row of each end
     * @throws IllegalArgumentException if they are not as many as the system asks for, or not above 0
     */
    public GeometryFactors(BlockPairKinds kinds, double[] pair, double[] column, double[] row) {
        require("pairs of blocks", pair, kinds.kinds());
        require("columns", column, kinds.ends() * kinds.columns());
        require("rows", row, kinds.ends() * kinds.rows());
        this.kinds = kinds;
        this.system = kinds.system();
        this.pair = pair.clone();
        this.column = column.clone();
        this.row = row.clone();
    }

    private static void require(String what, double[] factors, int count) {
        if (factors.length != count) {
            throw new IllegalArgumentException(
                    "expected factors of " + count + " " + what + ", found " + factors.length);
        }
        for (double factor : factors) {
            if (!(factor > 0 && factor < Double.POSITIVE_INFINITY)) {
                throw new IllegalArgumentException("expected factors above 0 for " + what + ", found " + factor);
            }
        }
    }

    /** No difference to the model. */
    static GeometryFactors ones(BlockPairKinds kinds) {
        double[] pair = new double[kinds.kinds()];
        double[] column = new double[kinds.ends() * kinds.columns()];
        double[] row = new double[kinds.ends() * kinds.rows()];
        Arrays.fill(pair, 1);
        Arrays.fill(column, 1);
        Arrays.fill(row, 1);
        return new GeometryFactors(kinds, pair, column, row);
    }

    double ofPair(int block, int partner) {
        return pair[kinds.kindOf(block, partner)];
    }

    double ofEnd(int element, int partner) {
        int end = kinds.endOf(system.blockIndexOf(element), partner);
        return column[end * kinds.columns() + kinds.column(element, partner)]
                * row[end * kinds.rows() + kinds.row(element, partner)];
    }

    /**
     * The factor of a pair of elements.
     *
     * @param a one element
     * @param b the other, of a block that the system admits as partner
     * @return the factor
     */
    public double of(int a, int b) {
        int blockA = system.blockIndexOf(a);
        int blockB = system.blockIndexOf(b);
        return ofPair(blockA, blockB) * ofEnd(a, blockB) * ofEnd(b, blockA);
    }

    @Override
    public PairFactor make() {
        return (a, b, line) -> of(a, b);
    }

    /**
     * Factors of pairs of blocks.
     *
     * @return one for each kind; a copy
     */
    public double[] pair() {
        return pair.clone();
    }

    /**
     * Factors of columns.
     *
     * @return one for each column of each end; a copy
     */
    public double[] column() {
        return column.clone();
    }

    /**
     * Factors of rows.
     *
     * @return one for each row of each end; a copy
     */
    public double[] row() {
        return row.clone();
    }
}
