package org.raysheaf.transport;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import java.util.Set;
import java.util.TreeMap;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;

/** Keeps all events, as rows that compare. */
final class Collected implements EventSink {
    private final List<Map<Attribute, Number>> rows = new ArrayList<>();

    @Override
    public void accept(EventBlock block) {
        Set<Attribute> attributes = block.attributes();
        for (int i = 0; i < block.size(); i++) {
            Map<Attribute, Number> row = new TreeMap<>();
            for (Attribute attribute : attributes) {
                row.put(
                        attribute,
                        switch (attribute.type()) {
                            case UINT8 -> block.bytes(attribute)[i];
                            case UINT32 -> block.ints(attribute)[i];
                            case INT64 -> block.longs(attribute)[i];
                            case FLOAT32 -> block.floats(attribute)[i];
                        });
            }
            rows.add(row);
        }
    }

    Collected first(int count) {
        Collected part = new Collected();
        part.rows.addAll(rows.subList(0, count));
        return part;
    }

    int size() {
        return rows.size();
    }

    private static Number number(Map<Attribute, Number> row, Attribute attribute) {
        return Objects.requireNonNull(row.get(attribute));
    }

    double value(int i, Attribute attribute) {
        return number(rows.get(i), attribute).doubleValue();
    }

    double[] column(Attribute attribute) {
        return rows.stream()
                .mapToDouble(row -> number(row, attribute).doubleValue())
                .toArray();
    }

    int elementA(int i) {
        return (int) value(i, Attribute.ELEMENT_A);
    }

    int elementB(int i) {
        return (int) value(i, Attribute.ELEMENT_B);
    }

    long timePs(int i) {
        return number(rows.get(i), Attribute.TIME).longValue();
    }

    double timeDifferencePs(int i) {
        return value(i, Attribute.TIME_DIFFERENCE);
    }

    @Override
    public boolean equals(Object other) {
        return other instanceof Collected c && rows.equals(c.rows);
    }

    @Override
    public int hashCode() {
        return rows.hashCode();
    }
}
