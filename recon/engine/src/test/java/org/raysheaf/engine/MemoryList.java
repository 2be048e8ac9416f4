package org.raysheaf.engine;

import java.time.Instant;
import java.util.EnumSet;
import java.util.Set;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafCatalogue;
import org.raysheaf.geometry.sheaf.SheafMaker;

/** A tiny system in memory: every sheaf that it knows has a number, and an event is the number of its sheaf. */
public final class MemoryList implements EventSource, SheafMaker, SheafCatalogue {
    private final int raysPerSheaf;
    private final double[][] rays;
    private final int[] events;

    /** Rays of seven numbers each: start, end, weight; sheaf i has the rays i · raysPerSheaf and following. */
    public MemoryList(int raysPerSheaf, double[][] rays, int[] events) {
        this.raysPerSheaf = raysPerSheaf;
        this.rays = rays;
        this.events = events;
    }

    @Override
    public ListHeader header() {
        return new ListHeader("", 1, 1, Instant.EPOCH, null);
    }

    @Override
    public Set<Attribute> attributes() {
        return EnumSet.of(Attribute.ELEMENT_A);
    }

    @Override
    public long events() {
        return events.length;
    }

    @Override
    public Cursor open() {
        return new Cursor() {
            private int next;

            @Override
            public boolean next(EventBlock block) {
                int size = Math.min(block.capacity(), events.length - next);
                System.arraycopy(events, next, block.ints(Attribute.ELEMENT_A), 0, size);
                block.resize(size);
                next += size;
                return size > 0;
            }

            @Override
            public void close() {}
        };
    }

    @Override
    public int raysPerSheaf() {
        return raysPerSheaf;
    }

    @Override
    public void make(EventBlock block, SheafBundle out, EventTally tally) {
        for (int i = 0; i < block.size(); i++) {
            append(block.ints(Attribute.ELEMENT_A)[i], out);
            tally.use();
        }
    }

    /** Seven sheaves make a part, so that there are many parts, of which the last is short. */
    @Override
    public int parts() {
        return (rays.length / raysPerSheaf + 6) / 7;
    }

    @Override
    public int capacity(int part) {
        return 7;
    }

    @Override
    public void fill(int part, SheafBundle out) {
        for (int sheaf = part * 7; sheaf < Math.min((part + 1) * 7, rays.length / raysPerSheaf); sheaf++) {
            append(sheaf, out);
        }
    }

    private void append(int sheaf, SheafBundle out) {
        int first = out.append() * raysPerSheaf;
        for (int k = 0; k < raysPerSheaf; k++) {
            double[] r = rays[sheaf * raysPerSheaf + k];
            out.set(first + k, r[0], r[1], r[2], r[3], r[4], r[5], r[6]);
        }
    }
}
