package org.raysheaf.io.list;

import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.ValueRange;

/** What the values of a column can be. The same rules hold for writing and for reading. */
final class EventRules {
    /** Stands for "every value is possible". */
    static final int NONE = -1;

    private EventRules() {}

    /**
     * Looks for a value that cannot be.
     *
     * @param block the events
     * @param attribute the column to look at
     * @param elements number of elements of the detector system, or {@link Integer#MAX_VALUE} if it is not known
     * @return index of the first impossible value in the block, or {@link #NONE}
     */
    static int firstImpossible(EventBlock block, Attribute attribute, int elements) {
        int size = block.size();
        return switch (attribute.type()) {
            case UINT8 -> attribute.range() == ValueRange.FLAG ? firstAbove(block.bytes(attribute), size, 1) : NONE;
            case UINT32 -> firstOutside(block.ints(attribute), size, elements);
            case INT64 -> firstNegative(block.longs(attribute), size);
            case FLOAT32 -> firstOutside(block.floats(attribute), size, lowest(attribute));
        };
    }

    /**
     * The rule in words.
     *
     * @param attribute the column
     * @param elements number of elements of the detector system, or {@link Integer#MAX_VALUE} if it is not known
     * @return what was expected
     */
    static String expected(Attribute attribute, int elements) {
        return switch (attribute.range()) {
            case FLAG -> "0 or 1";
            case COUNT -> "a number from 0 to 255";
            case ELEMENT ->
                elements == Integer.MAX_VALUE
                        ? "an element number from 0 to " + (Integer.MAX_VALUE - 1)
                        : "an element of the system, 0 to " + (elements - 1);
            case NOT_NEGATIVE ->
                attribute == Attribute.TIME ? "a time of at least 0 ps" : "a finite number of at least 0";
            case ANY -> "a finite number";
        };
    }

    /**
     * A value in words.
     *
     * @param block the events
     * @param attribute the column
     * @param index the event
     * @return what was found
     */
    static String found(EventBlock block, Attribute attribute, int index) {
        return switch (attribute.type()) {
            case UINT8 -> Integer.toString(block.bytes(attribute)[index] & 0xff);
            case UINT32 -> Integer.toUnsignedString(block.ints(attribute)[index]);
            case INT64 -> Long.toString(block.longs(attribute)[index]);
            case FLOAT32 -> Float.toString(block.floats(attribute)[index]);
        };
    }

    /** Whether a broken rule of that column means an unknown element. */
    static boolean namesElements(Attribute attribute) {
        return attribute.range() == ValueRange.ELEMENT;
    }

    private static float lowest(Attribute attribute) {
        return attribute.range() == ValueRange.NOT_NEGATIVE ? 0 : -Float.MAX_VALUE;
    }

    private static int firstAbove(byte[] values, int size, int highest) {
        for (int i = 0; i < size; i++) {
            if ((values[i] & 0xff) > highest) {
                return i;
            }
        }
        return NONE;
    }

    private static int firstOutside(int[] values, int size, int elements) {
        for (int i = 0; i < size; i++) {
            if (values[i] < 0 || values[i] >= elements) {
                return i;
            }
        }
        return NONE;
    }

    private static int firstNegative(long[] values, int size) {
        for (int i = 0; i < size; i++) {
            if (values[i] < 0) {
                return i;
            }
        }
        return NONE;
    }

    private static int firstOutside(float[] values, int size, float lowest) {
        for (int i = 0; i < size; i++) {
            if (!(values[i] >= lowest && values[i] <= Float.MAX_VALUE)) { // fails on NaN
                return i;
            }
        }
        return NONE;
    }
}
