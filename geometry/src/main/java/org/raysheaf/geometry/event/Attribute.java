package org.raysheaf.geometry.event;

import java.util.Arrays;
import java.util.Optional;

/**
 * Everything that a list can say about an event: name, unit, type and meaning, declared once. List files have one column per
 * attribute, under {@link #columnName()}. In a coincident pair, a and b are the two photons in no particular order.
 */
public enum Attribute {
    /** Crystal that recorded photon a. */
    ELEMENT_A("element_a", "1", ColumnType.UINT32, "crystal that recorded photon a"),
    /** Crystal that recorded photon b. */
    ELEMENT_B("element_b", "1", ColumnType.UINT32, "crystal that recorded photon b"),
    /** Time since the start of the acquisition. */
    TIME("time_ps", "ps", ColumnType.INT64, "time since the start of the acquisition"),
    /** Arrival of b minus arrival of a; positive when the decay was nearer to a. */
    TIME_DIFFERENCE(
            "time_difference_ps", "ps", ColumnType.FLOAT32, "arrival of b minus arrival of a; positive: nearer to a"),
    /** Measured energy of photon a. */
    ENERGY_A("energy_a_keV", "keV", ColumnType.FLOAT32, "measured energy of photon a"),
    /** Measured energy of photon b. */
    ENERGY_B("energy_b_keV", "keV", ColumnType.FLOAT32, "measured energy of photon b"),
    /** 0 for a prompt pair, 1 for a pair from the delayed window. */
    DELAYED("delayed", "1", ColumnType.UINT8, "0: prompt pair, 1: pair from the delayed window");

    private final String columnName;
    private final String unit;
    private final ColumnType type;
    private final String meaning;

    Attribute(String columnName, String unit, ColumnType type, String meaning) {
        this.columnName = columnName;
        this.unit = unit;
        this.type = type;
        this.meaning = meaning;
    }

    /**
     * The attribute stored under a name.
     *
     * @param columnName a column's name
     * @return the attribute, or empty if no attribute has that name
     */
    public static Optional<Attribute> named(String columnName) {
        return Arrays.stream(values())
                .filter(a -> a.columnName.equals(columnName))
                .findFirst();
    }

    /**
     * Name of the column in list files.
     *
     * @return the name, unit included
     */
    public String columnName() {
        return columnName;
    }

    /**
     * Unit of the values.
     *
     * @return the unit's symbol, {@code "1"} for a plain number
     */
    public String unit() {
        return unit;
    }

    /**
     * How values are stored.
     *
     * @return the element type of the column
     */
    public ColumnType type() {
        return type;
    }

    /**
     * What the attribute means.
     *
     * @return one plain sentence
     */
    public String meaning() {
        return meaning;
    }
}
