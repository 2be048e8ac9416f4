package org.raysheaf.io.records;

import java.util.Arrays;
import java.util.stream.Collectors;
import org.jspecify.annotations.Nullable;

/** Units that values may come in, each with the unit of lists and how many of it one makes. Factors are whole numbers or their inverses. */
enum Unit {
    PICOSECOND("ps", "ps", 1, 1),
    NANOSECOND("ns", "ps", 1_000, 1),
    MICROSECOND("us", "ps", 1_000_000, 1),
    MILLISECOND("ms", "ps", 1_000_000_000, 1),
    SECOND("s", "ps", 1_000_000_000_000L, 1),
    ELECTRONVOLT("eV", "keV", 1, 1000),
    KILOELECTRONVOLT("keV", "keV", 1, 1),
    MEGAELECTRONVOLT("MeV", "keV", 1000, 1),
    MICROMETRE("um", "mm", 1, 1000),
    MILLIMETRE("mm", "mm", 1, 1),
    CENTIMETRE("cm", "mm", 10, 1),
    METRE("m", "mm", 1000, 1);

    private final String symbol;
    private final String base;
    private final long times;
    private final long by;

    Unit(String symbol, String base, long times, long by) {
        this.symbol = symbol;
        this.base = base;
        this.times = times;
        this.by = by;
    }

    static @Nullable Unit named(String symbol) {
        return Arrays.stream(values())
                .filter(unit -> unit.symbol.equals(symbol))
                .findFirst()
                .orElse(null);
    }

    static String symbols() {
        return Arrays.stream(values()).map(unit -> unit.symbol).collect(Collectors.joining(", "));
    }

    /** The unit of lists for the same quantity. */
    String base() {
        return base;
    }

    /** Whole factor to the unit of lists. */
    long times() {
        return times;
    }

    /** Whole divisor to the unit of lists. */
    long by() {
        return by;
    }
}
