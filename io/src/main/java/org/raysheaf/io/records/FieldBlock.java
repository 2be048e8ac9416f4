package org.raysheaf.io.records;

import java.util.ArrayList;
import java.util.List;

/**
 * A run of records as columns, one per field of the format, and what becomes of each record: 0 while it is wanted, else the number of the reason for
 * which it is set aside. Small enough that all columns stay near the processor. One thread.
 */
final class FieldBlock {
    /** The most records in a block. */
    static final int CAPACITY = 2048;

    private final List<Column> fields = new ArrayList<>();
    private final int[] fates = new int[CAPACITY];
    private int size;
    private long first;

    /** Adds a column for a field. */
    Column add(String name, boolean whole) {
        Column column = Column.of(name, whole);
        fields.add(column);
        return column;
    }

    /** The columns of the format's fields. */
    List<Column> fields() {
        return fields;
    }

    /** What becomes of each record. */
    int[] fates() {
        return fates;
    }

    int size() {
        return size;
    }

    /** Number of the first record of the block in its file, from 0. */
    long first() {
        return first;
    }

    void set(int records, long firstRecord) {
        size = records;
        first = firstRecord;
    }
}
