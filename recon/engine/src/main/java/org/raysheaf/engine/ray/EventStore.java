package org.raysheaf.engine.ray;

import java.util.Arrays;
import java.util.function.Consumer;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.EventTally;

/**
 * The events of a list, ready to be visited: each is a run of {@link Walks}, as many as its sheaf has rays, and events are sorted by
 * {@link RayOrder} within their subset. They come page by page, wherever they lie. Subset s holds every S-th event, in the order of the list, from the s-th on, so subsets are
 * alike.
 *
 * <p>Memory: {@value Walks#BYTES} bytes per ray, and 4 per event if there is a background; while loading up to 16 more per event of the
 * list. Immutable once loaded; made by {@link EventLoader}.
 */
public final class EventStore {
    /** What an event costs beyond the planes it visits, in planes: set-up and a mispredicted branch or two. */
    private static final int FIXED_COST = 8;

    private final Pages pages;
    private final Lattice lattice;
    private final int raysPerEvent;
    private final int[] subsetStarts;
    private final float[] support;
    private final EventTally tally;

    /** Where the events lie. */
    @FunctionalInterface
    interface Pages {
        /** Brings the events from … to − 1 before a visitor, in order, in as many pages as it takes. Any thread may call. */
        void each(int from, int to, Consumer<EventPage> visitor);
    }

    EventStore(Pages pages, Lattice lattice, int raysPerEvent, int[] subsetStarts, float[] support, EventTally tally) {
        this.pages = pages;
        this.lattice = lattice;
        this.raysPerEvent = raysPerEvent;
        this.subsetStarts = subsetStarts;
        this.support = support;
        this.tally = tally;
    }

    /** A store whose events all lie in memory. */
    static EventStore inMemory(
            Walks walks,
            int raysPerEvent,
            int[] subsetStarts,
            float @Nullable [] background,
            float[] support,
            EventTally tally) {
        Pages pages = (from, to, visitor) -> visitor.accept(new EventPage(walks, background, 0, from, to));
        return new EventStore(pages, walks.lattice(), raysPerEvent, subsetStarts, support, tally);
    }

    /**
     * Brings a run of events before a visitor, in order, in as many pages as it takes. Safe for use by several threads at once.
     *
     * @param from first event
     * @param to after the last event
     * @param visitor may use a page only until it returns
     */
    public void each(int from, int to, Consumer<EventPage> visitor) {
        if (from < to) {
            pages.each(from, to, visitor);
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
        long total = cost(from, to);
        int[] starts = new int[runs + 1];
        Arrays.fill(starts, 1, runs + 1, to);
        starts[0] = from;
        long[] sum = {0};
        int[] run = {1};
        each(from, to, page -> {
            for (int event = page.first(); event < page.end() && run[0] < runs; event++) {
                // A run ends before the event at which its share of the cost is reached.
                while (run[0] < runs && sum[0] >= total * run[0] / runs) {
                    starts[run[0]++] = event;
                }
                sum[0] += cost(page, event);
            }
        });
        return starts;
    }

    private long cost(int from, int to) {
        long[] sum = {0};
        each(from, to, page -> {
            for (int event = page.first(); event < page.end(); event++) {
                sum[0] += cost(page, event);
            }
        });
        return sum[0];
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
        return cost(0, events()) - (long) FIXED_COST * events();
    }
}
