package org.raysheaf.engine.correct;

import java.util.Arrays;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.response.BlockPairKinds;

/**
 * Which part of a product of efficiencies and block geometry is called which. Whatever a column, a row or a kind of block has in common towards
 * all partners could as well be in the efficiencies of its elements, and goes there: in what is left to the geometry the mean logarithm, weighted
 * with pairs, is 0 over the partners of a column, over those of a row, over the columns and over the rows of an end, and as near as may be to 0 over the
 * pairs of a kind of block. The product of all factors of a pair does not change.
 */
final class GeometrySplit {
    private static final int ROUNDS = 50;

    private final BlockPairKinds kinds;
    private final double[] columnPairs;
    private final double[] rowPairs;
    private final double[] kindPairs;
    /** For each column of each end the column of the block kind; −1 where there is none. */
    private final int[] columnOfBlock;

    private final int[] rowOfBlock;

    GeometrySplit(BlockPairKinds kinds, Margins pairs) {
        this.kinds = kinds;
        columnPairs = pairs.ofColumns(kinds);
        rowPairs = pairs.ofRows(kinds);
        kindPairs = pairs.ofKinds(kinds);
        columnOfBlock = new int[columnPairs.length];
        rowOfBlock = new int[rowPairs.length];
        Arrays.fill(columnOfBlock, -1);
        Arrays.fill(rowOfBlock, -1);
        for (PlacedBlock block : kinds.system().blocks()) {
            for (PlacedBlock partner : kinds.system().blocks()) {
                int end = kinds.endOf(block.index(), partner.index());
                for (int i = 0; end >= 0 && i < block.kind().elements(); i++) {
                    int e = block.firstElement() + i;
                    int kind = kinds.blockKindOf(block.index());
                    columnOfBlock[end * kinds.columns() + kinds.column(e, partner.index())] =
                            kind * kinds.columns() + kinds.column(e);
                    rowOfBlock[end * kinds.rows() + kinds.row(e, partner.index())] = kind * kinds.rows() + kinds.row(e);
                }
            }
        }
    }

    /** Moves what belongs elsewhere, in place. */
    void apply(double[] efficiencies, double[] pair, double[] column, double[] row) {
        double[] ofColumns = new double[kinds.blockKinds() * kinds.columns()];
        double[] ofRows = new double[kinds.blockKinds() * kinds.rows()];
        for (int round = 0; round < ROUNDS; round++) {
            commonOfEnds(pair, column, columnPairs, kinds.columns());
            commonOfEnds(pair, row, rowPairs, kinds.rows());
            commonOfPlaces(column, columnPairs, columnOfBlock, ofColumns);
            commonOfPlaces(row, rowPairs, rowOfBlock, ofRows);
        }
        double[] ofBlocks = commonOfBlockKinds(pair);
        for (int e = 0; e < efficiencies.length; e++) {
            int kind = kinds.blockKindOf(kinds.system().blockIndexOf(e));
            efficiencies[e] *= Math.exp(ofBlocks[kind]
                    + ofColumns[kind * kinds.columns() + kinds.column(e)]
                    + ofRows[kind * kinds.rows() + kinds.row(e)]);
        }
    }

    private void commonOfEnds(double[] pair, double[] factors, double[] weights, int width) {
        for (int kind = 0; kind < pair.length; kind++) {
            int[] ends = kinds.endsOf(kind);
            for (int end : ends) {
                pair[kind] *= Math.exp(meanLog(factors, weights, end * width, width));
            }
        }
        for (int end = 0; end < kinds.ends(); end++) {
            double mean = meanLog(factors, weights, end * width, width);
            for (int i = end * width; i < (end + 1) * width; i++) {
                factors[i] *= Math.exp(-mean);
            }
        }
    }

    private static double meanLog(double[] factors, double[] weights, int from, int count) {
        double sum = 0;
        double weight = 0;
        for (int i = from; i < from + count; i++) {
            double w = Math.max(0, weights[i]);
            sum += w * Math.log(factors[i]);
            weight += w;
        }
        return weight > 0 ? sum / weight : 0;
    }

    /** Takes out of the factors what a place has in common, and adds its logarithm to what the place has gathered. */
    private static void commonOfPlaces(double[] factors, double[] weights, int[] places, double[] gathered) {
        double[] sum = new double[gathered.length];
        double[] weight = new double[gathered.length];
        for (int i = 0; i < factors.length; i++) {
            if (places[i] >= 0) {
                double w = Math.max(0, weights[i]);
                sum[places[i]] += w * Math.log(factors[i]);
                weight[places[i]] += w;
            }
        }
        for (int place = 0; place < gathered.length; place++) {
            sum[place] = weight[place] > 0 ? sum[place] / weight[place] : 0;
            gathered[place] += sum[place];
        }
        for (int i = 0; i < factors.length; i++) {
            if (places[i] >= 0) {
                factors[i] *= Math.exp(-sum[places[i]]);
            }
        }
    }

    /** Least squares of log pair − (one kind of block + the other), by turns; what is found is taken out of the factors. */
    private double[] commonOfBlockKinds(double[] pair) {
        double[] common = new double[kinds.blockKinds()];
        for (int round = 0; round < ROUNDS; round++) {
            for (int block = 0; block < common.length; block++) {
                double sum = 0;
                double weight = 0;
                for (int kind = 0; kind < pair.length; kind++) {
                    int[] blocks = blocksOf(kind);
                    int times = (blocks[0] == block ? 1 : 0) + (blocks[1] == block ? 1 : 0);
                    double w = Math.max(0, kindPairs[kind]) * times;
                    double rest = Math.log(pair[kind]) - common[blocks[0]] - common[blocks[1]];
                    sum += w * rest;
                    weight += w * times;
                }
                common[block] += weight > 0 ? sum / weight : 0;
            }
        }
        for (int kind = 0; kind < pair.length; kind++) {
            int[] blocks = blocksOf(kind);
            pair[kind] *= Math.exp(-common[blocks[0]] - common[blocks[1]]);
        }
        return common;
    }

    private int[] blocksOf(int kind) {
        int[] ends = kinds.endsOf(kind);
        return new int[] {kinds.blockKindOfEnd(ends[0]), kinds.blockKindOfEnd(ends[1])};
    }
}
