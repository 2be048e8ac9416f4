package org.raysheaf.engine.correct;

import java.util.Arrays;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.PairFactor;

/** How many true and scattered pairs of each two elements a known source makes, part by part of the catalogue. Immutable. */
final class ExpectedPairs {
    private final CoincidenceSheaves sheaves;
    private final Part[] parts;
    private final int[] partOfBlocks;

    private ExpectedPairs(CoincidenceSheaves sheaves, Part[] parts) {
        this.sheaves = sheaves;
        this.parts = parts;
        int blocks = sheaves.system().blocks().size();
        partOfBlocks = new int[blocks * blocks];
        Arrays.fill(partOfBlocks, -1);
        for (int part = 0; part < parts.length; part++) {
            int a = parts[part].blockA.index();
            int b = parts[part].blockB.index();
            partOfBlocks[a * blocks + b] = part;
            partOfBlocks[b * blocks + a] = part;
        }
    }

    static ExpectedPairs of(
            CoincidenceSheaves sheaves,
            Image activityBqPerMl,
            @Nullable Scatter scatter,
            @Nullable Attenuation attenuation,
            double countsPerUnit,
            ForkJoinPool pool,
            Progress progress) {
        RaySums activity = new RaySums(activityBqPerMl);
        Part[] parts = new Part[sheaves.parts()];
        progress.begin("expecting pairs", parts.length, "parts");
        pool.submit(() -> IntStream.range(0, parts.length).parallel().forEach(number -> {
                    Part part = new Part(sheaves, number);
                    RaySums mine = activity.twin();
                    PairFactor factor = sheaves.factor();
                    PairFactor through = attenuation == null ? null : attenuation.make();
                    sheaves.visit(number, (a, b, line) -> {
                        double f = factor.of(a, b, line);
                        double etendue = line.etendueMm2Sr();
                        double trues = etendue / (2 * Math.PI) * f * mine.along(line);
                        double scattered = scatter == null || through == null
                                ? 0
                                : scatter.perEtendue(a, b) * etendue * (f / through.of(a, b, line));
                        part.add(a, b, (float) (countsPerUnit * (trues + scattered)));
                    });
                    parts[number] = part;
                    progress.advance(1);
                }))
                .join();
        progress.end("");
        return new ExpectedPairs(sheaves, parts);
    }

    /** The pairs between two blocks. Elements are counted from the first of their block. */
    static final class Part {
        final PlacedBlock blockA;
        final PlacedBlock blockB;
        private final int[] a;
        private final int[] b;
        private final float[] expected;
        private int size;

        Part(CoincidenceSheaves sheaves, int number) {
            int[] blocks = sheaves.blocksOf(number);
            blockA = sheaves.system().blocks().get(blocks[0]);
            blockB = sheaves.system().blocks().get(blocks[1]);
            int room = sheaves.capacity(number);
            a = new int[room];
            b = new int[room];
            expected = new float[room];
        }

        private void add(int elementA, int elementB, float pairs) {
            a[size] = elementA - blockA.firstElement();
            b[size] = elementB - blockB.firstElement();
            expected[size++] = pairs;
        }

        /** Sums over the partners: Σ_b weightB_b m_ab for each a, and the other way round. */
        void sum(double[] weightA, double[] weightB, double[] ofA, double[] ofB) {
            for (int i = 0; i < size; i++) {
                ofA[a[i]] += weightB[b[i]] * expected[i];
                ofB[b[i]] += weightA[a[i]] * expected[i];
            }
        }

        /** The same with random coincidences in place of the expected pairs, of elements of weight above 0 alone. */
        void sumRandoms(Randoms randoms, double[] weightA, double[] weightB, double[] ofA, double[] ofB) {
            for (int i = 0; i < size; i++) {
                if (weightA[a[i]] > 0 && weightB[b[i]] > 0) {
                    double pairs = randoms.of(blockA.firstElement() + a[i], blockB.firstElement() + b[i]);
                    ofA[a[i]] += pairs;
                    ofB[b[i]] += pairs;
                }
            }
        }
    }

    CoincidenceSheaves sheaves() {
        return sheaves;
    }

    int parts() {
        return parts.length;
    }

    Part part(int number) {
        return parts[number];
    }

    /** The part that holds the pairs of two blocks, which the system admits. */
    int partOf(int blockA, int blockB) {
        return partOfBlocks[blockA * sheaves.system().blocks().size() + blockB];
    }
}
