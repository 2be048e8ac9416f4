package org.raysheaf.engine.correct;

import java.io.IOException;
import java.util.concurrent.ForkJoinPool;
import java.util.function.IntConsumer;
import java.util.stream.IntStream;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.response.BlockPairKinds;

/**
 * Numbers of pairs of every element with every partner block, which is all that a fit of efficiencies and block geometry needs: numbers of
 * elements, pairs of blocks, columns and rows are sums of these. Mutable; one thread writes.
 */
final class Margins {
    private final ExpectedPairs pairs;
    /** By part; elements of its first block, counted from their first. */
    private final double[][] ofA;

    private final double[][] ofB;

    private Margins(ExpectedPairs pairs) {
        this.pairs = pairs;
        ofA = new double[pairs.parts()][];
        ofB = new double[pairs.parts()][];
        for (int part = 0; part < pairs.parts(); part++) {
            ofA[part] = new double[pairs.part(part).blockA.kind().elements()];
            ofB[part] = new double[pairs.part(part).blockB.kind().elements()];
        }
    }

    /** What a list holds, pairs of silent elements left out. */
    static Margins found(EventSource list, ExpectedPairs pairs, double[] efficiencies, ForkJoinPool pool)
            throws IOException {
        Margins found = new Margins(pairs);
        DetectorSystem system = pairs.sheaves().system();
        EventPairs.read(
                list,
                pairs.sheaves(),
                pool,
                NumberedPairs::new,
                block -> block.forEach((a, b) -> {
                    if (efficiencies[a] > 0 && efficiencies[b] > 0) {
                        found.count(system, a, b);
                    }
                }));
        return found;
    }

    private void count(DetectorSystem system, int a, int b) {
        int blockA = system.blockIndexOf(a);
        int blockB = system.blockIndexOf(b);
        int part = pairs.partOf(blockA, blockB);
        boolean inOrder = pairs.part(part).blockA.index() == blockA;
        int first = inOrder ? a : b;
        int second = inOrder ? b : a;
        ofA[part][first - pairs.part(part).blockA.firstElement()]++;
        ofB[part][second - pairs.part(part).blockB.firstElement()]++;
    }

    /** Random coincidences, pairs of silent elements left out. */
    static Margins randoms(Randoms randoms, ExpectedPairs pairs, double[] efficiencies, ForkJoinPool pool) {
        Margins sums = new Margins(pairs);
        sums.forEachPart(pool, part -> {
            ExpectedPairs.Part of = pairs.part(part);
            of.sumRandoms(
                    randoms,
                    slice(efficiencies, of.blockA),
                    slice(efficiencies, of.blockB),
                    sums.ofA[part],
                    sums.ofB[part]);
        });
        return sums;
    }

    /** What a fit expects beside randoms. */
    static Margins expected(ExpectedPairs pairs, double[] efficiencies, GeometryFactors geometry, ForkJoinPool pool) {
        Margins sums = new Margins(pairs);
        sums.forEachPart(pool, part -> {
            ExpectedPairs.Part of = pairs.part(part);
            double factor = geometry.ofPair(of.blockA.index(), of.blockB.index());
            double[] weightA = weights(efficiencies, geometry, of.blockA, of.blockB.index());
            double[] weightB = weights(efficiencies, geometry, of.blockB, of.blockA.index());
            of.sum(weightA, weightB, sums.ofA[part], sums.ofB[part]);
            for (int e = 0; e < weightA.length; e++) {
                sums.ofA[part][e] *= weightA[e] * factor;
            }
            for (int e = 0; e < weightB.length; e++) {
                sums.ofB[part][e] *= weightB[e] * factor;
            }
        });
        return sums;
    }

    /** No pairs. */
    static Margins none(ExpectedPairs pairs) {
        return new Margins(pairs);
    }

    private static double[] weights(double[] efficiencies, GeometryFactors geometry, PlacedBlock block, int partner) {
        double[] weights = slice(efficiencies, block);
        for (int e = 0; e < weights.length; e++) {
            weights[e] *= geometry.ofEnd(block.firstElement() + e, partner);
        }
        return weights;
    }

    private static double[] slice(double[] ofElements, PlacedBlock block) {
        double[] slice = new double[block.kind().elements()];
        System.arraycopy(ofElements, block.firstElement(), slice, 0, slice.length);
        return slice;
    }

    private void forEachPart(ForkJoinPool pool, IntConsumer work) {
        pool.submit(() -> IntStream.range(0, ofA.length).parallel().forEach(work))
                .join();
    }

    /** These less others. */
    Margins less(Margins others) {
        return plus(-1, others);
    }

    /** These and others. */
    Margins plus(Margins others) {
        return plus(1, others);
    }

    private Margins plus(double times, Margins others) {
        Margins sum = new Margins(pairs);
        for (int part = 0; part < ofA.length; part++) {
            add(sum.ofA[part], ofA[part], times, others.ofA[part]);
            add(sum.ofB[part], ofB[part], times, others.ofB[part]);
        }
        return sum;
    }

    private static void add(double[] sum, double[] one, double times, double[] other) {
        for (int e = 0; e < sum.length; e++) {
            sum[e] = one[e] + times * other[e];
        }
    }

    /** Where a number of pairs of an element with a partner block belongs. */
    private interface Slot {
        int of(int element, int block, int partner);
    }

    private double[] gather(int slots, Slot slot) {
        double[] sums = new double[slots];
        for (int part = 0; part < ofA.length; part++) {
            add(
                    sums,
                    slot,
                    ofA[part],
                    pairs.part(part).blockA,
                    pairs.part(part).blockB.index());
            add(
                    sums,
                    slot,
                    ofB[part],
                    pairs.part(part).blockB,
                    pairs.part(part).blockA.index());
        }
        return sums;
    }

    private static void add(double[] sums, Slot slot, double[] numbers, PlacedBlock block, int partner) {
        for (int e = 0; e < numbers.length; e++) {
            sums[slot.of(block.firstElement() + e, block.index(), partner)] += numbers[e];
        }
    }

    /** Pairs of each element with all others. */
    double[] ofElements() {
        return gather(pairs.sheaves().system().elements(), (element, block, partner) -> element);
    }

    /** Each pair counts twice here, once for each of its elements. */
    double[] ofKinds(BlockPairKinds kinds) {
        return gather(kinds.kinds(), (element, block, partner) -> kinds.kindOf(block, partner));
    }

    double[] ofColumns(BlockPairKinds kinds) {
        return gather(
                kinds.ends() * kinds.columns(),
                (element, block, partner) ->
                        kinds.endOf(block, partner) * kinds.columns() + kinds.column(element, partner));
    }

    double[] ofRows(BlockPairKinds kinds) {
        return gather(
                kinds.ends() * kinds.rows(),
                (element, block, partner) -> kinds.endOf(block, partner) * kinds.rows() + kinds.row(element, partner));
    }

    /** By block and partner, each pair of blocks twice. */
    double[] ofBlocks() {
        int blocks = pairs.sheaves().system().blocks().size();
        return gather(blocks * blocks, (element, block, partner) -> block * blocks + partner);
    }

    /** By block, partner and column. */
    double[] ofBlockColumns(BlockPairKinds kinds) {
        int blocks = pairs.sheaves().system().blocks().size();
        return gather(
                blocks * blocks * kinds.columns(),
                (element, block, partner) ->
                        (block * blocks + partner) * kinds.columns() + kinds.column(element, partner));
    }

    /** By block, partner and row. */
    double[] ofBlockRows(BlockPairKinds kinds) {
        int blocks = pairs.sheaves().system().blocks().size();
        return gather(
                blocks * blocks * kinds.rows(),
                (element, block, partner) -> (block * blocks + partner) * kinds.rows() + kinds.row(element, partner));
    }
}
