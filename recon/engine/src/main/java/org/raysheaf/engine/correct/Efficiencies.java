package org.raysheaf.engine.correct;

import java.io.IOException;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.BlockPairKinds;
import org.raysheaf.geometry.response.CoincidenceSheaves;

/**
 * Efficiency of every element, and of the places of blocks to each other, relative to the model, most likely from a list of a known source: pairs of
 * elements a and b are expected ε_a ε_b g_ab m_ab times beside randoms, with m from étendue, window, attenuation, scatter and the activity on the
 * line, and g as {@link GeometryFactors} says. The likelihood of a Poisson product model, its randoms taken off beforehand, is climbed by fixed-point
 * steps on the numbers of pairs that each factor has; at the top every one of these numbers is met exactly. As the activity is known, the
 * efficiencies are absolute: 1 for a perfect model. Immutable.
 */
public final class Efficiencies {
    /** An element is taken for dead if it has less than a tenth of what is expected, and that is enough to tell. */
    private static final double DEAD_SHARE = 0.1;

    private static final double ENOUGH_TO_TELL = 30;

    private final double[] efficiencies;
    private final double[] relativeErrors;
    private final GeometryFactors geometry;
    private final int rounds;
    private final double lastChange;
    private final List<Goodness> goodness;
    private final double[] pullsAlone;
    private final double[] pulls;

    private Efficiencies(
            double[] efficiencies,
            double[] relativeErrors,
            GeometryFactors geometry,
            int rounds,
            double lastChange,
            List<Goodness> goodness,
            double[] pullsAlone,
            double[] pulls) {
        this.efficiencies = efficiencies;
        this.relativeErrors = relativeErrors;
        this.geometry = geometry;
        this.rounds = rounds;
        this.lastChange = lastChange;
        this.goodness = goodness;
        this.pullsAlone = pullsAlone;
        this.pulls = pulls;
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
        ExpectedPairs pairs =
                ExpectedPairs.of(sheaves, activityBqPerMl, scatter, attenuation, countsPerUnit, pool, progress);
        BlockPairKinds kinds = new BlockPairKinds(sheaves.system());
        double[] start = start(list, pairs, kinds, randoms, pool);
        Margins found = Margins.found(list, pairs, start, pool);
        Margins random = randoms == null ? Margins.none(pairs) : Margins.randoms(randoms, pairs, start, pool);
        EfficiencyFit fit = new EfficiencyFit(pairs, kinds, found.less(random), start, pool, progress);
        fit.climbEfficiencies();
        Margins alone = fit.expected().plus(random);
        fit.climbAll();
        Margins all = fit.expected().plus(random);
        double[] counts = found.ofElements();
        double[] randomCounts = random.ofElements();
        double[] errors = new double[start.length];
        for (int e = 0; e < errors.length; e++) {
            double wanted = counts[e] - randomCounts[e];
            errors[e] = start[e] > 0 && wanted > 0 ? Math.sqrt(counts[e]) / wanted : 1;
        }
        return new Efficiencies(
                fit.efficiencies(),
                errors,
                fit.geometry(),
                fit.rounds(),
                fit.lastChange(),
                goodness(found, alone, all, kinds),
                pulls(found.ofBlocks(), alone.ofBlocks()),
                pulls(found.ofBlocks(), all.ofBlocks()));
    }

    /** The same for all elements, and 0 for the dead. */
    private static double[] start(
            EventSource list, ExpectedPairs pairs, BlockPairKinds kinds, @Nullable Randoms randoms, ForkJoinPool pool)
            throws IOException {
        double[] ones = new double[pairs.sheaves().system().elements()];
        Arrays.fill(ones, 1);
        double[] wanted = Margins.found(list, pairs, ones, pool).ofElements();
        if (randoms != null) {
            double[] random = Margins.randoms(randoms, pairs, ones, pool).ofElements();
            Arrays.setAll(wanted, e -> Math.max(0, wanted[e] - random[e]));
        }
        double[] model =
                Margins.expected(pairs, ones, GeometryFactors.ones(kinds), pool).ofElements();
        double expected = Arrays.stream(model).sum();
        double typical = expected > 0 ? Math.max(1e-6, Arrays.stream(wanted).sum() / expected) : 1;
        double[] start = new double[ones.length];
        for (int e = 0; e < start.length; e++) {
            double hoped = typical * model[e];
            boolean dead = hoped > ENOUGH_TO_TELL && wanted[e] < DEAD_SHARE * hoped;
            start[e] = dead || !(model[e] > 0) ? 0 : Math.sqrt(typical);
        }
        return start;
    }

    private static List<Goodness> goodness(Margins found, Margins alone, Margins all, BlockPairKinds kinds) {
        DetectorSystem system = kinds.system();
        int columns = 0;
        int rows = 0;
        for (PlacedBlock block : system.blocks()) {
            columns += block.kind().lattice().columns();
            rows += block.kind().lattice().rows();
        }
        return List.of(
                Goodness.of(
                        "pairs of blocks",
                        half(found.ofBlocks(), system),
                        half(alone.ofBlocks(), system),
                        half(all.ofBlocks(), system),
                        system.blocks().size()),
                Goodness.of(
                        "columns towards partner blocks",
                        found.ofBlockColumns(kinds),
                        alone.ofBlockColumns(kinds),
                        all.ofBlockColumns(kinds),
                        columns),
                Goodness.of(
                        "rows towards partner blocks",
                        found.ofBlockRows(kinds),
                        alone.ofBlockRows(kinds),
                        all.ofBlockRows(kinds),
                        rows));
    }

    /** Each pair of blocks once. */
    private static double[] half(double[] ofBlocks, DetectorSystem system) {
        int blocks = system.blocks().size();
        double[] half = ofBlocks.clone();
        for (int a = 0; a < blocks; a++) {
            for (int b = a; b < blocks; b++) {
                half[a * blocks + b] = 0;
            }
        }
        return half;
    }

    private static double[] pulls(double[] found, double[] expected) {
        double[] pulls = new double[found.length];
        for (int i = 0; i < pulls.length; i++) {
            pulls[i] = expected[i] > 0 ? (found[i] - expected[i]) / Math.sqrt(expected[i]) : Double.NaN;
        }
        return pulls;
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
     * The factors of block geometry.
     *
     * @return what goes with the efficiencies
     */
    public GeometryFactors geometry() {
        return geometry;
    }

    /**
     * Elements taken for dead.
     *
     * @return their numbers
     */
    public List<Integer> silent() {
        List<Integer> silent = new ArrayList<>();
        for (int e = 0; e < efficiencies.length; e++) {
            if (efficiencies[e] == 0) {
                silent.add(e);
            }
        }
        return silent;
    }

    /**
     * Mean of the efficiencies.
     *
     * @return the mean over all elements that are not silent, NaN if there are none
     */
    public double mean() {
        return Arrays.stream(efficiencies).filter(e -> e > 0).average().orElse(Double.NaN);
    }

    /**
     * Spread of the efficiencies.
     *
     * @return the standard deviation over all elements that are not silent, NaN if there are none
     */
    public double spread() {
        double mean = mean();
        return Math.sqrt(Arrays.stream(efficiencies)
                .filter(e -> e > 0)
                .map(e -> (e - mean) * (e - mean))
                .average()
                .orElse(Double.NaN));
    }

    /**
     * How well an efficiency is known.
     *
     * @return mean relative standard error over all elements that are not silent, NaN if there are none
     */
    public double meanRelativeError() {
        double sum = 0;
        int live = 0;
        for (int e = 0; e < efficiencies.length; e++) {
            if (efficiencies[e] > 0) {
                sum += relativeErrors[e];
                live++;
            }
        }
        return sum / live;
    }

    /**
     * How long it took.
     *
     * @return rounds through all factors
     */
    public int rounds() {
        return rounds;
    }

    /**
     * How well the fit had settled.
     *
     * @return the largest relative change of any factor in the last round
     */
    public double lastChange() {
        return lastChange;
    }

    /**
     * Goodness of fit, by numbers that were not fitted one by one.
     *
     * @return pairs of blocks, then columns and rows of blocks towards each partner block
     */
    public List<Goodness> goodness() {
        return goodness;
    }

    /**
     * Residuals of pairs of blocks with efficiencies alone.
     *
     * @return (found − expected) / √expected at block · blocks + partner, NaN where nothing is expected; a copy
     */
    public double[] pullsAlone() {
        return pullsAlone.clone();
    }

    /**
     * Residuals of pairs of blocks with the factors of block geometry.
     *
     * @return as {@link #pullsAlone}
     */
    public double[] pulls() {
        return pulls.clone();
    }
}
