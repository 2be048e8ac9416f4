package org.raysheaf.transport;

import java.util.ArrayList;
import java.util.List;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;

/** Keeps all events, as rows that compare. */
final class Collected implements EventSink {
    private record Row(int a, int b, long timePs, float differencePs, float energyA, float energyB) {}

    private final List<Row> rows = new ArrayList<>();

    @Override
    public void accept(EventBlock block) {
        boolean energies = block.has(Attribute.ENERGY_A);
        for (int i = 0; i < block.size(); i++) {
            rows.add(new Row(
                    block.ints(Attribute.ELEMENT_A)[i],
                    block.ints(Attribute.ELEMENT_B)[i],
                    block.longs(Attribute.TIME)[i],
                    block.floats(Attribute.TIME_DIFFERENCE)[i],
                    energies ? block.floats(Attribute.ENERGY_A)[i] : 0,
                    energies ? block.floats(Attribute.ENERGY_B)[i] : 0));
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

    int elementA(int i) {
        return rows.get(i).a;
    }

    int elementB(int i) {
        return rows.get(i).b;
    }

    long timePs(int i) {
        return rows.get(i).timePs;
    }

    double timeDifferencePs(int i) {
        return rows.get(i).differencePs;
    }

    List<Float> energies() {
        List<Float> energies = new ArrayList<>();
        rows.forEach(row -> {
            energies.add(row.energyA);
            energies.add(row.energyB);
        });
        return energies;
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
