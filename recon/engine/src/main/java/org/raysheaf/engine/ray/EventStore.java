package org.raysheaf.engine.ray;

import java.io.IOException;
import java.util.Arrays;
import java.util.List;
import java.util.function.Consumer;
import org.raysheaf.geometry.event.EventTally;

/**
 * The events of a list, ready to be visited: each is a run of {@link Walks}, as many as its sheaf has rays, and events are sorted by
 * {@link RayOrder} within their subset. They come page by page, wherever they lie. Subset s holds every S-th event, in the order of the list, from the s-th on, so subsets are
 * alike.
 *
 * <p>Memory: {@value Walks#BYTES} bytes per ray, {@value Walks#TIMED_BYTES} more if rays are timed, and 4 per event if there is a background; while loading up to 16 more per event of the
 * list. Immutable once loaded; made by {@link EventLoader}.
 */
public final class EventStore implements AutoCloseable {
    /** What an event costs beyond the planes it visits, in planes: set-up and a mispredicted branch or two. */
    private static final int FIXED_COST = 8;

    /** Events whose cost is added up as one when a subset is cut. */
    private static final int COUNTED = 1 << 12;

    private final Shelf shelf;
    private final int[] segmentNumbers;
    private final int[] segmentStarts;
    private final Lattice lattice;
    private final int raysPerEvent;
    private final int[] subsetStarts;
    private final long planes;
    private final float[] support;
    private final EventTally tally;

    /** A segment on the shelf: its number there, and how many events it has. */
    record Segment(int number, int events) {}

    /** The events of the subsets' segments, in order. */
    EventStore(
            Shelf shelf,
            List<List<Segment>> subsets,
            Lattice lattice,
            int raysPerEvent,
            long planes,
            float[] support,
            EventTally tally) {
        this.shelf = shelf;
        this.lattice = lattice;
        this.raysPerEvent = raysPerEvent;
        this.planes = planes;
        this.support = support;
        this.tally = tally;
        int count = subsets.stream().mapToInt(List::size).sum();
        segmentNumbers = new int[count];
        segmentStarts = new int[count + 1];
        subsetStarts = new int[subsets.size() + 1];
        int i = 0;
        for (int s = 0; s < subsets.size(); s++) {
            for (Segment segment : subsets.get(s)) {
                segmentNumbers[i] = segment.number;
                segmentStarts[i + 1] = segmentStarts[i] + segment.events;
                i++;
            }
            subsetStarts[s + 1] = segmentStarts[i];
        }
    }

    /**
     * Brings a run of events before a visitor, in order, in as many pages as it takes. Safe for use by several threads at once.
     *
     * @param from first event
     * @param to after the last event
     * @param visitor may use a page only until it returns
     */
    public void each(int from, int to, Consumer<EventPage> visitor) {
        if (from >= to) {
            return;
        }
        int found = Arrays.binarySearch(segmentStarts, from);
        int i = found >= 0 ? found : -found - 2;
        for (int at = from; at < to; i++) {
            int start = segmentStarts[i];
            int end = Math.min(to, segmentStarts[i + 1]);
            shelf.each(segmentNumbers[i], at - start, end - start, start, visitor);
            at = end;
        }
    }

    /**
     * What the rays walk through.
     *
     * @return the lattice
     */
    public Lattice lattice() {
        return lattice;
    }

    /**
     * Rays of each event.
     *
     * @return the count, at least 1
     */
    public int raysPerEvent() {
        return raysPerEvent;
    }

    /**
     * Events in the store.
     *
     * @return the count
     */
    public int events() {
        return subsetStarts[subsets()];
    }

    /**
     * Number of subsets.
     *
     * @return the count, at least 1
     */
    public int subsets() {
        return subsetStarts.length - 1;
    }

    /**
     * Where a subset begins.
     *
     * @param subset number of the subset, from 0; {@link #subsets()} gives the end of the last one
     * @return its first event
     */
    public int start(int subset) {
        return subsetStarts[subset];
    }

    /**
     * Where there may be activity; the line of every event in the store meets at least one such voxel.
     *
     * @return the shared array on the lattice: 1 where there may be activity, else 0
     */
    public float[] support() {
        return support;
    }

    /**
     * What became of the events of the list: used are those whose line meets the support, whether the store selected them or not.
     *
     * @return the shared tally
     */
    public EventTally tally() {
        return tally;
    }

    /**
     * The part of the list's exposure that the store stands for.
     *
     * @return events in the store over events used; 1 unless only some were selected
     */
    public double share() {
        return events() / (double) tally.used();
    }

    /**
     * Cuts a subset into runs of events of about equal cost. The cost of an event is the planes that it visits plus a constant.
     *
     * @param subset number of the subset
     * @param runs how many runs
     * @return where each run starts, and at the end where the last one ends: runs + 1 event numbers
     */
    public int[] cut(int subset, int runs) {
        int from = start(subset);
        int to = start(subset + 1);
        long[] costs = costs(from, to);
        long total = costs[costs.length - 1];
        int[] starts = new int[runs + 1];
        starts[0] = from;
        starts[runs] = to;
        int block = 0;
        for (int run = 1; run < runs; run++) {
            long goal = total * run / runs;
            while (block + 1 < costs.length && costs[block + 1] < goal) {
                block++;
            }
            starts[run] = reach(goal - costs[block], from + block * COUNTED, to);
        }
        return starts;
    }

    /** What the events before each block of {@value #COUNTED} cost, and at the end what all of them do. */
    private long[] costs(int from, int to) {
        long[] costs = new long[(to - from + COUNTED - 1) / COUNTED + 1];
        each(from, to, page -> {
            for (int event = page.first(); event < page.end(); event++) {
                costs[(event - from) / COUNTED + 1] += cost(page, event);
            }
        });
        for (int i = 1; i < costs.length; i++) {
            costs[i] += costs[i - 1];
        }
        return costs;
    }

    /** The first event at which those from a start on have cost at least so much. */
    private int reach(long goal, int from, int to) {
        long[] sum = {0};
        int[] found = {Math.min(to, from + COUNTED)};
        each(from, found[0], page -> {
            for (int event = page.first(); event < page.end() && sum[0] < goal; event++) {
                sum[0] += cost(page, event);
                found[0] = event + 1;
            }
        });
        return goal <= 0 ? from : found[0];
    }

    private int cost(EventPage page, int event) {
        int cost = FIXED_COST;
        int from = (event - page.offset()) * raysPerEvent;
        for (int k = from; k < from + raysPerEvent; k++) {
            cost += page.walks().planes(k);
        }
        return cost;
    }

    /**
     * Voxel planes that all rays of the store visit, the measure of the work of a pass.
     *
     * @return the count
     */
    public long planes() {
        return planes;
    }

    /** Gives up the events, and the disk space that they take if they lie there. */
    @Override
    public void close() throws IOException {
        shelf.close();
    }
}
