package org.raysheaf.io.records;

import java.io.IOException;
import java.util.Set;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;

/** The last stage before the list: counts, lets times begin at the first event if that is wanted, and remembers the last time. One thread. */
final class Outlet implements EventSink {
    private final EventSink sink;
    private final boolean timed;
    private final boolean fromFirst;
    private final Reasons reasons;
    private final int tooEarly;
    private final EventBlock rest;
    private final int[] kept = new int[FieldBlock.CAPACITY];
    private boolean begun;
    private long zeroPs;
    private long lastPs;
    private long events;

    Outlet(Set<Attribute> attributes, boolean fromFirst, Reasons reasons, EventSink sink) {
        this.sink = sink;
        this.timed = attributes.contains(Attribute.TIME);
        this.fromFirst = timed && fromFirst;
        this.reasons = reasons;
        this.tooEarly = reasons.number("time_ps: before the first event");
        this.rest = new EventBlock(attributes, FieldBlock.CAPACITY);
    }

    @Override
    public void accept(EventBlock block) throws IOException {
        if (block.size() == 0) {
            return;
        }
        EventBlock given = fromFirst ? shifted(block) : block;
        if (timed) {
            long[] times = given.longs(Attribute.TIME);
            for (int i = 0; i < given.size(); i++) {
                lastPs = Math.max(lastPs, times[i]);
            }
        }
        events += given.size();
        if (given.size() > 0) {
            sink.accept(given);
        }
    }

    private EventBlock shifted(EventBlock block) {
        long[] times = block.longs(Attribute.TIME);
        if (!begun) {
            begun = true;
            zeroPs = times[0];
        }
        int count = 0;
        for (int i = 0; i < block.size(); i++) {
            times[i] -= zeroPs;
            if (times[i] < 0) {
                reasons.count(tooEarly);
            } else {
                kept[count++] = i;
            }
        }
        if (count == block.size()) {
            return block;
        }
        EventRows.gather(block, kept, 0, count, rest);
        return rest;
    }

    long events() {
        return events;
    }

    /** Latest time of all events (ps). */
    long lastPs() {
        return lastPs;
    }
}
