package org.raysheaf.geometry.event;

import java.io.IOException;
import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.matter.Nuclide;

/**
 * A part of a list, as a list of its own: what was recorded in a span of time (a frame), or in one gate. Its header says how long the
 * part lasted, so that all that holds for lists holds for it; activities then refer to the beginning of the part, and {@link #toListStart}
 * takes them to that of the list. Reads the whole list each time. As safe for use by several threads as the list is.
 */
public final class ListPart implements EventSource {
    private static final double PS_PER_S = 1e12;

    private final EventSource whole;
    private final ListHeader header;
    private final double fromS;
    private final double toS;
    private final double toListStart;
    private final Choice choice;

    /** Which events belong to the part. */
    private interface Choice {
        /** What it looks at. */
        Attribute attribute();

        boolean takes(EventBlock block, int row);
    }

    private ListPart(
            EventSource whole, ListHeader header, double fromS, double toS, double toListStart, Choice choice) {
        this.whole = whole;
        this.header = header;
        this.fromS = fromS;
        this.toS = toS;
        this.toListStart = toListStart;
        this.choice = choice;
    }

    /**
     * What was recorded in a span of time. The live fraction is taken to be that of the whole list.
     *
     * @param whole the list, with times
     * @param fromS begin, since the start of the list (s)
     * @param toS end (s), after the begin, at most the duration of the list
     * @return events whose time is at least the begin and below the end
     */
    public static ListPart between(EventSource whole, double fromS, double toS) {
        ListHeader all = whole.header();
        Nuclide nuclide = all.nuclide();
        double lengthS = toS - fromS;
        // Activity at the begin of the part, of that at the start of the list.
        double left = nuclide == null ? 1 : Math.exp(-Math.log(2) / nuclide.halfLifeS() * fromS);
        double countShare = nuclide == null
                ? lengthS / all.durationS()
                : left * nuclide.effectiveTimeS(lengthS) / nuclide.effectiveTimeS(all.durationS());
        ListHeader header = new ListHeader(
                all.systemDescription(),
                lengthS,
                lengthS * Math.min(1, all.liveTimeS() / all.durationS()),
                all.start().plusNanos(Math.round(1e9 * fromS)),
                nuclide,
                scaled(all.pairing(), countShare));
        long fromPs = Math.round(fromS * PS_PER_S);
        long toPs = Math.round(toS * PS_PER_S);
        return new ListPart(whole, header, fromS, toS, 1 / left, new Choice() {
            @Override
            public Attribute attribute() {
                return Attribute.TIME;
            }

            @Override
            public boolean takes(EventBlock block, int row) {
                long time = block.longs(Attribute.TIME)[row];
                return time >= fromPs && time < toPs;
            }
        });
    }

    /**
     * What was recorded in one gate. Gates are taken to follow each other so quickly that decay is the same in all.
     *
     * @param whole the list, with gates
     * @param gate number of the gate
     * @param share part of the list's duration that was spent in the gate, above 0, at most 1
     * @return its events
     */
    public static ListPart ofGate(EventSource whole, int gate, double share) {
        ListHeader all = whole.header();
        ListHeader header = new ListHeader(
                all.systemDescription(),
                share * all.durationS(),
                share * all.liveTimeS(),
                all.start(),
                all.nuclide(),
                scaled(all.pairing(), share));
        // The header speaks of a scan of that length from the start; the gate has its share of the whole.
        double toListStart = header.pairsPerBecquerel() / (share * all.pairsPerBecquerel());
        return new ListPart(whole, header, 0, all.durationS(), toListStart, new Choice() {
            @Override
            public Attribute attribute() {
                return Attribute.GATE;
            }

            @Override
            public boolean takes(EventBlock block, int row) {
                return (block.bytes(Attribute.GATE)[row] & 0xff) == gate;
            }
        });
    }

    private static @Nullable PairingRecord scaled(@Nullable PairingRecord record, double share) {
        if (record == null) {
            return null;
        }
        PairingTally t = record.tally();
        PairingTally tally = new PairingTally(
                part(t.outsideEnergies(), share),
                part(t.alone(), share),
                part(t.crowded(), share),
                part(t.tooClose(), share),
                part(t.paired(), share),
                part(t.prompts(), share),
                part(t.delayed(), share));
        List<Long> singles = new ArrayList<>();
        for (long count : record.singles()) {
            singles.add(part(count, share));
        }
        return new PairingRecord(record.settings(), tally, singles);
    }

    private static long part(long count, double share) {
        return Math.round(count * share);
    }

    /**
     * When the part begins, in the times of its events.
     *
     * @return since the start of the whole list (s)
     */
    public double fromS() {
        return fromS;
    }

    /**
     * When the part ends, in the times of its events.
     *
     * @return since the start of the whole list (s)
     */
    public double toS() {
        return toS;
    }

    /**
     * What an activity estimated from this part must be multiplied with to refer to the start of the whole list.
     *
     * @return the factor, above 0
     */
    public double toListStart() {
        return toListStart;
    }

    @Override
    public ListHeader header() {
        return header;
    }

    @Override
    public Set<Attribute> attributes() {
        return whole.attributes();
    }

    /** An upper bound: the events of the whole list. */
    @Override
    public long events() {
        return whole.events();
    }

    @Override
    public Cursor open() throws IOException {
        Cursor all = whole.open();
        return new Cursor() {
            private @Nullable EventBlock read;
            private int[] rows = {};

            @Override
            public boolean next(EventBlock block) throws IOException {
                block.resize(0);
                EventBlock from = room(block);
                while (block.size() == 0) {
                    if (!all.next(from)) {
                        return false;
                    }
                    int count = 0;
                    for (int row = 0; row < from.size(); row++) {
                        if (choice.takes(from, row)) {
                            rows[count++] = row;
                        }
                    }
                    block.append(from, rows, 0, count);
                }
                return true;
            }

            private EventBlock room(EventBlock block) {
                EventBlock found = read;
                if (found == null || found.capacity() != block.capacity()) {
                    EnumSet<Attribute> columns = EnumSet.of(choice.attribute());
                    columns.addAll(block.attributes());
                    found = new EventBlock(columns, block.capacity());
                    rows = new int[block.capacity()];
                    read = found;
                }
                return found;
            }

            @Override
            public void close() throws IOException {
                all.close();
            }
        };
    }
}
