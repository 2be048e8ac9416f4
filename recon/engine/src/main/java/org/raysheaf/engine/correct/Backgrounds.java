package org.raysheaf.engine.correct;

import java.io.IOException;
import java.util.Arrays;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.FlightTimes;
import org.raysheaf.geometry.response.LineOfResponse;
import org.raysheaf.geometry.response.PairFactor;
import org.raysheaf.geometry.response.PairVisitor;

/**
 * What else than the activity on its line may have caused each event of a list: random coincidences and scatter, in the unit in which an
 * estimator compares them with the ray sum of the image (Bq/mL · mm). With c = G/2π · factors · counts per Bq/mL and mm³,
 *
 * <pre>
 * b/c = r_a r_b / c + 2π · scatter per étendue / attenuation
 * </pre>
 *
 * <p>Also counts what is expected over all pairs, and how much of it on lines that pass clear of the object, where no true pair can be.
 */
public final class Backgrounds {
    /** Stands for "nothing but background": a line on which activity cannot be seen. */
    private static final float HOPELESS = 1e20f;

    /** A line that runs less than this in the object's surroundings is clear of it (mm). */
    private static final double TOUCH_MM = 1e-3;

    private static final int ENOUGH_PAIRS = 200_000;

    private final CoincidenceSheaves sheaves;
    private final @Nullable Randoms randoms;
    private final @Nullable Scatter scatter;
    private final @Nullable Attenuation attenuation;
    private final @Nullable RaySums mask;
    private final double countsPerUnit;

    /**
     * Prepares.
     *
     * @param sheaves the pairs, with the factors that the sensitivity counts with
     * @param randoms random coincidences, or null
     * @param scatter scatter in the object, or null; needs attenuation
     * @param attenuation attenuation in the object, or null
     * @param countsPerUnit pairs emitted while the list was taken, per Bq/mL and mm³
     */
    public Backgrounds(
            CoincidenceSheaves sheaves,
            @Nullable Randoms randoms,
            @Nullable Scatter scatter,
            @Nullable Attenuation attenuation,
            double countsPerUnit) {
        if (scatter != null && attenuation == null) {
            throw new IllegalArgumentException("scatter needs attenuation");
        }
        this.sheaves = sheaves;
        this.randoms = randoms;
        this.scatter = scatter;
        this.attenuation = attenuation;
        this.mask = attenuation == null ? null : new RaySums(ObjectMask.around(attenuation.muPerMm()));
        this.countsPerUnit = countsPerUnit;
    }

    /**
     * What is expected and what was found, on all lines that cross the field of view and on those clear of the object.
     *
     * @param prompts prompt events found
     * @param promptsClear of these on clear lines
     * @param randoms random coincidences expected
     * @param randomsClear of these on clear lines
     * @param scatter scatter expected
     * @param scatterClear of these on clear lines
     * @param attenuationLow smallest attenuation factor
     * @param attenuationMean mean attenuation factor over the pairs
     */
    public record Balance(
            double prompts,
            double promptsClear,
            double randoms,
            double randomsClear,
            double scatter,
            double scatterClear,
            double attenuationLow,
            double attenuationMean) {
        /** What is known of the scale beforehand: scatter twice and more adds some per cent in small animals. */
        public static final double PRIOR_SCALE = 1.07;

        private static final double PRIOR_SD = 0.1;

        /** How well the randoms on clear lines are known (relative): third photons spoil them unevenly. */
        private static final double RANDOMS_SD = 0.02;

        /**
         * The scale that makes expected scatter and randoms add up to the events found on lines clear of the object, weighed against what is
         * known beforehand: where randoms outnumber scatter there, their error would otherwise become that of scatter.
         *
         * @return the scale
         */
        public double scatterScale() {
            if (!(scatterClear > 0)) {
                return PRIOR_SCALE;
            }
            double found = (promptsClear - randomsClear) / scatterClear;
            double sd = Math.hypot(Math.sqrt(promptsClear), RANDOMS_SD * randomsClear) / scatterClear;
            double weight = 1 / (sd * sd);
            double prior = 1 / (PRIOR_SD * PRIOR_SD);
            return Math.max(0, (weight * found + prior * PRIOR_SCALE) / (weight + prior));
        }
    }

    /**
     * Adds up what is expected over the pairs, and what was found.
     *
     * @param list the list
     * @param pool does the work
     * @return the balance
     * @throws IOException if the list cannot be read
     */
    public Balance balance(EventSource list, ForkJoinPool pool) throws IOException {
        long[] prompts = new long[2];
        EventPairs.read(list, sheaves, pool, () -> new Prompts(mask), block -> {
            prompts[0] += block.all;
            prompts[1] += block.clear;
        });
        return expected((double) prompts[0], (double) prompts[1], pool);
    }

    /**
     * The same, where the list was counted before.
     *
     * @param counted the balance of other backgrounds over the same sheaves, with attenuation
     * @param pool does the work
     * @return the balance
     */
    public Balance balance(Balance counted, ForkJoinPool pool) {
        return expected(counted.prompts(), counted.promptsClear(), pool);
    }

    private Balance expected(double prompts, double promptsClear, ForkJoinPool pool) {
        double[][] sums = new double[sheaves.parts()][];
        int every = every();
        pool.submit(() -> IntStream.range(0, sheaves.parts())
                        .parallel()
                        .forEach(part -> sums[part] = expected(part, every)))
                .join();
        double[] total = {0, 0, 0, 0, 1, 0, 0};
        for (double[] sum : sums) {
            for (int i = 0; i < total.length; i++) {
                total[i] = i == 4 ? Math.min(total[i], sum[i]) : total[i] + sum[i];
            }
        }
        return new Balance(
                prompts,
                promptsClear,
                every * total[0],
                every * total[1],
                every * total[2],
                every * total[3],
                total[4],
                total[6] > 0 ? total[5] / total[6] : 1);
    }

    /** All that is added up is smooth, so of very many pairs some are enough. */
    private int every() {
        long pairs = 0;
        for (int part = 0; part < sheaves.parts(); part++) {
            pairs += sheaves.capacity(part);
        }
        return (int) Math.max(1, Math.min(64, pairs / ENOUGH_PAIRS));
    }

    private double[] expected(int part, int every) {
        double[] sum = {0, 0, 0, 0, 1, 0, 0};
        PairFactor factor = sheaves.factor();
        PairFactor through = attenuation == null ? null : attenuation.make();
        RaySums clear = mask == null ? null : mask.twin();
        sheaves.visit(part, every, (a, b, line) -> {
            boolean passes = clear != null && clear.along(line) < TOUCH_MM;
            double random = randoms == null ? 0 : randoms.of(a, b);
            sum[0] += random;
            sum[1] += passes ? random : 0;
            double transmission = through == null ? 1 : through.of(a, b, line);
            if (scatter != null) {
                double scattered = scatter.perEtendue(a, b)
                        * line.etendueMm2Sr()
                        * (factor.of(a, b, line) / transmission)
                        * countsPerUnit;
                sum[2] += scattered;
                sum[3] += passes ? scattered : 0;
            }
            sum[4] = Math.min(sum[4], transmission);
            sum[5] += transmission;
            sum[6]++;
        });
        return sum;
    }

    /** Counts the events of a block. */
    private static final class Prompts implements PairVisitor {
        private final @Nullable RaySums mask;
        private long all;
        private long clear;

        Prompts(@Nullable RaySums mask) {
            this.mask = mask == null ? null : mask.twin();
        }

        @Override
        public void pair(int a, int b, LineOfResponse line) {
            all++;
            clear += mask != null && mask.along(line) < TOUCH_MM ? 1 : 0;
        }
    }

    /**
     * The background of every usable event.
     *
     * @param list the list
     * @param pool does the work
     * @return b/c by number of the event among those used (Bq/mL · mm; with times of flight per mm of offset, so Bq/mL)
     * @throws IOException if the list cannot be read
     * @throws IllegalArgumentException if there are randoms and times, but the list does not tell its pairing window
     */
    public EventBackground of(EventSource list, ForkJoinPool pool) throws IOException {
        if (randoms == null && scatter == null) {
            return EventBackground.NONE;
        }
        FlightTimes times = sheaves.times();
        double perMm = times == null || randoms == null
                ? 1
                : randomsPerMm(list.header().pairing());
        float[] background = new float[(int) Math.min(Integer.MAX_VALUE - 8, list.events())];
        int[] used = new int[1];
        EventPairs.read(list, sheaves, pool, () -> new OfEvents(times, perMm), block -> {
            System.arraycopy(block.values, 0, background, used[0], block.size);
            used[0] += block.size;
        });
        return event -> background[(int) event];
    }

    /** Random pairs come at all time differences within the window alike, so at all offsets from −cτ/2 to cτ/2. */
    private static double randomsPerMm(@Nullable PairingRecord pairing) {
        if (pairing == null) {
            throw new IllegalArgumentException("randoms of events with times need the pairing window");
        }
        return 1 / (2 * FlightTimes.offsetMm(1e3 * pairing.settings().windowNs()));
    }

    /** The backgrounds of a block of events. */
    private final class OfEvents implements PairVisitor {
        private final @Nullable FlightTimes times;
        private final double perMm;
        private final PairFactor factor = sheaves.factor();
        private final @Nullable PairFactor through = attenuation == null ? null : attenuation.make();
        private float[] values = new float[1 << 10];
        private int size;

        OfEvents(@Nullable FlightTimes times, double perMm) {
            this.times = times;
            this.perMm = perMm;
        }

        @Override
        public void pair(int a, int b, LineOfResponse line) {
            double c = line.etendueMm2Sr() / (2 * Math.PI) * factor.of(a, b, line) * countsPerUnit;
            double random = randoms == null ? 0 : randoms.of(a, b) * perMm / c;
            double scattered = 0;
            if (scatter != null && through != null) {
                double per = times == null ? scatter.perEtendue(a, b) : scatter.perEtendueMm(a, b, line.offsetMm());
                scattered = 2 * Math.PI * per / through.of(a, b, line);
            }
            double sum = random + scattered;
            if (size == values.length) {
                values = Arrays.copyOf(values, 2 * size);
            }
            values[size++] = sum < HOPELESS ? (float) sum : HOPELESS; // also where c is 0
        }
    }
}
