package org.raysheaf.engine.ray;

import java.io.IOException;
import java.util.EnumSet;
import java.util.Set;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.Collectors;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.event.EventTally.Reason;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.settings.Problems;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafMaker;

/**
 * Reads a list once, block by block, and keeps of each event only its walks, shortened to the planes on which it can meet activity.
 * Events that meet none are set aside as {@link Reason#OUTSIDE_IMAGE}. Used once, by one thread, which lets the pool prepare the rays of a block.
 */
public final class EventLoader {
    private static final int BLOCK = 1 << 16;
    private static final int PIECE = 1 << 11;

    private final SheafMaker maker;
    private final int raysPerEvent;
    private final float[] support;
    private final EventSelection selection;
    private final EventBackground background;
    private final EventTally tally = new EventTally();
    private final SheafBundle bundle;
    private final Walks draft;
    private final boolean[] meets = new boolean[BLOCK];
    private final Walks kept;
    private final float[] keptBackground;
    private long made;
    private long used;
    private int events;

    private EventLoader(
            EventSource source, SheafMaker maker, Image support, EventSelection selection, EventBackground background) {
        this.maker = maker;
        this.raysPerEvent = maker.raysPerSheaf();
        this.selection = selection;
        this.background = background;
        Lattice lattice = new Lattice(support.grid());
        this.support = lattice.fromImage(support);
        for (int i = 0; i < this.support.length; i++) {
            this.support[i] = this.support[i] > 0 ? 1 : 0;
        }
        bundle = new SheafBundle(raysPerEvent, BLOCK);
        draft = new Walks(lattice, BLOCK * raysPerEvent);
        int most = room(source.events());
        kept = new Walks(lattice, most * raysPerEvent);
        keptBackground = new float[background == EventBackground.NONE ? 0 : most];
    }

    private int room(long eventsInList) {
        long most = selection == EventSelection.ALL ? eventsInList : (eventsInList + 1) / 2;
        new Problems("list")
                .rule(
                        most <= RayOrder.MOST_EVENTS && most * raysPerEvent <= Integer.MAX_VALUE - 8,
                        "events",
                        "the list has " + eventsInList + " events of " + raysPerEvent
                                + " rays; at most 2^30 events and 2^31 rays can be taken at once")
                .orThrow();
        return (int) most;
    }

    /**
     * Loads a list.
     *
     * @param source the list
     * @param maker turns its events into sheaves
     * @param support an image of values above 0 where there may be activity
     * @param selection which of the used events to keep
     * @param subsets into how many subsets to deal them, at least 1
     * @param background the background of each event, or {@link EventBackground#NONE}
     * @param pool prepares the rays
     * @param progress hears of the events read
     * @return the events, sorted; at least one
     * @throws NoUsableEventsException if no event was kept; its tally says why
     * @throws IOException if the list cannot be read or lacks a column that the maker needs
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if the list has too many events for memory, or usable ones but
     *     fewer than there are subsets
     */
    public static EventStore load(
            EventSource source,
            SheafMaker maker,
            Image support,
            EventSelection selection,
            int subsets,
            EventBackground background,
            ForkJoinPool pool,
            Progress progress)
            throws IOException {
        EventLoader loader = new EventLoader(source, maker, support, selection, background);
        progress.begin("reading events", source.events(), "events");
        EventBlock block = new EventBlock(columns(source, maker), BLOCK);
        try (EventSource.Cursor cursor = source.open()) {
            while (cursor.next(block)) {
                loader.add(block, pool);
                progress.advance(block.size());
            }
        }
        EventStore store = loader.sorted(subsets, pool);
        progress.end(store.events() + " events kept");
        return store;
    }

    /** What the maker needs, and of what it also reads as much as the list has. */
    private static Set<Attribute> columns(EventSource source, SheafMaker maker) throws IOException {
        EnumSet<Attribute> missing = EnumSet.noneOf(Attribute.class);
        missing.addAll(maker.attributes());
        missing.removeAll(source.attributes());
        if (!missing.isEmpty()) {
            throw new IOException("the list lacks columns that its events need: expected " + names(maker.attributes())
                    + ", found " + names(source.attributes()) + "; write the missing ones into the list");
        }
        EnumSet<Attribute> columns = EnumSet.noneOf(Attribute.class);
        columns.addAll(maker.alsoReads());
        columns.retainAll(source.attributes());
        columns.addAll(maker.attributes());
        return columns;
    }

    private static String names(Set<Attribute> attributes) {
        return attributes.stream().sorted().map(Attribute::columnName).collect(Collectors.joining(" "));
    }

    private void add(EventBlock block, ForkJoinPool pool) throws IOException {
        bundle.clear();
        maker.make(block, bundle, tally);
        int pieces = (bundle.size() + PIECE - 1) / PIECE;
        Tasks.forEach(pool, pieces, piece -> prepare(piece * PIECE, Math.min(bundle.size(), (piece + 1) * PIECE)));
        for (int i = 0; i < bundle.size(); i++) {
            if (meets[i]) {
                if (selection.takes(used++)) {
                    keep(i);
                }
            } else {
                tally.withdraw(Reason.OUTSIDE_IMAGE, 1);
            }
        }
        made += bundle.size();
    }

    private void prepare(int from, int to) {
        for (int i = from; i < to; i++) {
            meets[i] = false;
            for (int k = i * raysPerEvent; k < (i + 1) * raysPerEvent; k++) {
                draft.set(k, bundle.rays(), k, bundle.weights()[k]);
                meets[i] |= draft.trim(k, support);
            }
        }
    }

    private void keep(int sheaf) throws IOException {
        if ((events + 1) * raysPerEvent > kept.capacity()) {
            throw new IOException("the list gave more events than it announced");
        }
        for (int ray = 0; ray < raysPerEvent; ray++) {
            kept.copy(events * raysPerEvent + ray, draft, sheaf * raysPerEvent + ray);
        }
        if (keptBackground.length > 0) {
            keptBackground[events] = background.of(made + sheaf);
        }
        events++;
    }

    private EventStore sorted(int subsets, ForkJoinPool pool) throws NoUsableEventsException {
        if (events == 0) {
            throw new NoUsableEventsException(tally);
        }
        new Problems("estimation")
                .rule(
                        subsets >= 1 && subsets <= events,
                        "subsets",
                        "expected 1 to " + events + " subsets, for " + events + " usable events; found " + subsets)
                .orThrow();
        int[] starts = new int[subsets + 1];
        for (int s = 0; s < subsets; s++) {
            starts[s + 1] = starts[s] + (events - s + subsets - 1) / subsets;
        }
        long[] order = new long[events];
        Tasks.forEach(pool, (events + BLOCK - 1) / BLOCK, block -> {
            for (int e = block * BLOCK; e < Math.min(events, (block + 1) * BLOCK); e++) {
                order[starts[e % subsets] + e / subsets] = RayOrder.entry(kept, e, raysPerEvent);
            }
        });
        Tasks.forEach(pool, subsets, s -> RayOrder.sort(order, starts[s], starts[s + 1]));
        kept.arrange(order, raysPerEvent);
        return EventStore.inMemory(kept, raysPerEvent, starts, arrangedBackground(order), support, tally);
    }

    private float @Nullable [] arrangedBackground(long[] order) {
        if (keptBackground.length == 0) {
            return null;
        }
        float[] arranged = new float[order.length];
        for (int e = 0; e < order.length; e++) {
            arranged[e] = keptBackground[RayOrder.number(order[e])];
        }
        return arranged;
    }
}
