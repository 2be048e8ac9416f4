package org.raysheaf.engine.correct;

import java.io.IOException;
import java.util.EnumSet;
import java.util.Set;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.FlightTimes;
import org.raysheaf.geometry.response.LineOfResponse;
import org.raysheaf.geometry.response.PairFactor;

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
    private static final int BLOCK = 1 << 15;

    /** Lines clear of the object keep this distance from it (mm): crystals are sometimes mistaken for their neighbours. */
    private static final double CLEARANCE_MM = 5;

    private static final double MASK_VOXEL_MM = 2;
    private static final double DENSE = 0.1;

    /** Stands for "nothing but background": a line on which activity cannot be seen. */
    private static final float HOPELESS = 1e20f;

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
        this.mask = attenuation == null ? null : new RaySums(mask(attenuation.muPerMm()));
        this.countsPerUnit = countsPerUnit;
    }

    /** 1 within {@value #CLEARANCE_MM} mm of dense matter, 0 elsewhere. */
    private static Image mask(Image mu) {
        Grid fine = mu.grid();
        double half = 0.5
                * Math.max(
                        fine.nx() * fine.spacingXMm(),
                        Math.max(fine.ny() * fine.spacingYMm(), fine.nz() * fine.spacingZMm()));
        int reach = (int) Math.ceil(CLEARANCE_MM / MASK_VOXEL_MM);
        int n = (int) Math.ceil(2 * Math.sqrt(3) * half / MASK_VOXEL_MM) + 2 * reach + 2;
        n = Math.min(n, 400);
        Grid grid = new Grid(
                n,
                n,
                n,
                MASK_VOXEL_MM,
                MASK_VOXEL_MM,
                MASK_VOXEL_MM,
                Pose.shift(fine.pose().origin()));
        Image mask = new Image(grid);
        float most = 0;
        for (float value : mu.values()) {
            most = Math.max(most, value);
        }
        for (int x = 0; x < fine.nx(); x++) {
            for (int y = 0; y < fine.ny(); y++) {
                for (int z = 0; z < fine.nz(); z++) {
                    if (mu.at(x, y, z) > DENSE * most) {
                        mark(mask, grid.indices(fine.centre(x, y, z)), reach);
                    }
                }
            }
        }
        return mask;
    }

    private static void mark(Image mask, Vector3 index, int reach) {
        Grid grid = mask.grid();
        int x0 = (int) Math.rint(index.x());
        int y0 = (int) Math.rint(index.y());
        int z0 = (int) Math.rint(index.z());
        boolean inside = x0 >= 0 && y0 >= 0 && z0 >= 0 && x0 < grid.nx() && y0 < grid.ny() && z0 < grid.nz();
        if (!inside || mask.at(x0, y0, z0) > 1) {
            return; // this voxel was spread before
        }
        for (int x = Math.max(0, x0 - reach); x <= Math.min(grid.nx() - 1, x0 + reach); x++) {
            for (int y = Math.max(0, y0 - reach); y <= Math.min(grid.ny() - 1, y0 + reach); y++) {
                for (int z = Math.max(0, z0 - reach); z <= Math.min(grid.nz() - 1, z0 + reach); z++) {
                    int at = grid.index(x, y, z);
                    mask.values()[at] = Math.max(1, mask.values()[at]);
                }
            }
        }
        mask.values()[grid.index(x0, y0, z0)] = 2;
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
        private static final double PRIOR_SCALE = 1.07;

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
     * Adds up what is expected over all pairs, and what was found.
     *
     * @param list the list
     * @param pool does the work
     * @return the balance
     * @throws IOException if the list cannot be read
     */
    public Balance balance(EventSource list, ForkJoinPool pool) throws IOException {
        double[][] sums = new double[sheaves.parts()][];
        pool.submit(() -> IntStream.range(0, sheaves.parts()).parallel().forEach(part -> sums[part] = expected(part)))
                .join();
        double[] total = {0, 0, 0, 0, 1, 0, 0};
        for (double[] sum : sums) {
            for (int i = 0; i < total.length; i++) {
                total[i] = i == 4 ? Math.min(total[i], sum[i]) : total[i] + sum[i];
            }
        }
        long[] prompts = new long[2];
        RaySums clear = mask;
        read(list, (event, a, b, line) -> {
            prompts[0]++;
            prompts[1] += clear != null && clear.along(line) < 1e-3 ? 1 : 0;
        });
        return new Balance(
                prompts[0],
                prompts[1],
                total[0],
                total[1],
                total[2],
                total[3],
                total[4],
                total[6] > 0 ? total[5] / total[6] : 1);
    }

    private double[] expected(int part) {
        double[] sum = {0, 0, 0, 0, 1, 0, 0};
        PairFactor factor = sheaves.factor();
        PairFactor through = attenuation == null ? null : attenuation.make();
        RaySums clear = mask == null ? null : mask.twin();
        sheaves.visit(part, (a, b, line) -> {
            boolean passes = clear != null && clear.along(line) < 1e-3;
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

    /**
     * The background of every usable event.
     *
     * @param list the list
     * @return b/c by number of the event among those used (Bq/mL · mm; with times of flight per mm of offset, so Bq/mL)
     * @throws IOException if the list cannot be read
     * @throws IllegalArgumentException if there are randoms and times, but the list does not tell its pairing window
     */
    public EventBackground of(EventSource list) throws IOException {
        if (randoms == null && scatter == null) {
            return EventBackground.NONE;
        }
        FlightTimes times = sheaves.times();
        double perMm = times == null || randoms == null
                ? 1
                : randomsPerMm(list.header().pairing());
        float[] background = new float[(int) Math.min(Integer.MAX_VALUE - 8, list.events())];
        PairFactor factor = sheaves.factor();
        PairFactor through = attenuation == null ? null : attenuation.make();
        read(list, (event, a, b, line) -> {
            double c = line.etendueMm2Sr() / (2 * Math.PI) * factor.of(a, b, line) * countsPerUnit;
            double random = randoms == null ? 0 : randoms.of(a, b) * perMm / c;
            double scattered = 0;
            if (scatter != null && through != null) {
                double per = times == null ? scatter.perEtendue(a, b) : scatter.perEtendueMm(a, b, line.offsetMm());
                scattered = 2 * Math.PI * per / through.of(a, b, line);
            }
            double sum = random + scattered;
            background[event] = sum < HOPELESS ? (float) sum : HOPELESS; // also where c is 0
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

    /** Hears of every usable event. */
    private interface Visitor {
        void event(int number, int a, int b, LineOfResponse line);
    }

    private void read(EventSource list, Visitor visitor) throws IOException {
        Set<Attribute> columns = EnumSet.copyOf(sheaves.alsoReads());
        columns.retainAll(list.attributes());
        columns.addAll(sheaves.attributes());
        EventBlock block = new EventBlock(columns, BLOCK);
        EventTally tally = new EventTally();
        int[] number = new int[1];
        try (EventSource.Cursor cursor = list.open()) {
            while (cursor.next(block)) {
                sheaves.visit(block, tally, (a, b, line) -> visitor.event(number[0]++, a, b, line));
            }
        }
    }
}
