package org.raysheaf.app.proof;

import java.util.Arrays;
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
    private int[] a = new int[1024];
    private int[] b = new int[1024];
    private int size;

    /** Ends the writing. */
    void complete(ListHeader finalHeader) {
        header = finalHeader;
    }

    @Override
    public void accept(EventBlock block) {
        if (size + block.size() > a.length) {
            int room = Math.max(2 * a.length, size + block.size());
            a = Arrays.copyOf(a, room);
            b = Arrays.copyOf(b, room);
        }
        System.arraycopy(block.ints(Attribute.ELEMENT_A), 0, a, size, block.size());
        System.arraycopy(block.ints(Attribute.ELEMENT_B), 0, b, size, block.size());
        size += block.size();
    }

    @Override
    public ListHeader header() {
        return Objects.requireNonNull(header, "complete the list first");
    }

    @Override
    public Set<Attribute> attributes() {
        return Set.of(Attribute.ELEMENT_A, Attribute.ELEMENT_B);
    }

    @Override
    public long events() {
        return size;
    }

    @Override
    public Cursor open() {
        return new Cursor() {
            private int next;

            @Override
            public boolean next(EventBlock block) {
                int count = Math.min(block.capacity(), size - next);
                System.arraycopy(a, next, block.ints(Attribute.ELEMENT_A), 0, count);
                System.arraycopy(b, next, block.ints(Attribute.ELEMENT_B), 0, count);
                block.resize(count);
                next += count;
                return count > 0;
            }

            @Override
            public void close() {}
        };
    }
}
