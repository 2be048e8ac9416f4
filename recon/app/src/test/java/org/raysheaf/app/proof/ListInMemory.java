package org.raysheaf.app.proof;

import java.util.Objects;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.ListHeader;

/** A list of pairs that never touches a disk. */
final class ListInMemory implements EventSink, EventSource {
    private @Nullable ListHeader header;
    private @Nullable EventBlock events;

    /** Ends the writing. */
    void complete(ListHeader finalHeader) {
        header = finalHeader;
    }

    @Override
    public void accept(EventBlock block) {
        EventBlock before = events == null ? new EventBlock(block.attributes(), 1 << 16) : events;
        EventBlock roomy = before.withRoomFor(before.size() + block.size());
        roomy.append(block, 0, block.size());
        events = roomy;
    }

    private EventBlock all() {
        return Objects.requireNonNull(events, "no event was written");
    }

    @Override
    public ListHeader header() {
        return Objects.requireNonNull(header, "complete the list first");
    }

    @Override
    public Set<Attribute> attributes() {
        return all().attributes();
    }

    @Override
    public long events() {
        return all().size();
    }

    @Override
    public Cursor open() {
        return new Cursor() {
            private int next;

            @Override
            @SuppressWarnings("SuspiciousSystemArraycopy") // columns of one attribute are arrays of one type
            public boolean next(EventBlock block) {
                int count = Math.min(block.capacity(), all().size() - next);
                for (Attribute attribute : block.attributes()) {
                    System.arraycopy(all().column(attribute), next, block.column(attribute), 0, count);
                }
                block.resize(count);
                next += count;
                return count > 0;
            }

            @Override
            public void close() {}
        };
    }
}
