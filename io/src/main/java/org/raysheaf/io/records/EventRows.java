package org.raysheaf.io.records;

import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;

/** Moves events between blocks of the same columns. */
final class EventRows {
    private EventRows() {}

    /** Appends a run of events. */
    @SuppressWarnings("SuspiciousSystemArraycopy") // both are columns of one attribute, so arrays of one type
    static void append(EventBlock from, int first, int count, EventBlock to) {
        int at = to.size();
        to.resize(at + count);
        for (Attribute attribute : to.attributes()) {
            System.arraycopy(from.column(attribute), first, to.column(attribute), at, count);
        }
    }

    /** Fills a block with chosen events of another. */
    static void gather(EventBlock from, int[] chosen, int first, int count, EventBlock to) {
        to.resize(count);
        for (Attribute attribute : to.attributes()) {
            switch (attribute.type()) {
                case UINT8 -> {
                    byte[] a = from.bytes(attribute);
                    byte[] b = to.bytes(attribute);
                    for (int i = 0; i < count; i++) {
                        b[i] = a[chosen[first + i]];
                    }
                }
                case UINT32 -> {
                    int[] a = from.ints(attribute);
                    int[] b = to.ints(attribute);
                    for (int i = 0; i < count; i++) {
                        b[i] = a[chosen[first + i]];
                    }
                }
                case INT64 -> {
                    long[] a = from.longs(attribute);
                    long[] b = to.longs(attribute);
                    for (int i = 0; i < count; i++) {
                        b[i] = a[chosen[first + i]];
                    }
                }
                case FLOAT32 -> {
                    float[] a = from.floats(attribute);
                    float[] b = to.floats(attribute);
                    for (int i = 0; i < count; i++) {
                        b[i] = a[chosen[first + i]];
                    }
                }
            }
        }
    }
}
