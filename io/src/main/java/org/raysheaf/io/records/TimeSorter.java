package org.raysheaf.io.records;

import java.io.IOException;
import java.util.Set;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;

/**
 * Puts events in order of time that stand out of it by at most a window: collects many, and lets those go that are older than the newest by more than
 * the window. Events of equal time keep their order. One thread.
 */
final class TimeSorter implements EventSink {
    private static final int FIRST_ROOM = 1 << 17;
    private static final int MOST_ROOM = 1 << 22;

    private final Set<Attribute> attributes;
    private final long windowPs;
    private final EventSink sink;
    private final EventBlock out;
    private EventBlock held;
    private int[] order;
    private int[] spare;
    private long newest = Long.MIN_VALUE;

    TimeSorter(Set<Attribute> attributes, long windowPs, EventSink sink) {
        this.attributes = attributes;
        this.windowPs = windowPs;
        this.sink = sink;
        this.out = new EventBlock(attributes, FieldBlock.CAPACITY);
        this.held = new EventBlock(attributes, FIRST_ROOM);
        this.order = new int[FIRST_ROOM];
        this.spare = new int[FIRST_ROOM];
    }

    @Override
    public void accept(EventBlock block) throws IOException {
        if (held.size() + block.size() > held.capacity()) {
            release(false);
            if (held.size() + block.size() > held.capacity() / 2) {
                grow();
            }
        }
        EventRows.append(block, 0, block.size(), held);
        long[] times = block.longs(Attribute.TIME);
        for (int i = 0; i < block.size(); i++) {
            newest = Math.max(newest, times[i]);
        }
    }

    /** Lets all go that are still held. */
    void finish() throws IOException {
        release(true);
    }

    private void release(boolean all) throws IOException {
        int size = held.size();
        long[] times = held.longs(Attribute.TIME);
        sort(times, size);
        int go = size;
        long oldestHeld = newest - windowPs;
        if (!all) {
            go = 0;
            while (go < size && times[order[go]] < oldestHeld) {
                go++;
            }
        }
        for (int done = 0; done < go; done += out.size()) {
            EventRows.gather(held, order, done, Math.min(out.capacity(), go - done), out);
            sink.accept(out);
        }
        EventBlock rest = new EventBlock(attributes, held.capacity());
        EventRows.gather(held, order, go, size - go, rest);
        held = rest;
    }

    private void grow() throws RecordException {
        if (held.capacity() >= MOST_ROOM) {
            throw new RecordException("expected fewer than " + MOST_ROOM / 2
                    + " records within order_ns, found more; make order_ns smaller");
        }
        EventBlock larger = new EventBlock(attributes, 2 * held.capacity());
        EventRows.append(held, 0, held.size(), larger);
        held = larger;
        order = new int[held.capacity()];
        spare = new int[held.capacity()];
    }

    /** Merge sort from the bottom up; runs that are in order already are left alone, and lists are nearly in order. */
    private void sort(long[] times, int size) {
        for (int i = 0; i < size; i++) {
            order[i] = i;
        }
        for (int width = 1; width < size; width *= 2) {
            boolean moved = false;
            for (int low = 0; low < size; low += 2 * width) {
                int middle = Math.min(low + width, size);
                int high = Math.min(low + 2 * width, size);
                if (middle < high && times[order[middle - 1]] > times[order[middle]]) {
                    merge(times, low, middle, high);
                    moved = true;
                } else {
                    System.arraycopy(order, low, spare, low, high - low);
                }
            }
            if (moved) {
                int[] swap = order;
                order = spare;
                spare = swap;
            }
        }
    }

    private void merge(long[] times, int low, int middle, int high) {
        int a = low;
        int b = middle;
        for (int i = low; i < high; i++) {
            boolean first = b == high || (a < middle && times[order[a]] <= times[order[b]]);
            spare[i] = first ? order[a++] : order[b++];
        }
    }
}
