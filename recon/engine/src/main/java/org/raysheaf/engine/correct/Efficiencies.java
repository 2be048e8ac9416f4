package org.raysheaf.engine.correct;

import java.io.IOException;
import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.PairFactor;

/**
 * Efficiency of every element relative to the model, most likely from a list of a known source: pairs of elements a and b are expected ε_a ε_b m_ab
 * times beside randoms, with m from étendue, window, attenuation, scatter and the activity on the line. The likelihood of a Poisson product
 * model is climbed by fixed-point steps on the numbers of pairs of each element (its fan), ε_a ← ε_a √(n_a / (ε_a Σ_b ε_b m_ab)); at the top
 * every fan is met exactly. As the activity is known, the efficiencies are absolute: 1 for a perfect model.
 */
public final class Efficiencies {
    private static final int BLOCK = 1 << 15;
    private static final int MOST_ROUNDS = 60;
    private static final double SETTLED = 1e-5;

    /** An element is taken for dead if it has less than a tenth of what is expected, and that is enough to tell. */
    private static final double DEAD_SHARE = 0.1;

    private static final double ENOUGH_TO_TELL = 30;

    private final double[] efficiencies;
    private final double[] relativeErrors;
    private final List<Integer> silent;
    private final double reducedChiSquare;

    private Efficiencies(
            double[] efficiencies, double[] relativeErrors, List<Integer> silent, double reducedChiSquare) {
        this.efficiencies = efficiencies;
        this.relativeErrors = relativeErrors;
        this.silent = silent;
        this.reducedChiSquare = reducedChiSquare;
    }

    /**
     * Finds the efficiencies.
     *
     * @param list list of the source
     * @param sheaves its pairs, with window and attenuation and no efficiencies
     * @param activityBqPerMl the source's activity (Bq/mL)
     * @param randoms random coincidences, or null
     * @param scatter scatter of the source, or null
     * @param attenuation attenuation of the source, or null
     * @param countsPerUnit pairs emitted while the list was taken, per Bq/mL and mm³
     * @param pool does the work
     * @param progress hears of it
     * @return the efficiencies
     * @throws IOException if the list cannot be read
     */
    public static Efficiencies of(
            EventSource list,
            CoincidenceSheaves sheaves,
            Image activityBqPerMl,
            @Nullable Randoms randoms,
            @Nullable Scatter scatter,
            @Nullable Attenuation attenuation,
            double countsPerUnit,
            ForkJoinPool pool,
            Progress progress)
            throws IOException {
        int elements = sheaves.system().elements();
        Pairs[] parts = expected(
                sheaves, new RaySums(activityBqPerMl), randoms, scatter, attenuation, countsPerUnit, pool, progress);
        double[] found = fans(list, sheaves);
        double[] randomFans = new double[elements];
        double[] modelFans = new double[elements];
        for (Pairs part : parts) {
            for (int i = 0; i < part.size; i++) {
                randomFans[part.a[i]] += part.random[i];
                randomFans[part.b[i]] += part.random[i];
                modelFans[part.a[i]] += part.model[i];
                modelFans[part.b[i]] += part.model[i];
            }
        }
        List<Integer> silent = new ArrayList<>();
        double typical = typical(found, randomFans, modelFans);
        double[] efficiencies = new double[elements];
        double[] wanted = new double[elements];
        for (int e = 0; e < elements; e++) {
            wanted[e] = Math.max(0, found[e] - randomFans[e]);
            double hoped = typical * modelFans[e];
            boolean dead = hoped > ENOUGH_TO_TELL && wanted[e] < DEAD_SHARE * hoped;
            efficiencies[e] = dead || !(modelFans[e] > 0) ? 0 : Math.sqrt(typical);
            if (efficiencies[e] == 0) {
                silent.add(e);
            }
        }
        climb(parts, wanted, efficiencies, pool, progress);
        double[] errors = new double[elements];
        for (int e = 0; e < elements; e++) {
            errors[e] = efficiencies[e] > 0 && wanted[e] > 0 ? Math.sqrt(found[e]) / wanted[e] : 1;
        }
        return new Efficiencies(efficiencies, errors, silent, chiSquare(list, sheaves, parts, efficiencies));
    }

    /** Expected pairs of a part of the catalogue. */
    private static final class Pairs {
        int size;
        int[] a;
        int[] b;
        float[] model;
        float[] random;

        Pairs(int room) {
            a = new int[room];
            b = new int[room];
            model = new float[room];
            random = new float[room];
        }
    }

    private static Pairs[] expected(
            CoincidenceSheaves sheaves,
            RaySums activity,
            @Nullable Randoms randoms,
            @Nullable Scatter scatter,
            @Nullable Attenuation attenuation,
            double countsPerUnit,
            ForkJoinPool pool,
            Progress progress) {
        Pairs[] parts = new Pairs[sheaves.parts()];
        progress.begin("expecting pairs", parts.length, "parts");
        pool.submit(() -> IntStream.range(0, parts.length).parallel().forEach(part -> {
                    Pairs pairs = new Pairs(sheaves.capacity(part));
                    RaySums mine = activity.twin();
                    PairFactor factor = sheaves.factor();
                    PairFactor through = attenuation == null ? null : attenuation.make();
                    sheaves.visit(part, (a, b, line) -> {
                        double f = factor.of(a, b, line);
                        double etendue = line.etendueMm2Sr();
                        double trues = etendue / (2 * Math.PI) * f * mine.along(line);
                        double scattered = scatter == null || through == null
                                ? 0
                                : scatter.perEtendue(a, b) * etendue * (f / through.of(a, b, line));
                        int i = pairs.size++;
                        pairs.a[i] = a;
                        pairs.b[i] = b;
                        pairs.model[i] = (float) (countsPerUnit * (trues + scattered));
                        pairs.random[i] = randoms == null ? 0 : (float) randoms.of(a, b);
                    });
                    parts[part] = pairs;
                    progress.advance(1);
                }))
                .join();
        progress.end("");
        return parts;
    }

    private static double typical(double[] found, double[] randoms, double[] model) {
        double pairs = 0;
        double expected = 0;
        for (int e = 0; e < found.length; e++) {
            pairs += found[e] - randoms[e];
            expected += model[e];
        }
        return expected > 0 ? Math.max(1e-6, pairs / expected) : 1;
    }

    private static void climb(
            Pairs[] parts, double[] wanted, double[] efficiencies, ForkJoinPool pool, Progress progress) {
        progress.begin("finding efficiencies", MOST_ROUNDS, "rounds");
        int round = 0;
        for (double change = 1; change > SETTLED && round < MOST_ROUNDS; round++) {
            double[] partners = partners(parts, efficiencies, pool);
            change = 0;
            for (int e = 0; e < efficiencies.length; e++) {
                if (efficiencies[e] > 0) {
                    double next = partners[e] > 0 ? Math.sqrt(efficiencies[e] * wanted[e] / partners[e]) : 0;
                    next = Math.max(next, 1e-9);
                    change = Math.max(change, Math.abs(next / efficiencies[e] - 1));
                    efficiencies[e] = next;
                }
            }
            progress.advance(1);
        }
        progress.end(round + " rounds");
    }

    /** For each element Σ_b ε_b m_ab, in a fixed order whatever the threads. */
    private static double[] partners(Pairs[] parts, double[] efficiencies, ForkJoinPool pool) {
        int slices = 16;
        double[][] sums = new double[slices][efficiencies.length];
        pool.submit(() -> IntStream.range(0, slices).parallel().forEach(slice -> {
                    double[] sum = sums[slice];
                    for (int part = slice; part < parts.length; part += slices) {
                        Pairs pairs = parts[part];
                        for (int i = 0; i < pairs.size; i++) {
                            sum[pairs.a[i]] += efficiencies[pairs.b[i]] * pairs.model[i];
                            sum[pairs.b[i]] += efficiencies[pairs.a[i]] * pairs.model[i];
                        }
                    }
                }))
                .join();
        for (int slice = 1; slice < slices; slice++) {
            for (int e = 0; e < efficiencies.length; e++) {
                sums[0][e] += sums[slice][e];
            }
        }
        return sums[0];
    }

    private static double[] fans(EventSource list, CoincidenceSheaves sheaves) throws IOException {
        double[] fans = new double[sheaves.system().elements()];
        read(list, sheaves, (a, b) -> {
            fans[a]++;
            fans[b]++;
        });
        return fans;
    }

    private interface PairHearer {
        void pair(int a, int b);
    }

    private static void read(EventSource list, CoincidenceSheaves sheaves, PairHearer hearer) throws IOException {
        Set<Attribute> columns = EnumSet.copyOf(sheaves.alsoReads());
        columns.retainAll(list.attributes());
        columns.addAll(sheaves.attributes());
        EventBlock block = new EventBlock(columns, BLOCK);
        EventTally tally = new EventTally();
        try (EventSource.Cursor cursor = list.open()) {
            while (cursor.next(block)) {
                sheaves.visit(block, tally, (a, b, line) -> hearer.pair(a, b));
            }
        }
    }

    /** χ² of the numbers of pairs between blocks, which are not fitted, per degree of freedom. */
    private static double chiSquare(EventSource list, CoincidenceSheaves sheaves, Pairs[] parts, double[] efficiencies)
            throws IOException {
        int blocks = sheaves.system().blocks().size();
        double[] expected = new double[blocks * blocks];
        for (Pairs part : parts) {
            for (int i = 0; i < part.size; i++) {
                int at = key(sheaves, part.a[i], part.b[i], blocks);
                expected[at] += efficiencies[part.a[i]] * efficiencies[part.b[i]] * part.model[i] + part.random[i];
            }
        }
        double[] found = new double[blocks * blocks];
        read(list, sheaves, (a, b) -> {
            if (efficiencies[a] > 0 && efficiencies[b] > 0) {
                found[key(sheaves, a, b, blocks)]++;
            }
        });
        double sum = 0;
        int terms = 0;
        for (int i = 0; i < found.length; i++) {
            if (expected[i] > 5) {
                sum += (found[i] - expected[i]) * (found[i] - expected[i]) / expected[i];
                terms++;
            }
        }
        return terms > blocks ? sum / (terms - blocks) : Double.NaN;
    }

    private static int key(CoincidenceSheaves sheaves, int a, int b, int blocks) {
        int one = sheaves.system().blockIndexOf(a);
        int other = sheaves.system().blockIndexOf(b);
        return Math.max(one, other) * blocks + Math.min(one, other);
    }

    /**
     * The efficiencies.
     *
     * @return one for each element, 0 for a silent one; a copy
     */
    public double[] efficiencies() {
        return efficiencies.clone();
    }

    /**
     * Their statistical errors.
     *
     * @return relative standard error of each; a copy
     */
    public double[] relativeErrors() {
        return relativeErrors.clone();
    }

    /**
     * Elements taken for dead.
     *
     * @return their numbers
     */
    public List<Integer> silent() {
        return List.copyOf(silent);
    }

    /**
     * Goodness of fit.
     *
     * @return χ² per degree of freedom of the pairs between blocks
     */
    public double reducedChiSquare() {
        return reducedChiSquare;
    }
}
