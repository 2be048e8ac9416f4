package org.raysheaf.engine.ray;

import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.EventTally;

/**
 * The events of a list, ready to be visited: each is a run of {@link Walks}, as many as its sheaf has rays, and events are sorted by
 * {@link RayOrder} within their subset. Subset s holds every S-th event, in the order of the list, from the s-th on, so subsets are
 * alike.
 *
 * <p>Memory: {@value Walks#BYTES} bytes per ray, and 4 per event if there is a background; while loading up to 16 more per event of the
 * list. Immutable once loaded; made by {@link EventLoader}.
 */
public final class EventStore {
    /** What an event costs beyond the planes it visits, in planes: set-up and a mispredicted branch or two. */
    private static final int FIXED_COST = 8;

    private final Walks walks;
    private final int raysPerEvent;
    private final int[] subsetStarts;
    private final float @Nullable [] background;
    private final float[] support;
    private final EventTally tally;

    EventStore(
            Walks walks,
            int raysPerEvent,
            int[] subsetStarts,
            float @Nullable [] background,
            float[] support,
            EventTally tally) {
        this.walks = walks;
        this.raysPerEvent = raysPerEvent;
        this.subsetStarts = subsetStarts;
        this.background = background;
        this.support = support;
        this.tally = tally;
    }

    /**
     * The rays of all events: event e has the walks e · raysPerEvent to (e + 1) · raysPerEvent − 1.
     *
     * @return the shared walks
     */
    public Walks walks() {
        return walks;
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
     * The background b/c of every event.
     *
     * @return the shared array (unit of the image times mm), or null if there is none
     */
    public float @Nullable [] background() {
        return background;
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
        long total = 0;
        for (int event = from; event < to; event++) {
            total += cost(event);
        }
        int[] starts = new int[runs + 1];
        long sum = 0;
        int event = from;
        for (int run = 0; run < runs; run++) {
            starts[run] = event;
            long goal = total * (run + 1) / runs;
            while (event < to && sum < goal) {
                sum += cost(event++);
            }
        }
        starts[runs] = to;
        return starts;
    }

    private int cost(int event) {
        int cost = FIXED_COST;
        for (int k = event * raysPerEvent; k < (event + 1) * raysPerEvent; k++) {
            cost += walks.planes(k);
        }
        return cost;
    }

    /**
     * Voxel planes that all rays of the store visit, the measure of the work of a pass.
     *
     * @return the count
     */
    public long planes() {
        long sum = 0;
        for (int k = 0; k < events() * raysPerEvent; k++) {
            sum += walks.planes(k);
        }
        return sum;
    }
}
