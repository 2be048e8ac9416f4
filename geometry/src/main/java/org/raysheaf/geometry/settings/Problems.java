package org.raysheaf.geometry.settings;

import java.math.BigDecimal;
import java.util.ArrayList;
import java.util.List;

/**
 * Collects everything that is wrong with a group of settings, so that a user sees all of it at once. A settings record makes one
 * in its compact constructor, states each rule, and ends with {@link #orThrow()}:
 *
 * <pre>
 * new Problems("crystal block").above("pitch_mm", pitchMm, 0).atLeast("columns", columns, 1).orThrow();
 * </pre>
 *
 * <p>Every rule fails on NaN. Fields are named as in description files. Not safe for use by several threads.
 */
public final class Problems {
    private final String subject;
    private final List<Problem> found = new ArrayList<>();

    /**
     * Starts an empty collection.
     *
     * @param subject what is being checked, in words a user knows, for example {@code "crystal block"}
     */
    public Problems(String subject) {
        this.subject = subject;
    }

    /**
     * One broken rule.
     *
     * @param field the field as spelled in a description file
     * @param message what was expected and what was found
     */
    public record Problem(String field, String message) {
        @Override
        public String toString() {
            return field + ": " + message;
        }
    }

    /**
     * Requires a finite value above a bound.
     *
     * @param field the field's name in files
     * @param value the value found
     * @param bound the value must be greater than this
     * @return this
     */
    public Problems above(String field, double value, double bound) {
        return require(value > bound && Double.isFinite(value), field, "expected a number > " + plain(bound), value);
    }

    /**
     * Requires a finite value that is at least a bound.
     *
     * @param field the field's name in files
     * @param value the value found
     * @param bound the smallest value allowed
     * @return this
     */
    public Problems atLeast(String field, double value, double bound) {
        return require(value >= bound && Double.isFinite(value), field, "expected a number >= " + plain(bound), value);
    }

    /**
     * Requires a value within a closed range.
     *
     * @param field the field's name in files
     * @param value the value found
     * @param low the smallest value allowed
     * @param high the largest value allowed
     * @return this
     */
    public Problems within(String field, double value, double low, double high) {
        return require(
                value >= low && value <= high,
                field,
                "expected a number from " + plain(low) + " to " + plain(high),
                value);
    }

    /**
     * Requires any finite value.
     *
     * @param field the field's name in files
     * @param value the value found
     * @return this
     */
    public Problems finite(String field, double value) {
        return require(Double.isFinite(value), field, "expected a finite number", value);
    }

    /**
     * States any other rule.
     *
     * @param holds whether the rule holds
     * @param field the field's name in files
     * @param message what was expected, what was found, what to do
     * @return this
     */
    public Problems rule(boolean holds, String field, String message) {
        if (!holds) {
            found.add(new Problem(field, message));
        }
        return this;
    }

    /**
     * What has been found so far.
     *
     * @return the broken rules in the order they were stated
     */
    public List<Problem> found() {
        return List.copyOf(found);
    }

    /**
     * Ends the check.
     *
     * @throws InvalidSettingsException if any rule was broken; it carries all of them
     */
    public void orThrow() {
        if (!found.isEmpty()) {
            throw new InvalidSettingsException(subject, found);
        }
    }

    private Problems require(boolean holds, String field, String expected, double value) {
        return rule(holds, field, expected + ", found " + plain(value));
    }

    private static String plain(double value) {
        if (!Double.isFinite(value)) {
            return Double.toString(value);
        }
        return BigDecimal.valueOf(value).stripTrailingZeros().toPlainString();
    }
}
