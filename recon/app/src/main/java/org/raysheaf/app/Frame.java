package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.ListCourse;
import org.raysheaf.geometry.event.ListPart;

/**
 * A part of a list that gets an image of its own.
 *
 * @param name for files and results, for example {@code frame-03} or {@code gate-0}
 * @param where what it covers, as result.json says it
 * @param part its events
 */
record Frame(String name, Map<String, Object> where, ListPart part) {
    /** Cuts a list. */
    static List<Frame> of(@Nullable FrameSettings settings, EventSource list, Path path) throws IOException {
        if (settings == null) {
            return List.of();
        }
        try {
            List<Double> edges = settings.edgesS();
            Long events = settings.events();
            if (edges != null) {
                return spans(
                        list, edges.stream().mapToDouble(Double::doubleValue).toArray());
            }
            if (events != null) {
                return spans(list, ListCourse.edgesByCount(list, events));
            }
            return gates(list);
        } catch (IOException e) {
            throw new IOException(path + ": frames cannot be made: " + e.getMessage(), e);
        }
    }

    private static List<Frame> spans(EventSource list, double[] edges) throws IOException {
        if (!list.attributes().contains(Attribute.TIME)) {
            throw new IOException("the list has no column " + Attribute.TIME.columnName());
        }
        double durationS = list.header().durationS();
        double last = edges[edges.length - 1];
        if (last > durationS * (1 + 1e-9)) {
            throw new IOException("frames end at " + last + " s, but the list lasts " + durationS + " s");
        }
        List<Frame> frames = new ArrayList<>();
        for (int i = 0; i + 1 < edges.length; i++) {
            Map<String, Object> where = new LinkedHashMap<>();
            where.put("from_s", edges[i]);
            where.put("to_s", edges[i + 1]);
            frames.add(new Frame(
                    String.format(Locale.ROOT, "frame-%02d", i + 1),
                    where,
                    ListPart.between(list, edges[i], edges[i + 1])));
        }
        return frames;
    }

    private static List<Frame> gates(EventSource list) throws IOException {
        double[] shares = ListCourse.gateShares(list);
        List<Frame> frames = new ArrayList<>();
        for (int gate = 0; gate < shares.length; gate++) {
            if (shares[gate] > 0) {
                Map<String, Object> where = new LinkedHashMap<>();
                where.put("gate", gate);
                where.put("share_of_time", shares[gate]);
                frames.add(new Frame("gate-" + gate, where, ListPart.ofGate(list, gate, shares[gate])));
            }
        }
        return frames;
    }
}
