package org.raysheaf.geometry.response;

import java.util.ArrayList;
import java.util.List;
import java.util.SplittableRandom;
import org.apache.commons.math3.random.SobolSequenceGenerator;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafCatalogue;

/**
 * A quasi-random sample of the pairs of a system, each weighted so that sums over the sample estimate sums over all pairs without bias. Every
 * pair of blocks has parts of its own. In them the six coordinates of a Sobol sequence (as shifted, modulo 1, by random numbers that belong to pair
 * and replicate: Cranley & Patterson, SIAM Journal on Numerical Analysis 13 (1976) 904) say which two elements and, by what is left of
 * each coordinate within its element, where in them. Immutable, safe for use by several threads.
 *
 * <p>Where events have the rays of their pair of elements, the sample takes the same rays; where they end anywhere, a line drawn by {@link
 * DrawnLines}.
 */
final class SampledPairs implements SheafCatalogue {
    private static final int AXES = 6;
    /** The most points of a part; longer samples have several parts for each pair of blocks. */
    private static final int BATCH = 1 << 14;

    /** Which coordinate (u v w of a, u v w of b) each dimension of the sequence serves: the first ones are the most even. */
    private static final int[] AXIS_OF = {0, 3, 1, 4, 2, 5};

    private final CoincidenceSheaves sheaves;
    private final boolean drawn;
    private final int first;
    private final int points;
    private final long seed;
    private final int batches;
    /** The first batch, which all parts share. */
    private final double[] sequence;

    private final List<Cells> cells = new ArrayList<>();

    /** Elements of a block along u, v, w. */
    private record Cells(int columns, int rows, int layers) {
        int count() {
            return columns * rows * layers;
        }
    }

    SampledPairs(CoincidenceSheaves sheaves, long seed, int first, int points) {
        this.sheaves = sheaves;
        this.drawn = sheaves.continuous();
        this.first = first;
        this.points = points;
        this.seed = seed;
        this.batches = (points + BATCH - 1) / BATCH;
        this.sequence = sequence(0);
        for (PlacedBlock block : sheaves.system().blocks()) {
            CrystalBlock lattice = block.kind().lattice();
            cells.add(new Cells(lattice.columns(), lattice.rows(), lattice.layers()));
        }
    }

    /** Six coordinates for each point of a batch. */
    private double[] sequence(int batch) {
        double[] coordinates = new double[AXES * size(batch)];
        SobolSequenceGenerator sobol = new SobolSequenceGenerator(AXES);
        for (int at = 0; at < coordinates.length; at += AXES) {
            double[] next = at == 0 ? sobol.skipTo(first + batch * BATCH) : sobol.nextVector();
            for (int d = 0; d < AXES; d++) {
                coordinates[at + AXIS_OF[d]] = next[d];
            }
        }
        return coordinates;
    }

    private int size(int batch) {
        return Math.min(BATCH, points - batch * BATCH);
    }

    @Override
    public int raysPerSheaf() {
        return drawn ? 1 : sheaves.raysPerSheaf();
    }

    @Override
    public int parts() {
        return Math.multiplyExact(sheaves.parts(), batches);
    }

    @Override
    public int capacity(int part) {
        return size(part % batches);
    }

    @Override
    public void fill(int part, SheafBundle out) {
        int pair = part / batches;
        int batch = part % batches;
        PlacedBlock a = sheaves.block(pair, 0);
        PlacedBlock b = sheaves.block(pair, 1);
        Cells ofA = cells.get(a.index());
        Cells ofB = cells.get(b.index());
        double each = (double) ofA.count() * ofB.count() / points;
        double[] shift = new double[AXES];
        for (int axis = 0; axis < AXES; axis++) {
            shift[axis] = unit(Strata.mix(Strata.mix(seed + pair) + axis));
        }
        double[] coordinates = batch == 0 ? sequence : sequence(batch);
        double[] shares = new double[AXES];
        PairCaster caster = sheaves.caster();
        SplittableRandom blur = new SplittableRandom(Strata.mix(seed - part) + first);
        for (int i = 0; i < size(batch); i++) {
            for (int axis = 0; axis < AXES; axis++) {
                double x = coordinates[AXES * i + axis] + shift[axis];
                shares[axis] = x < 1 ? x : x - 1;
            }
            int one = a.firstElement() + take(ofA, shares, 0);
            int other = b.firstElement() + take(ofB, shares, 3);
            if (drawn) {
                caster.drawn(one, other, shares, blur, each, out);
            } else {
                caster.pair(one, other, each, out);
            }
        }
    }

    /** The element that three coordinates in [0, 1) fall on; leaves in their place where in the element they fall. */
    private static int take(Cells cells, double[] shares, int at) {
        int column = take(cells.columns(), shares, at);
        int row = take(cells.rows(), shares, at + 1);
        int layer = take(cells.layers(), shares, at + 2);
        return (layer * cells.rows() + row) * cells.columns() + column;
    }

    private static int take(int count, double[] shares, int at) {
        double place = shares[at] * count;
        int whole = Math.min(count - 1, (int) place);
        shares[at] = place - whole;
        return whole;
    }

    private static double unit(long bits) {
        return (bits >>> 11) * 0x1p-53;
    }
}
