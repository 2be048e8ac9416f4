package org.raysheaf.engine.ray;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.time.Instant;
import java.util.HashSet;
import java.util.Set;
import java.util.concurrent.ForkJoinPool;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafMaker;

final class EventLoaderTest {
    private static final ForkJoinPool POOL = new ForkJoinPool(1);

    @AfterAll
    static void stop() {
        POOL.shutdown();
    }

    @Test
    void readsWhatTheMakerNeedsAndOfTheRestWhatTheListHas() throws Exception {
        AxisMaker maker = new AxisMaker();
        EventStore store = load(Set.of(Attribute.ELEMENT_A, Attribute.TIME, Attribute.DELAYED), maker);
        assertThat(store.events()).isEqualTo(3);
        assertThat(maker.seen).containsExactlyInAnyOrder(Attribute.ELEMENT_A, Attribute.DELAYED);
    }

    @Test
    void saysWhichColumnsAreMissing() {
        assertThatThrownBy(() -> load(Set.of(Attribute.DELAYED, Attribute.TIME), new AxisMaker()))
                .isInstanceOf(IOException.class)
                .hasMessage("the list lacks columns that its events need: expected element_a, found time_ps delayed;"
                        + " write the missing ones into the list");
    }

    private static EventStore load(Set<Attribute> columns, SheafMaker maker) throws IOException {
        Image support = Image.filled(Grid.centred(4, 4, 4, 1), 1);
        return EventLoader.load(
                new ThreeEvents(columns),
                maker,
                support,
                EventSelection.ALL,
                1,
                EventBackground.NONE,
                POOL,
                Progress.SILENT);
    }

    /** Three events, with any columns. */
    private record ThreeEvents(Set<Attribute> attributes) implements EventSource {
        @Override
        public ListHeader header() {
            return new ListHeader("", 1, 1, Instant.EPOCH, null);
        }

        @Override
        public long events() {
            return 3;
        }

        @Override
        public Cursor open() {
            return new Cursor() {
                private boolean done;

                @Override
                public boolean next(EventBlock block) {
                    block.resize(done ? 0 : 3);
                    boolean more = !done;
                    done = true;
                    return more;
                }

                @Override
                public void close() {}
            };
        }
    }

    /** Every event lies on the z axis; remembers which columns it was given. */
    private static final class AxisMaker implements SheafMaker {
        private final Set<Attribute> seen = new HashSet<>();

        @Override
        public Set<Attribute> attributes() {
            return Set.of(Attribute.ELEMENT_A);
        }

        @Override
        public Set<Attribute> alsoReads() {
            return Set.of(Attribute.DELAYED, Attribute.ENERGY_A);
        }

        @Override
        public int raysPerSheaf() {
            return 1;
        }

        @Override
        public void make(EventBlock events, SheafBundle out, EventTally tally) {
            seen.addAll(events.attributes());
            for (int i = 0; i < events.size(); i++) {
                out.set(out.append(), 0, 0, -9, 0, 0, 9, 1);
                tally.use();
            }
        }
    }
}
