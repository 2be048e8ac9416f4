package org.raysheaf.engine.ray;

import java.io.IOException;
import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
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
import org.raysheaf.geometry.port.Scratch;
import org.raysheaf.geometry.settings.Problems;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafMaker;

/**
 * Reads a list once, block by block, and keeps of each event only its walks, shortened to the planes on which it can meet activity.
 * Events that meet none are set aside as {@link Reason#OUTSIDE_IMAGE}. What is kept is sorted and put away shard by shard, so that
 * loading takes little more memory than the store, or than one shard if the store lies on disk. Used once, by one thread, which lets the pool
 * make the rays of a block and sort.
 */
public final class EventLoader {
    private static final int BLOCK = 1 << 16;
    private static final int PIECE = 1 << 11;

    /**
     * Rays that are sorted together. Large enough that neighbours in the order are close in space, small enough to sort in memory: 200 MB.
     * Part of what makes the last bits of a result.
     */
    static final int SHARD_RAYS = 1 << 23;

    private final SheafMaker maker;
    private final int raysPerEvent;
    private final int subsets;
    private final float[] support;
    private final EventSelection selection;
    private final EventBackground background;
    private final ForkJoinPool pool;
    private final Shelf shelf;
    private final EventTally tally = new EventTally();
    private final Piece[] pieces = new Piece[BLOCK / PIECE];
    private final int shardEvents;
    private final Walks shard;
    private final float @Nullable [] shardBackground;
    private final List<List<EventStore.Segment>> segments = new ArrayList<>();
    private final long most;
    private long made;
    private long used;
    /** Events kept, and how many of them were put away. */
    private int events;

    private int away;
    private long planes;

    private EventLoader(
            EventSource source,
            SheafMaker maker,
            Image support,
            EventSelection selection,
            int subsets,
            EventBackground background,
            Storage storage,
            int shardRays,
            ForkJoinPool pool)
            throws IOException {
        this.maker = maker;
        this.raysPerEvent = maker.raysPerSheaf();
        this.selection = selection;
        this.subsets = subsets;
        this.background = background;
        this.pool = pool;
        Lattice lattice = new Lattice(support.grid());
        this.support = lattice.fromImage(support);
        for (int i = 0; i < this.support.length; i++) {
            this.support[i] = this.support[i] > 0 ? 1 : 0;
        }
        most = selection == EventSelection.ALL ? source.events() : (source.events() + 1) / 2;
        requireCountable();
        Set<Attribute> columns = columns(source, maker);
        for (int i = 0; i < pieces.length; i++) {
            pieces[i] = new Piece(columns, lattice);
        }
        shardEvents = (int) Math.max(1, Math.min(most, shardRays / raysPerEvent));
        shard = new Walks(lattice, shardEvents * raysPerEvent, maker.law());
        shardBackground = background == EventBackground.NONE ? null : new float[shardEvents];
        for (int s = 0; s < subsets; s++) {
            segments.add(new ArrayList<>());
        }
        shelf = shelf(storage);
    }

    private void requireCountable() {
        new Problems("list")
                .rule(
                        most <= Integer.MAX_VALUE - 8,
                        "events",
                        "the list gives " + most + " events; at most 2^31 can be taken at once")
                .orThrow();
    }

    private Shelf shelf(Storage storage) throws IOException {
        long bytes = most
                * ((Walks.BYTES + (shard.timed() ? Walks.TIMED_BYTES : 0)) * (long) raysPerEvent
                        + (shardBackground == null ? 0 : Float.BYTES));
        Scratch scratch = storage.scratch();
        return bytes <= storage.memoryBytes() || scratch == null
                ? new MemoryShelf()
                : new ScratchShelf(scratch.open(), shard.lattice(), raysPerEvent, maker.law());
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
        return load(source, maker, support, selection, subsets, background, Storage.MEMORY, pool, progress);
    }

    /**
     * Loads a list that may be larger than memory.
     *
     * @param source the list
     * @param maker turns its events into sheaves
     * @param support an image of values above 0 where there may be activity
     * @param selection which of the used events to keep
     * @param subsets into how many subsets to deal them, at least 1
     * @param background the background of each event, or {@link EventBackground#NONE}
     * @param storage where the events may lie; the store is the same wherever they do
     * @param pool prepares the rays
     * @param progress hears of the events read
     * @return the events, sorted; at least one; the caller closes it
     * @throws NoUsableEventsException if no event was kept; its tally says why
     * @throws IOException if the list cannot be read or lacks a column that the maker needs, or if there is no room on disk
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if the list has too many events to be numbered, or usable ones but
     *     fewer than there are subsets
     */
    public static EventStore load(
            EventSource source,
            SheafMaker maker,
            Image support,
            EventSelection selection,
            int subsets,
            EventBackground background,
            Storage storage,
            ForkJoinPool pool,
            Progress progress)
            throws IOException {
        return load(source, maker, support, selection, subsets, background, storage, SHARD_RAYS, pool, progress);
    }

    /** The same with shards of another size, for tests. */
    static EventStore load(
            EventSource source,
            SheafMaker maker,
            Image support,
            EventSelection selection,
            int subsets,
            EventBackground background,
            Storage storage,
            int shardRays,
            ForkJoinPool pool,
            Progress progress)
            throws IOException {
        EventLoader loader =
                new EventLoader(source, maker, support, selection, subsets, background, storage, shardRays, pool);
        EventStore store = null;
        try {
            progress.begin("reading events", source.events(), "events");
            loader.read(source, progress);
            store = loader.finish();
            progress.end(store.events() + " events kept");
            return store;
        } finally {
            if (store == null) {
                loader.shelf.close();
            }
        }
    }

    private void read(EventSource source, Progress progress) throws IOException {
        EventBlock block = new EventBlock(columns(source, maker), BLOCK);
        try (EventSource.Cursor cursor = source.open()) {
            while (cursor.next(block)) {
                add(block);
                progress.advance(block.size());
            }
        }
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

    private void add(EventBlock block) throws IOException {
        int count = (block.size() + PIECE - 1) / PIECE;
        Tasks.forEach(pool, count, i -> pieces[i].make(block, i * PIECE, Math.min(block.size(), (i + 1) * PIECE)));
        for (int i = 0; i < count; i++) {
            Piece piece = pieces[i];
            piece.tally.moveTo(tally);
            for (int sheaf = 0; sheaf < piece.bundle.size(); sheaf++) {
                if (!piece.meets[sheaf]) {
                    tally.withdraw(Reason.OUTSIDE_IMAGE, 1);
                } else if (selection.takes(used++)) {
                    keep(piece.walks, sheaf, made + sheaf);
                }
            }
            made += piece.bundle.size();
        }
    }

    /** Some events of a block on their way to walks; what one thread works on. */
    private final class Piece {
        final EventBlock events;
        final SheafBundle bundle = new SheafBundle(raysPerEvent, PIECE, maker.law());
        final Walks walks;
        final boolean[] meets = new boolean[PIECE];
        final EventTally tally = new EventTally();

        Piece(Set<Attribute> columns, Lattice lattice) {
            events = new EventBlock(columns, PIECE);
            walks = new Walks(lattice, PIECE * raysPerEvent, maker.law());
        }

        void make(EventBlock block, int from, int to) {
            events.resize(0);
            events.append(block, from, to - from);
            bundle.clear();
            maker.make(events, bundle, tally);
            for (int i = 0; i < bundle.size(); i++) {
                meets[i] = false;
                for (int k = i * raysPerEvent; k < (i + 1) * raysPerEvent; k++) {
                    walks.set(k, bundle, k);
                    meets[i] |= walks.trim(k, support);
                }
            }
        }
    }

    private void keep(Walks walks, int sheaf, long number) throws IOException {
        if (events == most) {
            throw new IOException("the list gave more events than it announced");
        }
        if (events - away == shardEvents) {
            putAway(false);
        }
        int place = events - away;
        for (int ray = 0; ray < raysPerEvent; ray++) {
            planes += walks.planes(sheaf * raysPerEvent + ray);
            shard.copy(place * raysPerEvent + ray, walks, sheaf * raysPerEvent + ray);
        }
        if (shardBackground != null) {
            shardBackground[place] = background.of(number);
        }
        events++;
    }

    /** Sorts the shard, subset by subset, and puts it on the shelf. */
    private void putAway(boolean last) throws IOException {
        int size = events - away;
        // The i-th event of the shard belongs to subset (away + i) mod S; so the first one of subset s is at firsts[s].
        int[] firsts = new int[subsets];
        int[] starts = new int[subsets + 1];
        for (int s = 0; s < subsets; s++) {
            firsts[s] = Math.floorMod(s - away % subsets, subsets);
            starts[s + 1] = starts[s] + Math.max(0, (size - firsts[s] + subsets - 1) / subsets);
        }
        long[] order = new long[size];
        Tasks.forEach(pool, (size + BLOCK - 1) / BLOCK, block -> {
            for (int e = block * BLOCK; e < Math.min(size, (block + 1) * BLOCK); e++) {
                int subset = (away + e) % subsets;
                order[starts[subset] + (e - firsts[subset]) / subsets] = RayOrder.entry(shard, e, raysPerEvent);
            }
        });
        Tasks.forEach(pool, subsets, s -> RayOrder.sort(order, starts[s], starts[s + 1]));
        Walks sorted = shard.arranged(order, raysPerEvent, last, pool);
        float[] sortedBackground = arranged(shardBackground, order);
        for (int s = 0; s < subsets; s++) {
            int count = starts[s + 1] - starts[s];
            if (count > 0) {
                int number = shelf.put(sorted, sortedBackground, starts[s], count);
                segments.get(s).add(new EventStore.Segment(number, count));
            }
        }
        away = events;
    }

    private static float @Nullable [] arranged(float @Nullable [] values, long[] order) {
        if (values == null) {
            return null;
        }
        float[] arranged = new float[order.length];
        for (int e = 0; e < order.length; e++) {
            arranged[e] = values[RayOrder.number(order[e])];
        }
        return arranged;
    }

    private EventStore finish() throws IOException {
        if (events == 0) {
            throw new NoUsableEventsException(tally);
        }
        new Problems("estimation")
                .rule(
                        subsets <= events,
                        "subsets",
                        "expected 1 to " + events + " subsets, for " + events + " usable events; found " + subsets)
                .orThrow();
        putAway(true);
        return new EventStore(shelf, segments, shard.lattice(), raysPerEvent, planes, support, tally);
    }
}
