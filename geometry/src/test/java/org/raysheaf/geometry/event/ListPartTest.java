package org.raysheaf.geometry.event;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.time.Instant;
import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.matter.Nuclide;

final class ListPartTest {
    private static final Nuclide SHORT = new Nuclide("X", 20, 0.5);
    private static final long S = 1_000_000_000_000L;

    /** Events that are told one by one: time (s), gate, delayed. */
    private record Told(ListHeader header, double[][] rows) implements EventSource {
        static Told of(double durationS, @Nullable Nuclide nuclide, double[]... rows) {
            return new Told(new ListHeader("", durationS, 0.8 * durationS, Instant.EPOCH, nuclide), rows);
        }

        @Override
        public Set<Attribute> attributes() {
            return EnumSet.of(Attribute.ELEMENT_A, Attribute.TIME, Attribute.GATE, Attribute.DELAYED);
        }

        @Override
        public long events() {
            return rows.length;
        }

        @Override
        public Cursor open() {
            return new Cursor() {
                private int next;

                @Override
                public boolean next(EventBlock block) {
                    int n = Math.min(2, rows.length - next); // small blocks, so that some hold nothing of a part
                    for (int i = 0; i < n; i++, next++) {
                        if (block.has(Attribute.ELEMENT_A)) {
                            block.ints(Attribute.ELEMENT_A)[i] = next;
                        }
                        block.longs(Attribute.TIME)[i] = (long) (rows[next][0] * S);
                        if (block.has(Attribute.GATE)) {
                            block.bytes(Attribute.GATE)[i] = (byte) rows[next][1];
                        }
                        if (block.has(Attribute.DELAYED)) {
                            block.bytes(Attribute.DELAYED)[i] = (byte) rows[next][2];
                        }
                    }
                    block.resize(n);
                    return n > 0;
                }

                @Override
                public void close() {}
            };
        }
    }

    private static final Told LIST = Told.of(
            60,
            SHORT,
            new double[] {1, 0, 0},
            new double[] {2, 1, 0},
            new double[] {3, 1, 1},
            new double[] {3.5, 200, 0},
            new double[] {30, 200, 0},
            new double[] {31, 0, 0},
            new double[] {59.5, 0, 0});

    private static List<Integer> read(EventSource part) throws IOException {
        List<Integer> found = new ArrayList<>();
        EventBlock block = new EventBlock(EnumSet.of(Attribute.ELEMENT_A, Attribute.TIME), 3);
        try (EventSource.Cursor cursor = part.open()) {
            while (cursor.next(block)) {
                for (int i = 0; i < block.size(); i++) {
                    found.add(block.ints(Attribute.ELEMENT_A)[i]);
                }
            }
        }
        return found;
    }

    @Test
    void spansOfTimeTakeEveryEventOnce() throws Exception {
        assertThat(read(ListPart.between(LIST, 0, 3))).containsExactly(0, 1);
        assertThat(read(ListPart.between(LIST, 3, 31))).containsExactly(2, 3, 4);
        assertThat(read(ListPart.between(LIST, 31, 60))).containsExactly(5, 6);
        assertThat(read(ListPart.between(LIST, 40, 50))).isEmpty();
    }

    /** What the parts see of each becquerel at the start of the list adds up to what the whole list sees. */
    @Test
    void exposuresAddUp() {
        double sum = 0;
        double[] edges = {0, 7, 20, 60};
        for (int i = 0; i < 3; i++) {
            ListPart part = ListPart.between(LIST, edges[i], edges[i + 1]);
            sum += part.header().pairsPerBecquerel() / part.toListStart();
            assertThat(part.header().start()).isEqualTo(Instant.EPOCH.plusSeconds((long) edges[i]));
        }
        assertThat(sum).isCloseTo(LIST.header().pairsPerBecquerel(), within(1e-9));
        ListPart late = ListPart.between(LIST, 20, 60);
        assertThat(late.toListStart()).isCloseTo(2, within(1e-12)); // one half-life has passed
        ListPart gate = ListPart.ofGate(LIST, 1, 0.25);
        assertThat(gate.header().pairsPerBecquerel() / gate.toListStart())
                .isCloseTo(0.25 * LIST.header().pairsPerBecquerel(), within(1e-12));
    }

    @Test
    void gatesTakeTheirOwnAndTheTimeBetweenEventsIsShared() throws Exception {
        assertThat(read(ListPart.ofGate(LIST, 200, 0.5))).containsExactly(3, 4);
        double[] shares = ListCourse.gateShares(LIST);
        assertThat(shares).hasSize(201);
        // 0: 1 + 0.5 | 0.5 + 28.5 + 0.5; 1: 0.5 + 1 + 0.25; 200: 0.25 + 26.5 + 0.5
        assertThat(shares[0]).isCloseTo(31.0 / 60, within(1e-12));
        assertThat(shares[1]).isCloseTo(1.75 / 60, within(1e-12));
        assertThat(shares[200]).isCloseTo(27.25 / 60, within(1e-12));
    }

    @Test
    void equalCountsAreThoseOfPrompts() throws Exception {
        assertThat(ListCourse.edgesByCount(LIST, 2)).containsExactly(0, 3.5, 31, 60);
        assertThat(ListCourse.edgesByCount(LIST, 4)).containsExactly(0, 60);
        assertThat(ListCourse.edgesByCount(LIST, 3)).containsExactly(0, 30, 60);
        assertThat(ListCourse.edgesByCount(LIST, 100)).containsExactly(0, 60);
    }

    @Test
    void refusesTimesOutOfOrder() {
        Told list = Told.of(10, null, new double[] {2, 0, 0}, new double[] {1, 0, 0});
        assertThatThrownBy(() -> ListCourse.gateShares(list))
                .hasMessage("expected events in the order of time, found event 1 at 1000000000000 ps after one at"
                        + " 2000000000000 ps; sort the list by time_ps");
    }
}
