package org.raysheaf.io.records;

import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.ColumnType;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.ValueRange;

/**
 * Turns the values of records into events: units, types, and the rules of every column of a list. A record with an impossible value is set aside, with
 * the column as its reason. Times may still be negative here if they are to count from the first event. One thread.
 */
final class EventFiller {
    private final List<Target> targets = new ArrayList<>();
    private final Reasons reasons;
    private final int[] kept = new int[FieldBlock.CAPACITY];

    /** A column of the list with the values that fill it. */
    private record Target(Attribute attribute, Column column, double lowest, double highest, int reason) {}

    /**
     * Compiles the formulas of the attributes at the end of a pipeline.
     *
     * @param attributes the attributes of the description
     * @param pipeline the pipeline that makes the values
     * @param elements number of elements of the system
     * @param anyTime whether times may be negative
     * @param reasons numbers the reasons
     * @throws RecordException if a formula cannot be understood
     */
    EventFiller(Map<String, Mapping> attributes, Pipeline pipeline, int elements, boolean anyTime, Reasons reasons)
            throws RecordException {
        this.reasons = reasons;
        for (Map.Entry<String, Mapping> entry : attributes.entrySet()) {
            Attribute attribute = Attribute.named(entry.getKey()).orElseThrow();
            String place = "attributes." + entry.getKey();
            Column value = pipeline.formula(place, entry.getValue().from());
            String symbol = entry.getValue().unit();
            Unit unit = symbol == null ? null : Unit.named(symbol);
            if (unit != null && unit.times() != 1) {
                value = Loops.arithmetic(pipeline, value, Loops.constant(pipeline, unit.times()), '*');
            }
            if (unit != null && unit.by() != 1) {
                value = Loops.arithmetic(
                        pipeline, Loops.real(pipeline, value), Loops.constant(pipeline, (double) unit.by()), '/');
            }
            targets.add(target(attribute, value, elements, anyTime));
        }
    }

    private Target target(Attribute attribute, Column column, int elements, boolean anyTime) {
        double lowest = attribute.range() == ValueRange.ANY || (attribute == Attribute.TIME && anyTime)
                ? Double.NEGATIVE_INFINITY
                : 0;
        double highest = switch (attribute.range()) {
            case FLAG -> 1;
            case COUNT -> 255;
            case ELEMENT -> elements - 1;
            case NOT_NEGATIVE, ANY -> Double.POSITIVE_INFINITY;
        };
        String expected = switch (attribute.range()) {
            case FLAG -> "neither 0 nor 1";
            case COUNT -> "no number from 0 to 255";
            case ELEMENT -> "no element of the system (0 to " + (elements - 1) + ")";
            case NOT_NEGATIVE -> "no number of at least 0";
            case ANY -> "no finite number";
        };
        return new Target(attribute, column, lowest, highest, reasons.number(attribute.columnName() + ": " + expected));
    }

    /** The columns of the list. */
    Set<Attribute> attributes() {
        Set<Attribute> attributes = EnumSet.noneOf(Attribute.class);
        targets.forEach(target -> attributes.add(target.attribute()));
        return attributes;
    }

    /** Fills an event block of at least the same capacity with the records that are wanted and possible; counts the others. */
    void fill(FieldBlock from, EventBlock to) {
        int size = from.size();
        int[] fates = from.fates();
        for (Target target : targets) {
            judge(target, size, fates);
        }
        reasons.count(fates, size);
        int count = 0;
        for (int i = 0; i < size; i++) {
            if (fates[i] == 0) {
                kept[count++] = i;
            }
        }
        for (Target target : targets) {
            copy(target, count, to);
        }
        to.resize(count);
    }

    private static void judge(Target target, int size, int[] fates) {
        Column column = target.column();
        if (column.whole()) {
            long[] values = column.longs();
            for (int i = 0; i < size; i++) {
                if (fates[i] == 0 && !(values[i] >= target.lowest() && values[i] <= target.highest())) {
                    fates[i] = target.reason();
                }
            }
            return;
        }
        double[] values = column.doubles();
        boolean isReal = target.attribute().type() == ColumnType.FLOAT32;
        boolean isTime = target.attribute().type() == ColumnType.INT64;
        for (int i = 0; i < size; i++) {
            double value = isTime ? Math.rint(values[i]) : values[i];
            boolean possible = value >= target.lowest() && value <= target.highest(); // not if it is NaN
            possible &= isReal ? Math.abs((float) value) <= Float.MAX_VALUE : value == Math.rint(value);
            possible &= !isTime || Math.abs(value) < 0x1p63;
            if (!possible && fates[i] == 0) {
                fates[i] = target.reason();
            }
        }
    }

    private void copy(Target target, int count, EventBlock to) {
        long[] longs = target.column().longs();
        double[] doubles = target.column().doubles();
        boolean whole = target.column().whole();
        switch (target.attribute().type()) {
            case UINT8 -> {
                byte[] out = to.bytes(target.attribute());
                for (int i = 0; i < count; i++) {
                    out[i] = (byte) (whole ? longs[kept[i]] : (long) doubles[kept[i]]);
                }
            }
            case UINT32 -> {
                int[] out = to.ints(target.attribute());
                for (int i = 0; i < count; i++) {
                    out[i] = (int) (whole ? longs[kept[i]] : (long) doubles[kept[i]]);
                }
            }
            case INT64 -> {
                long[] out = to.longs(target.attribute());
                for (int i = 0; i < count; i++) {
                    out[i] = whole ? longs[kept[i]] : (long) Math.rint(doubles[kept[i]]);
                }
            }
            case FLOAT32 -> {
                float[] out = to.floats(target.attribute());
                for (int i = 0; i < count; i++) {
                    out[i] = whole ? (float) longs[kept[i]] : (float) doubles[kept[i]];
                }
            }
        }
    }
}
