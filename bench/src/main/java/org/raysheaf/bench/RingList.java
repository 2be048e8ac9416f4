package org.raysheaf.bench;

import java.time.Instant;
import java.util.EnumSet;
import java.util.Set;
import java.util.SplittableRandom;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafMaker;

/** A list of any length that takes no memory and no disk: the lines of {@link RingLines}, each drawn from its own number when it is asked for. */
final class RingList implements EventSource, SheafMaker {
    private final RingLines ring;
    private final int events;

    RingList(RingLines ring, int events) {
        this.ring = ring;
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
        return events;
    }

    @Override
    public int raysPerSheaf() {
        return 1;
    }

    @Override
    public void make(EventBlock block, SheafBundle out, EventTally tally) {
        int[] numbers = block.ints(Attribute.ELEMENT_A);
        float[] line = new float[6];
        for (int i = 0; i < block.size(); i++) {
            ring.line(new SplittableRandom(numbers[i]), line);
            out.set(out.append(), line[0], line[1], line[2], line[3], line[4], line[5], 1);
            tally.use();
        }
    }

    @Override
    public Cursor open() {
        return new Cursor() {
            private int next;

            @Override
            public boolean next(EventBlock block) {
                int size = Math.min(block.capacity(), events - next);
                int[] numbers = block.ints(Attribute.ELEMENT_A);
                for (int i = 0; i < size; i++) {
                    numbers[i] = next++;
                }
                block.resize(size);
                return size > 0;
            }

            @Override
            public void close() {}
        };
    }
}
