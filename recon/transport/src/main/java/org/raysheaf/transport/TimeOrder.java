package org.raysheaf.transport;

import java.io.IOException;
import java.util.Set;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;

/**
 * Puts events into order of time that stand out of it by no more than a tolerance. Three cases: a list in order passes through; one out of
 * order within the tolerance is put in order, equal times keeping their sequence; beyond it {@link #accept} fails and says where. Holds
 * the events of one tolerance in memory. Not safe for use by several threads.
 */
final class TimeOrder implements EventSink {
    private static final int ROOM = 1 << 15;

    private final EventSink next;
    private final long tolerancePs;
    private EventBlock waiting;
    private EventBlock spare;
    private final EventBlock ready;
    private int[] order = new int[ROOM];
    private long newestPs = Long.MIN_VALUE;
    private long releasedPs = Long.MIN_VALUE;
    private long read;

    TimeOrder(Set<Attribute> attributes, long tolerancePs, EventSink next) {
        this.next = next;
        this.tolerancePs = tolerancePs;
        waiting = new EventBlock(attributes, ROOM);
        spare = new EventBlock(attributes, ROOM);
        ready = new EventBlock(attributes, ROOM);
    }

    @Override
    public void accept(EventBlock block) throws IOException {
        for (int from = 0; from < block.size(); from += ROOM) {
            take(block, from, Math.min(ROOM, block.size() - from));
        }
    }

    private void take(EventBlock block, int from, int count) throws IOException {
        long[] times = block.longs(Attribute.TIME);
        for (int i = from; i < from + count; i++) {
            if (times[i] < releasedPs) {
                throw new DisorderException(read, times[i], newestPs, tolerancePs);
            }
            newestPs = Math.max(newestPs, times[i]);
            read++;
        }
        int before = waiting.size();
        waiting = waiting.withRoomFor(before + count);
        waiting.append(block, from, count);
        release(newestPs - tolerancePs);
    }

    /** Passes on what is left. */
    void finish() throws IOException {
        release(Long.MAX_VALUE);
    }

    private void release(long untilPs) throws IOException {
        sort();
        long[] times = waiting.longs(Attribute.TIME);
        int size = waiting.size();
        int done = 0;
        while (done < size && times[order[done]] <= untilPs) {
            int end = done;
            while (end < size && end - done < ROOM && times[order[end]] <= untilPs) {
                end++;
            }
            releasedPs = times[order[end - 1]];
            ready.resize(0);
            ready.append(waiting, order, done, end - done);
            next.accept(ready);
            done = end;
        }
        spare.resize(0);
        spare = spare.withRoomFor(size - done);
        spare.append(waiting, order, done, size - done);
        EventBlock emptied = waiting;
        waiting = spare;
        spare = emptied;
    }

    /** Insertion: events nearly are in order already. */
    private void sort() {
        int size = waiting.size();
        if (order.length < size) {
            order = new int[waiting.capacity()];
        }
        long[] times = waiting.longs(Attribute.TIME);
        for (int i = 0; i < size; i++) {
            long time = times[i];
            int at = i;
            while (at > 0 && times[order[at - 1]] > time) {
                order[at] = order[at - 1];
                at--;
            }
            order[at] = i;
        }
    }

    /** Singles that stand too far out of order. */
    static final class DisorderException extends IOException {
        private static final long serialVersionUID = 1L;

        DisorderException(long event, long timePs, long newestPs, long tolerancePs) {
            super("event " + event + ": expected times in order within " + tolerancePs / 1000.0 + " ns, found " + timePs
                    + " ps after " + newestPs + " ps, " + (newestPs - timePs) / 1000.0
                    + " ns back; sort the singles by time, or allow more disorder if the electronics need it");
        }
    }
}
