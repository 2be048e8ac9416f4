package org.raysheaf.geometry.response;

import java.util.ArrayList;
import java.util.Collections;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.MonolithicBlock;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafCatalogue;
import org.raysheaf.geometry.sheaf.SheafMaker;

/**
 * Coincident pairs of crystals as sheaves of one ray: the line between the mean interaction points, weighted along it where times are used. The catalogue holds every pair that the
 * system admits, one part per pair of blocks. An event and the catalogue entry of the same pair have the same ray, so a pair that the
 * sensitivity leaves out is set aside in the list as well.
 */
public final class CoincidenceSheaves implements SheafMaker, SheafCatalogue {
    private static final List<Attribute> POINT_A =
            List.of(Attribute.POSITION_A_X, Attribute.POSITION_A_Y, Attribute.POSITION_A_Z);
    private static final List<Attribute> POINT_B =
            List.of(Attribute.POSITION_B_X, Attribute.POSITION_B_Y, Attribute.POSITION_B_Z);
    private static final Set<Attribute> ALSO_READS = alsoReadSet();

    private final DetectorSystem system;
    private final PairLines lines;
    private final List<PlacedBlock[]> blockPairs;
    private final PairFactor.Maker factors;
    private final boolean[] silent;
    private final @Nullable FlightTimes times;

    /**
     * The sheaves of a system.
     *
     * @param response the tabulated response of its elements
     */
    public CoincidenceSheaves(ElementResponse response) {
        this(
                response.system(),
                new PairLines(response),
                admitted(response.system()),
                () -> (a, b, line) -> 1,
                new boolean[response.system().elements()],
                null);
    }

    private CoincidenceSheaves(
            DetectorSystem system,
            PairLines lines,
            List<PlacedBlock[]> blockPairs,
            PairFactor.Maker factors,
            boolean[] silent,
            @Nullable FlightTimes times) {
        this.system = system;
        this.lines = lines;
        this.blockPairs = blockPairs;
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
        return new CoincidenceSheaves(
                system,
                lines,
                blockPairs,
                () -> {
                    PairFactor one = before.make();
                    PairFactor other = more.make();
                    return (a, b, line) -> one.of(a, b, line) * other.of(a, b, line);
                },
                silent,
                times);
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
        return new CoincidenceSheaves(system, lines, blockPairs, weighted.factors, quiet, times);
    }

    /**
     * The same sheaves, events of which are weighted along their rays by their times of flight. The catalogue remains that of plain rays: the
     * weights of all time differences that an event could have had add up to 1 everywhere on its ray.
     *
     * @param flightTimes what the times of the system's elements tell
     * @return sheaves whose events need a time difference
     */
    public CoincidenceSheaves with(FlightTimes flightTimes) {
        return new CoincidenceSheaves(system, lines, blockPairs, factors, silent, flightTimes);
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

    private static Set<Attribute> alsoReadSet() {
        Set<Attribute> set = EnumSet.of(Attribute.DELAYED);
        set.addAll(POINT_A);
        set.addAll(POINT_B);
        return Collections.unmodifiableSet(set);
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
        return ALSO_READS;
    }

    @Override
    public int raysPerSheaf() {
        return 1;
    }

    /**
     * {@inheritDoc}
     *
     * <p>If the events have a {@link Attribute#DELAYED} column, delayed pairs are set aside. In a block of one piece the ray ends at the
     * measured point, if the events have one; the response, and so the sensitivity, is that of the cell that holds the point. With {@link
     * FlightTimes} pairs whose time difference is no number are set aside.
     *
     * @throws IllegalArgumentException if an element is not one of the system's
     */
    @Override
    public void make(EventBlock events, SheafBundle out, EventTally tally) {
        visit(events, tally, (a, b, line) -> {
            int ray = append(out, line, 1);
            if (times != null) {
                out.place(ray, 0.5 * line.lengthMm() - line.offset, line.offsetSd);
            }
        });
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
        PairLines maker = lines.twin();
        LineOfResponse line = new LineOfResponse();
        int[] a = events.ints(Attribute.ELEMENT_A);
        int[] b = events.ints(Attribute.ELEMENT_B);
        boolean mayBeDelayed = events.has(Attribute.DELAYED);
        boolean pointsA = POINT_A.stream().allMatch(events::has);
        boolean pointsB = POINT_B.stream().allMatch(events::has);
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
            } else if (!maker.line(a[i], b[i], line)) {
                tally.setAside(EventTally.Reason.OUTSIDE_FIELD_OF_VIEW);
            } else {
                if (pointsA && measuresPoints(a[i])) {
                    line.ax = events.floats(Attribute.POSITION_A_X)[i];
                    line.ay = events.floats(Attribute.POSITION_A_Y)[i];
                    line.az = events.floats(Attribute.POSITION_A_Z)[i];
                }
                if (pointsB && measuresPoints(b[i])) {
                    line.bx = events.floats(Attribute.POSITION_B_X)[i];
                    line.by = events.floats(Attribute.POSITION_B_Y)[i];
                    line.bz = events.floats(Attribute.POSITION_B_Z)[i];
                }
                if (times != null) {
                    times.place(a[i], b[i], events.floats(Attribute.TIME_DIFFERENCE)[i], line);
                }
                visitor.pair(a[i], b[i], line);
                tally.use();
            }
        }
    }

    private boolean measuresPoints(int element) {
        return system.blockOf(element).kind() instanceof MonolithicBlock;
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

    @Override
    public void fill(int part, SheafBundle out) {
        PairFactor factor = factors.make();
        visit(part, (a, b, line) -> {
            double weight = line.etendue / (2 * Math.PI) * factor.of(a, b, line);
            if (weight > 0) {
                append(out, line, weight);
            }
        });
    }

    /**
     * Finds the line of every pair of a part of the catalogue, those of silent elements left out.
     *
     * @param part the part
     * @param visitor hears of every pair
     */
    public void visit(int part, PairVisitor visitor) {
        PairLines maker = lines.twin();
        LineOfResponse line = new LineOfResponse();
        PlacedBlock a = blockPairs.get(part)[0];
        PlacedBlock b = blockPairs.get(part)[1];
        for (int i = 0; i < a.kind().elements(); i++) {
            for (int j = 0; j < b.kind().elements(); j++) {
                int first = a.firstElement() + i;
                int second = b.firstElement() + j;
                if (!silent[first] && !silent[second] && maker.line(first, second, line)) {
                    visitor.pair(first, second, line);
                }
            }
        }
    }

    private static int append(SheafBundle out, LineOfResponse line, double weight) {
        int ray = out.append();
        out.set(ray, line.ax, line.ay, line.az, line.bx, line.by, line.bz, weight);
        return ray;
    }
}
