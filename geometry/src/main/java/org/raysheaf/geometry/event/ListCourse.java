package org.raysheaf.geometry.event;

import java.io.IOException;
import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;

/** Where in time the events of a list lie, as far as cutting it into {@linkplain ListPart parts} needs. */
public final class ListCourse {
    private static final int BLOCK = 1 << 14;
    private static final double PS_PER_S = 1e12;

    private ListCourse() {}

    /**
     * Cuts the list into spans of time with equally many prompt events.
     *
     * @param list a list with times, in the order of time
     * @param eventsEach prompt events in each span, at least 1; the last one takes those left over as well
     * @return where the spans begin, and at the end where the last one ends (s): from 0 to the duration of the list
     * @throws IOException if the list has no times, they are out of order, or it cannot be read
     */
    public static double[] edgesByCount(EventSource list, long eventsEach) throws IOException {
        List<Double> edges = new ArrayList<>(List.of(0.0));
        long[] prompts = {0};
        read(list, Attribute.TIME, (block, row) -> {
            if (block.has(Attribute.DELAYED) && block.bytes(Attribute.DELAYED)[row] != 0) {
                return;
            }
            if (prompts[0] > 0 && prompts[0] % eventsEach == 0) {
                edges.add(block.longs(Attribute.TIME)[row] / PS_PER_S);
            }
            prompts[0]++;
        });
        if (edges.size() > 1 && prompts[0] % eventsEach != 0) {
            edges.remove(edges.size() - 1);
        }
        edges.add(list.header().durationS());
        return edges.stream().mapToDouble(Double::doubleValue).toArray();
    }

    /**
     * How much of the time was spent in each gate, told by the events: of the time between two events each one's gate gets half, what comes
     * before the first and after the last goes to theirs. Good to about the mean time between events at each change of gate.
     *
     * @param list a list with times and gates, in the order of time
     * @return for each gate from 0 to the highest one its share, 0 to 1; all zero if there are no events
     * @throws IOException if the list has no times or gates, times are out of order, or it cannot be read
     */
    public static double[] gateShares(EventSource list) throws IOException {
        double[] ps = new double[256];
        long[] before = {0};
        int[] gateBefore = {-1};
        read(list, Attribute.GATE, (block, row) -> {
            long time = block.longs(Attribute.TIME)[row];
            int gate = block.bytes(Attribute.GATE)[row] & 0xff;
            double half = 0.5 * (time - before[0]);
            ps[gate] += half;
            ps[gateBefore[0] < 0 ? gate : gateBefore[0]] += half;
            before[0] = time;
            gateBefore[0] = gate;
        });
        double durationPs = list.header().durationS() * PS_PER_S;
        if (gateBefore[0] >= 0) {
            ps[gateBefore[0]] += Math.max(0, durationPs - before[0]);
        }
        double all = 0;
        int count = 0;
        for (int gate = 0; gate < ps.length; gate++) {
            all += ps[gate];
            count = ps[gate] > 0 ? gate + 1 : count;
        }
        double[] shares = new double[count];
        for (int gate = 0; gate < count; gate++) {
            shares[gate] = ps[gate] / all;
        }
        return shares;
    }

    private interface Visitor {
        void event(EventBlock block, int row);
    }

    private static void read(EventSource list, Attribute needed, Visitor visitor) throws IOException {
        EnumSet<Attribute> columns = EnumSet.of(Attribute.TIME, needed);
        if (!list.attributes().containsAll(columns)) {
            throw new IOException(
                    "expected a list with " + names(columns) + ", found only " + names(list.attributes()));
        }
        if (list.attributes().contains(Attribute.DELAYED)) {
            columns.add(Attribute.DELAYED);
        }
        EventBlock block = new EventBlock(columns, BLOCK);
        long number = 0;
        long last = Long.MIN_VALUE;
        try (EventSource.Cursor cursor = list.open()) {
            while (cursor.next(block)) {
                long[] times = block.longs(Attribute.TIME);
                for (int row = 0; row < block.size(); row++) {
                    if (times[row] < last) {
                        throw new IOException("expected events in the order of time, found event " + (number + row)
                                + " at " + times[row] + " ps after one at " + last + " ps; sort the list by time_ps");
                    }
                    last = times[row];
                    visitor.event(block, row);
                }
                number += block.size();
            }
        }
    }

    private static String names(Set<Attribute> attributes) {
        return String.join(" ", attributes.stream().map(Attribute::columnName).toList());
    }
}
