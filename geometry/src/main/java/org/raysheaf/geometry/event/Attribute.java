package org.raysheaf.geometry.event;

import java.util.Arrays;
import java.util.Optional;

/**
 * Everything that a list can say about an event: name, unit, type, possible values and meaning, declared once. List files have one
 * column per attribute, under {@link #columnName()}. In a coincident pair, a and b are the two photons in no particular order; in
 * a list of singles the same attributes stand without that letter.
 *
 * <p>Attributes of the <em>truth</em> are known to a simulation only. Files keep them in a group of their own, which reconstruction
 * never reads.
 */
public enum Attribute {
    /** Crystal that recorded the photon. */
    ELEMENT(Scope.SINGLES, "element", "1", ColumnType.UINT32, ValueRange.ELEMENT, "crystal that recorded the photon"),
    /** Crystal that recorded photon a. */
    ELEMENT_A(Scope.PAIRS, "element_a", "1", ColumnType.UINT32, ValueRange.ELEMENT, "crystal that recorded photon a"),
    /** Crystal that recorded photon b. */
    ELEMENT_B(Scope.PAIRS, "element_b", "1", ColumnType.UINT32, ValueRange.ELEMENT, "crystal that recorded photon b"),
    /** Time since the start of the acquisition. */
    TIME(
            Scope.BOTH,
            "time_ps",
            "ps",
            ColumnType.INT64,
            ValueRange.NOT_NEGATIVE,
            "time since the start of the acquisition"),
    /** Arrival of b minus arrival of a; positive: nearer to a. */
    TIME_DIFFERENCE(
            Scope.PAIRS,
            "time_difference_ps",
            "ps",
            ColumnType.FLOAT32,
            ValueRange.ANY,
            "arrival of b minus arrival of a; positive: nearer to a"),
    /** Measured energy of the photon. */
    ENERGY(
            Scope.SINGLES,
            "energy_keV",
            "keV",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "measured energy of the photon"),
    /** Measured energy of photon a. */
    ENERGY_A(
            Scope.PAIRS,
            "energy_a_keV",
            "keV",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "measured energy of photon a"),
    /** Measured energy of photon b. */
    ENERGY_B(
            Scope.PAIRS,
            "energy_b_keV",
            "keV",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "measured energy of photon b"),
    /** Measured depth of the photon behind the front face of its block. */
    DEPTH(
            Scope.SINGLES,
            "depth_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "measured depth of the photon behind the front face of its block"),
    /** Measured depth of photon a behind the front face of its block. */
    DEPTH_A(
            Scope.PAIRS,
            "depth_a_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "measured depth of photon a behind the front face of its block"),
    /** Measured depth of photon b behind the front face of its block. */
    DEPTH_B(
            Scope.PAIRS,
            "depth_b_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "measured depth of photon b behind the front face of its block"),
    /** Measured interaction point of the photon, x. */
    POSITION_X(
            Scope.SINGLES,
            "position_x_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.ANY,
            "measured interaction point of the photon, x"),
    /** Measured interaction point of the photon, y. */
    POSITION_Y(
            Scope.SINGLES,
            "position_y_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.ANY,
            "measured interaction point of the photon, y"),
    /** Measured interaction point of the photon, z. */
    POSITION_Z(
            Scope.SINGLES,
            "position_z_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.ANY,
            "measured interaction point of the photon, z"),
    /** Measured interaction point of photon a, x. */
    POSITION_A_X(
            Scope.PAIRS,
            "position_a_x_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.ANY,
            "measured interaction point of photon a, x"),
    /** Measured interaction point of photon a, y. */
    POSITION_A_Y(
            Scope.PAIRS,
            "position_a_y_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.ANY,
            "measured interaction point of photon a, y"),
    /** Measured interaction point of photon a, z. */
    POSITION_A_Z(
            Scope.PAIRS,
            "position_a_z_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.ANY,
            "measured interaction point of photon a, z"),
    /** Measured interaction point of photon b, x. */
    POSITION_B_X(
            Scope.PAIRS,
            "position_b_x_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.ANY,
            "measured interaction point of photon b, x"),
    /** Measured interaction point of photon b, y. */
    POSITION_B_Y(
            Scope.PAIRS,
            "position_b_y_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.ANY,
            "measured interaction point of photon b, y"),
    /** Measured interaction point of photon b, z. */
    POSITION_B_Z(
            Scope.PAIRS,
            "position_b_z_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.ANY,
            "measured interaction point of photon b, z"),
    /** Standard deviation of the interaction point of the photon, along the columns of its block. */
    POSITION_U_SD(
            Scope.SINGLES,
            "position_u_sd_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "standard deviation of the interaction point of the photon, along the columns of its block"),
    /** Standard deviation of the interaction point of the photon, along the rows of its block. */
    POSITION_V_SD(
            Scope.SINGLES,
            "position_v_sd_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "standard deviation of the interaction point of the photon, along the rows of its block"),
    /** Standard deviation of the interaction point of the photon, in the depth of its block. */
    POSITION_W_SD(
            Scope.SINGLES,
            "position_w_sd_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "standard deviation of the interaction point of the photon, in the depth of its block"),
    /** Standard deviation of the interaction point of photon a, along the columns of its block. */
    POSITION_A_U_SD(
            Scope.PAIRS,
            "position_a_u_sd_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "standard deviation of the interaction point of photon a, along the columns of its block"),
    /** Standard deviation of the interaction point of photon a, along the rows of its block. */
    POSITION_A_V_SD(
            Scope.PAIRS,
            "position_a_v_sd_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "standard deviation of the interaction point of photon a, along the rows of its block"),
    /** Standard deviation of the interaction point of photon a, in the depth of its block. */
    POSITION_A_W_SD(
            Scope.PAIRS,
            "position_a_w_sd_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "standard deviation of the interaction point of photon a, in the depth of its block"),
    /** Standard deviation of the interaction point of photon b, along the columns of its block. */
    POSITION_B_U_SD(
            Scope.PAIRS,
            "position_b_u_sd_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "standard deviation of the interaction point of photon b, along the columns of its block"),
    /** Standard deviation of the interaction point of photon b, along the rows of its block. */
    POSITION_B_V_SD(
            Scope.PAIRS,
            "position_b_v_sd_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "standard deviation of the interaction point of photon b, along the rows of its block"),
    /** Standard deviation of the interaction point of photon b, in the depth of its block. */
    POSITION_B_W_SD(
            Scope.PAIRS,
            "position_b_w_sd_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.NOT_NEGATIVE,
            "standard deviation of the interaction point of photon b, in the depth of its block"),
    /** 0: prompt pair, 1: pair from the delayed window. */
    DELAYED(
            Scope.PAIRS,
            "delayed",
            "1",
            ColumnType.UINT8,
            ValueRange.FLAG,
            "0: prompt pair, 1: pair from the delayed window"),
    /** Gate in which the event falls: the phase of a heartbeat or breath, or any other state of the subject, by number. */
    GATE(
            Scope.BOTH,
            "gate",
            "1",
            ColumnType.UINT8,
            ValueRange.COUNT,
            "gate in which the event falls: the phase of a heartbeat or breath, by number"),
    /** Number of the decay that the photon came from. */
    DECAY(
            Scope.TRUTH_OF_SINGLES,
            "decay",
            "1",
            ColumnType.INT64,
            ValueRange.NOT_NEGATIVE,
            "number of the decay that the photon came from; in a pile-up, of the photon that came first"),
    /** 1: both photons came from one decay, 0: random coincidence. */
    SAME_DECAY(
            Scope.TRUTH_OF_PAIRS,
            "same_decay",
            "1",
            ColumnType.UINT8,
            ValueRange.FLAG,
            "1: both photons came from one decay, 0: random coincidence"),
    /** Scatterings outside the detector, of both photons in a pair. */
    OBJECT_SCATTERS(
            Scope.TRUTH_OF_BOTH,
            "object_scatters",
            "1",
            ColumnType.UINT8,
            ValueRange.COUNT,
            "scatterings outside the detector, of both photons in a pair"),
    /** Scatterings in other crystals before the recorded one, of both photons in a pair. */
    DETECTOR_SCATTERS(
            Scope.TRUTH_OF_BOTH,
            "detector_scatters",
            "1",
            ColumnType.UINT8,
            ValueRange.COUNT,
            "scatterings in other crystals before the recorded one, of both photons in a pair"),
    /** 1: emitted outside the field of view (either photon of a pair). */
    OUTSIDE_VIEW(
            Scope.TRUTH_OF_BOTH,
            "outside_view",
            "1",
            ColumnType.UINT8,
            ValueRange.FLAG,
            "1: emitted outside the field of view (either photon of a pair)"),
    /** 1: not an annihilation photon but another gamma ray, or radioactivity of the crystals (either photon of a pair). */
    NOT_ANNIHILATION(
            Scope.TRUTH_OF_BOTH,
            "not_annihilation",
            "1",
            ColumnType.UINT8,
            ValueRange.FLAG,
            "1: not an annihilation photon but another gamma ray, or radioactivity of the crystals (either photon of a pair)"),
    /** Where the photon (photon a of a pair) was emitted, x. */
    EMISSION_X(
            Scope.TRUTH_OF_BOTH,
            "emission_x_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.ANY,
            "where the photon (photon a of a pair) was emitted, x"),
    /** Where the photon (photon a of a pair) was emitted, y. */
    EMISSION_Y(
            Scope.TRUTH_OF_BOTH,
            "emission_y_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.ANY,
            "where the photon (photon a of a pair) was emitted, y"),
    /** Where the photon (photon a of a pair) was emitted, z. */
    EMISSION_Z(
            Scope.TRUTH_OF_BOTH,
            "emission_z_mm",
            "mm",
            ColumnType.FLOAT32,
            ValueRange.ANY,
            "where the photon (photon a of a pair) was emitted, z");

    /** Lists in which an attribute can stand. */
    private enum Scope {
        PAIRS(true, false, false),
        SINGLES(false, true, false),
        BOTH(true, true, false),
        TRUTH_OF_PAIRS(true, false, true),
        TRUTH_OF_SINGLES(false, true, true),
        TRUTH_OF_BOTH(true, true, true);

        private final boolean pairs;
        private final boolean singles;
        private final boolean truth;

        Scope(boolean pairs, boolean singles, boolean truth) {
            this.pairs = pairs;
            this.singles = singles;
            this.truth = truth;
        }
    }

    private final Scope scope;
    private final String columnName;
    private final String unit;
    private final ColumnType type;
    private final ValueRange range;
    private final String meaning;

    Attribute(Scope scope, String columnName, String unit, ColumnType type, ValueRange range, String meaning) {
        this.scope = scope;
        this.columnName = columnName;
        this.unit = unit;
        this.type = type;
        this.range = range;
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
     * Which values can be.
     *
     * @return the range
     */
    public ValueRange range() {
        return range;
    }

    /**
     * What the attribute means.
     *
     * @return one plain sentence
     */
    public String meaning() {
        return meaning;
    }

    /**
     * Whether only a simulation can know it.
     *
     * @return true for an attribute of the truth
     */
    public boolean truth() {
        return scope.truth;
    }

    /**
     * Whether lists of a kind can have it.
     *
     * @param kind the kind of list
     * @return true if they can
     */
    public boolean belongsTo(ListKind kind) {
        return kind == ListKind.PAIRS ? scope.pairs : scope.singles;
    }
}
