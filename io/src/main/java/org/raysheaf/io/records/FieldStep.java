package org.raysheaf.io.records;

import java.util.List;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/** One way to make a further value of a record. All settings that take a value are formulas ({@link Formula}). */
public sealed interface FieldStep {
    /**
     * Arithmetic on values.
     *
     * @param is the formula, for example {@code "(a + b) / (a + b + c + d)"}
     */
    record FormulaStep(String is) implements FieldStep {}

    /**
     * A look-up in a table, for example from channel to element. The file is text, columns separated by commas, semicolons, tabs or blanks, the first line
     * names them, and the first column is the key.
     *
     * @param file the table
     * @param key the value that is looked up, a whole number; a record whose key is not there is set aside
     * @param column the column that gives the result
     */
    record TableStep(String file, String key, String column) implements FieldStep {}

    /**
     * Energy by a calibration per channel: {@code offset_keV + gain_keV · x + quadratic_keV · x²} (keV), from these columns of a table as in {@link
     * TableStep}; the first and the last may be missing and are then 0.
     *
     * @param file the table
     * @param key the channel
     * @param of the amplitude x
     */
    record EnergyStep(String file, String key, String of) implements FieldStep {}

    /**
     * A look-up in a two-dimensional map, for example from a light-sharing position to a crystal. The map is a {@code .npy} array of whole numbers with
     * axes (y, x) or (page, y, x), or a text of rows of numbers. Rows run upwards in y from {@code y_from}, columns in x from {@code x_from}.
     * A negative number, and a position outside the map, mean "no crystal": the record is set aside.
     *
     * @param file the map
     * @param x position along the last axis
     * @param y position along the axis before it
     * @param page which map of three-dimensional ones, for example the block; or null
     * @param xFrom position of the lower edge of the first column
     * @param xTo position of the upper edge of the last column
     * @param yFrom position of the lower edge of the first row
     * @param yTo position of the upper edge of the last row
     */
    record MapStep(
            String file,
            String x,
            String y,
            @Nullable String page,
            @Default("0") double xFrom,
            @Default("1") double xTo,
            @Default("0") double yFrom,
            @Default("1") double yTo)
            implements FieldStep {
        public MapStep {
            new Problems("map")
                    .finite("x_from", xFrom)
                    .above("x_to", xTo, xFrom)
                    .finite("y_from", yFrom)
                    .above("y_to", yTo, yFrom)
                    .orThrow();
        }
    }

    /**
     * Time (ps) from a counter of ticks that may wrap around. Of two counts, the later one is taken to be the nearest possible to the one before: so a
     * counter must be seen at least once in half of its range, and small steps back are not mistaken for a wrap-around. For a stream that marks every
     * overflow itself, use a formula with the number of these marks instead.
     *
     * @param of the counter, a whole number
     * @param tickPs length of a tick (ps)
     * @param bits the counter wraps around after 2^bits ticks, or null if it never does
     * @param per what has a counter of its own, for example the board, a whole number from 0 to 65535; or null
     */
    record ClockStep(
            String of,
            double tickPs,
            @Nullable Integer bits,
            @Nullable String per) implements FieldStep {
        public ClockStep {
            Problems problems = new Problems("clock").above("tick_ps", tickPs, 0);
            if (bits != null) {
                problems.within("bits", bits, 2, 62);
            }
            problems.orThrow();
        }
    }

    /**
     * The element of the system nearest to a position that a table gives for the channel: columns {@code x_mm}, {@code y_mm}, {@code z_mm} beside the
     * key, as in {@link TableStep}. This brings the numbering of a lab into that of the system.
     *
     * @param file the table of positions
     * @param key the channel
     * @param withinMm a position farther than this from every element's centre is an error of the table (mm)
     */
    record NearestElementStep(
            String file, String key, @Default("1") double withinMm) implements FieldStep {
        public NearestElementStep {
            new Problems("nearest element").above("within_mm", withinMm, 0).orThrow();
        }
    }

    /**
     * The element of the system in which a point lies, for detectors that measure points. A point in none sets the record aside.
     *
     * @param xMm the point (mm), in the frame of the system
     * @param yMm likewise
     * @param zMm likewise
     */
    record ElementAtStep(String xMm, String yMm, String zMm) implements FieldStep {}

    /** The settings of this step that are formulas, for messages and to find what it depends on. */
    default List<String> inputs() {
        if (this instanceof FormulaStep s) {
            return List.of(s.is());
        }
        if (this instanceof TableStep s) {
            return List.of(s.key());
        }
        if (this instanceof EnergyStep s) {
            return List.of(s.key(), s.of());
        }
        if (this instanceof MapStep s) {
            return s.page() == null ? List.of(s.x(), s.y()) : List.of(s.x(), s.y(), s.page());
        }
        if (this instanceof ClockStep s) {
            return s.per() == null ? List.of(s.of()) : List.of(s.of(), s.per());
        }
        if (this instanceof ElementAtStep s) {
            return List.of(s.xMm(), s.yMm(), s.zMm());
        }
        return List.of(((NearestElementStep) this).key());
    }
}
