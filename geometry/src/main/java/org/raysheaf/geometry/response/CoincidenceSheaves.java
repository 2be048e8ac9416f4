package org.raysheaf.geometry.response;

import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafCatalogue;
import org.raysheaf.geometry.sheaf.SheafMaker;
import org.raysheaf.geometry.sheaf.SheafSampler;

/**
 * Coincident pairs as sheaves: one line between the mean or measured interaction points, or several that are spread over what is not known of
 * them ({@link Positions}). The catalogue holds every pair of elements that the system admits, one part per pair of blocks. An event and the catalogue
 * entry of the same pair have the same rays, so a pair that the sensitivity leaves out is set aside in the list as well. Where rays end at
 * measured points no catalogue has those of the events; then {@link #sampler} draws from all that are possible. Where times of flight are used, rays
 * of events are weighted along them.
 */
public final class CoincidenceSheaves implements SheafMaker, SheafCatalogue {
    private static final double GOLDEN = (Math.sqrt(5) - 1) / 2;
    private static final double SQRT_TWO = Math.sqrt(2);

    private final ElementResponse response;
    private final DetectorSystem system;
    private final double[] frames;
    private final PairLines lines;
    private final List<PlacedBlock[]> blockPairs;
    private final Positions positions;
    private final MeasuredPoints measured;
    private final Strata strata;
    private final PairFactor.Maker factors;
    private final boolean[] silent;
    private final @Nullable FlightTimes times;

    /**
     * The sheaves of a system, one ray each.
     *
     * @param response the tabulated response of its elements
     */
    public CoincidenceSheaves(ElementResponse response) {
        this.response = response;
        this.system = response.system();
        this.frames = ElementFrames.of(system);
        this.lines = new PairLines(response, frames, 0);
        this.blockPairs = admitted(system);
        this.positions = Positions.ONE_RAY;
        this.measured = new MeasuredPoints(system, frames, positions);
        this.strata = new Strata(1);
        this.factors = () -> (a, b, line) -> 1;
        this.silent = new boolean[system.elements()];
        this.times = null;
    }

    private CoincidenceSheaves(
            CoincidenceSheaves from,
            PairLines lines,
            Positions positions,
            PairFactor.Maker factors,
            boolean[] silent,
            @Nullable FlightTimes times) {
        this.response = from.response;
        this.system = from.system;
        this.frames = from.frames;
        this.lines = lines;
        this.blockPairs = from.blockPairs;
        this.positions = positions;
        this.measured = new MeasuredPoints(system, frames, positions);
        this.strata = new Strata(positions.rays());
        this.factors = factors;
        this.silent = silent;
        this.times = times;
    }

    private static List<PlacedBlock[]> admitted(DetectorSystem system) {
        List<PlacedBlock[]> pairs = new ArrayList<>();
        for (PlacedBlock a : system.blocks()) {
            for (PlacedBlock b : system.blocks().subList(0, a.index())) {
                if (system.pairs().admits(a, b)) {
                    pairs.add(new PlacedBlock[] {a, b});
                }
            }
        }
        return pairs;
    }

    /**
     * The same sheaves, weighted with a factor more.
     *
     * @param more makes the factor
     * @return sheaves whose catalogue counts with it
     */
    public CoincidenceSheaves with(PairFactor.Maker more) {
        PairFactor.Maker before = factors;
        PairFactor.Maker both = () -> {
            PairFactor one = before.make();
            PairFactor other = more.make();
            return (a, b, line) -> one.of(a, b, line) * other.of(a, b, line);
        };
        return new CoincidenceSheaves(this, lines, positions, both, silent, times);
    }

    /**
     * The same pairs, with rays for interaction points that are known in another way.
     *
     * @param known how well they are known, and how many rays stand for the rest
     * @return sheaves of that many rays
     */
    public CoincidenceSheaves locating(Positions known) {
        return new CoincidenceSheaves(this, lines, known, factors, silent, times);
    }

    /**
     * The same sheaves, weighted with the efficiencies of elements. Pairs of an element of efficiency 0 are left out of the catalogue and
     * set aside in lists.
     *
     * @param efficiencies one for each element, at least 0
     * @return sheaves that count with them
     */
    public CoincidenceSheaves withEfficiencies(double[] efficiencies) {
        boolean[] quiet = silent.clone();
        for (int e = 0; e < quiet.length; e++) {
            quiet[e] |= !(efficiencies[e] > 0);
        }
        CoincidenceSheaves weighted = with(() -> (a, b, line) -> efficiencies[a] * efficiencies[b]);
        return new CoincidenceSheaves(this, lines, positions, weighted.factors, quiet, times);
    }

    /**
     * The same sheaves, events of which are weighted along their rays by their times of flight. The catalogue remains that of plain rays: the
     * weights of all time differences that an event could have had add up to 1 everywhere on its ray.
     *
     * @param flightTimes what the times of the system's elements tell
     * @return sheaves whose events need a time difference
     */
    public CoincidenceSheaves with(FlightTimes flightTimes) {
        return new CoincidenceSheaves(this, lines, positions, factors, silent, flightTimes);
    }

    /**
     * What events know of where on their ray the decay was.
     *
     * @return the times of flight, or null if rays are plain
     */
    public @Nullable FlightTimes times() {
        return times;
    }

    /**
     * The system whose pairs these are.
     *
     * @return the system
     */
    public DetectorSystem system() {
        return system;
    }

    /**
     * The factor that the catalogue counts with, for one thread.
     *
     * @return all factors together
     */
    public PairFactor factor() {
        return factors.make();
    }

    /**
     * How well interaction points are known.
     *
     * @return what these sheaves were made for
     */
    public Positions positions() {
        return positions;
    }

    /**
     * Whether rays end anywhere, so that the catalogue, which is one of pairs of elements, has not the rays of the events.
     *
     * @return true if points or depths are measured
     */
    public boolean continuous() {
        return positions.continuous(system);
    }

    /**
     * Draws from all sheaves that events can have, with all factors.
     *
     * @param seed decides what is drawn
     * @param marginMm by how much the field of view is widened: sheaves that pass it at this distance are drawn as well (mm), at least 0
     * @return the sampler
     */
    public SheafSampler sampler(long seed, double marginMm) {
        PairLines wide = new PairLines(response, frames, marginMm);
        CoincidenceSheaves all = new CoincidenceSheaves(this, wide, positions, factors, silent, null);
        return (replicate, first, points) ->
                new SampledPairs(all, Strata.mix(seed ^ Strata.mix(replicate + 1)), first, points);
    }

    @Override
    public Set<Attribute> attributes() {
        return times == null
                ? Set.of(Attribute.ELEMENT_A, Attribute.ELEMENT_B)
                : Set.of(Attribute.ELEMENT_A, Attribute.ELEMENT_B, Attribute.TIME_DIFFERENCE);
    }

    @Override
    public SheafBundle.WeightLaw law() {
        return times == null ? SheafBundle.WeightLaw.PLAIN : SheafBundle.WeightLaw.GAUSSIAN;
    }

    @Override
    public Set<Attribute> alsoReads() {
        Set<Attribute> columns = EnumSet.of(Attribute.DELAYED);
        measured.addColumns(columns, positions.rays() > 1);
        return columns;
    }

    @Override
    public int raysPerSheaf() {
        return positions.rays();
    }

    /**
     * {@inheritDoc}
     *
     * <p>If the events have a {@link Attribute#DELAYED} column, delayed pairs are set aside. Rays end where the event was measured, in
     * blocks of one piece at the point, in crystals whose readout tells it at the depth, if the events have such columns; the étendue is that of
     * the pair of elements. With {@link FlightTimes} pairs whose time difference is no number are set aside.
     *
     * @throws IllegalArgumentException if an element is not one of the system's
     */
    @Override
    public void make(EventBlock events, SheafBundle out, EventTally tally) {
        if (positions.rays() == 1) {
            each(events, measured.of(events), false, tally, (i, a, b, line) -> {
                PairCaster.append(out, line, 1);
                place(out, line);
            });
            return;
        }
        PairRays rays = new PairRays(response, frames, strata);
        MeasuredPoints.Events found = measured.of(events);
        each(events, found, false, tally, (i, a, b, line) -> {
            rays.aim(a, b, line);
            found.blur(i, a, b, rays);
            rays.append(out, 1);
            place(out, line);
        });
    }

    /** Places the weight of the newest sheaf along each of its rays, from the middle of the ray. */
    private void place(SheafBundle out, LineOfResponse line) {
        if (times == null) {
            return;
        }
        int rays = positions.rays();
        for (int ray = (out.size() - 1) * rays; ray < out.size() * rays; ray++) {
            float[] ends = out.rays();
            int at = 6 * ray;
            double x = ends[at + 3] - ends[at];
            double y = ends[at + 4] - ends[at + 1];
            double z = ends[at + 5] - ends[at + 2];
            out.place(ray, 0.5 * Math.sqrt(x * x + y * y + z * z) - line.offset, line.offsetSd);
        }
    }

    /**
     * Finds the line of every usable event, in order, and counts every event as used or set aside: the same events that {@link #make} makes
     * sheaves of.
     *
     * @param events the events
     * @param tally counts them
     * @param visitor hears of every usable one
     */
    public void visit(EventBlock events, EventTally tally, PairVisitor visitor) {
        each(events, measured.of(events), true, tally, (i, a, b, line) -> visitor.pair(a, b, line));
    }

    /** Hears of usable events by their number in the block. */
    private interface EventVisitor {
        void event(int i, int a, int b, LineOfResponse line);
    }

    private void each(
            EventBlock events, MeasuredPoints.Events found, boolean etendue, EventTally tally, EventVisitor visitor) {
        PairLines maker = lines.twin();
        LineOfResponse line = new LineOfResponse();
        int[] a = events.ints(Attribute.ELEMENT_A);
        int[] b = events.ints(Attribute.ELEMENT_B);
        boolean mayBeDelayed = events.has(Attribute.DELAYED);
        for (int i = 0; i < events.size(); i++) {
            requireElement(a[i]);
            requireElement(b[i]);
            if (mayBeDelayed && events.bytes(Attribute.DELAYED)[i] != 0) {
                tally.setAside(EventTally.Reason.DELAYED);
            } else if (!system.admits(a[i], b[i])) {
                tally.setAside(EventTally.Reason.BLOCKS_TOO_CLOSE);
            } else if (silent[a[i]] || silent[b[i]]) {
                tally.setAside(EventTally.Reason.SILENT_ELEMENT);
            } else if (times != null && !Float.isFinite(events.floats(Attribute.TIME_DIFFERENCE)[i])) {
                tally.setAside(EventTally.Reason.NO_TIME_DIFFERENCE);
            } else if (!found.find(i, a[i], b[i], maker, line, etendue)) {
                tally.setAside(EventTally.Reason.OUTSIDE_FIELD_OF_VIEW);
            } else {
                if (times != null) {
                    times.place(a[i], b[i], events.floats(Attribute.TIME_DIFFERENCE)[i], line);
                }
                visitor.event(i, a[i], b[i], line);
                tally.use();
            }
        }
    }

    private void requireElement(int element) {
        if (element < 0 || element >= system.elements()) {
            throw new IllegalArgumentException(
                    "expected an element from 0 to " + (system.elements() - 1) + ", found " + element);
        }
    }

    @Override
    public int parts() {
        return blockPairs.size();
    }

    @Override
    public int capacity(int part) {
        PlacedBlock[] pair = blockPairs.get(part);
        return Math.multiplyExact(pair[0].kind().elements(), pair[1].kind().elements());
    }

    /** One of the two blocks of a part. */
    PlacedBlock block(int part, int which) {
        return blockPairs.get(part)[which];
    }

    @Override
    public void fill(int part, SheafBundle out) {
        PairCaster caster = caster();
        visit(part, (a, b, line) -> caster.cast(a, b, line, 1, out));
    }

    /** Appends sheaves of pairs to a catalogue, weighted with all factors, for one thread. */
    PairCaster caster() {
        return new PairCaster(
                lines.twin(),
                positions.rays() == 1 ? null : new PairRays(response, frames, strata),
                new DrawnLines(response, frames, measured, positions.rays() > 1),
                factors.make(),
                silent);
    }

    /**
     * Finds the line of every pair of a part of the catalogue, those of silent elements left out.
     *
     * @param part the part
     * @param visitor hears of every pair
     */
    public void visit(int part, PairVisitor visitor) {
        visit(part, 1, visitor);
    }

    /**
     * Finds the line of one of so many pairs of a part of the catalogue, spread evenly over it, those of silent elements left out.
     *
     * @param part the part
     * @param every one of so many pairs is taken, at least 1
     * @param visitor hears of every pair that is taken
     */
    public void visit(int part, int every, PairVisitor visitor) {
        PairLines maker = lines.twin();
        LineOfResponse line = new LineOfResponse();
        PlacedBlock a = blockPairs.get(part)[0];
        PlacedBlock b = blockPairs.get(part)[1];
        for (int i = 0; i < a.kind().elements(); i++) {
            // Each row begins elsewhere, in no step with the columns of a block: else only some offsets would ever be
            // met.
            double begin = (i + 1) * GOLDEN + part * SQRT_TWO;
            int start = (int) (every * (begin - Math.floor(begin)));
            for (int j = start; j < b.kind().elements(); j += every) {
                int first = a.firstElement() + i;
                int second = b.firstElement() + j;
                if (!silent[first] && !silent[second] && maker.line(first, second, line)) {
                    visitor.pair(first, second, line);
                }
            }
        }
    }

    /**
     * The blocks whose pairs a part of the catalogue holds.
     *
     * @param part the part
     * @return the indices of two blocks: the first elements' and the second elements'
     */
    public int[] blocksOf(int part) {
        return new int[] {blockPairs.get(part)[0].index(), blockPairs.get(part)[1].index()};
    }
}
