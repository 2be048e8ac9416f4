package org.raysheaf.io.records;

import java.util.List;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * Records to set aside: where a formula is not 0, or where a value is one of a list or of the first column of a table (a mask of bad channels). Rules
 * apply as soon as the values that they name are there, so a marker for "no value" is seen before anything is computed from it.
 *
 * @param reason why, in a few words; the report counts by it
 * @param when a formula, or null
 * @param value a formula whose value is looked for, or null
 * @param in the values to set aside
 * @param file a table whose first column holds more values to set aside, or null
 */
public record Exclusion(
        String reason,
        @Nullable String when,
        @Nullable String value,
        @Default("[]") List<Long> in,
        @Nullable String file) {
    public Exclusion {
        new Problems("set aside")
                .rule(
                        (when == null) != (value == null),
                        "when",
                        "expected either when or value, found " + (when == null ? "neither" : "both"))
                .rule(
                        value == null || !in.isEmpty() || file != null,
                        "in",
                        "expected values to look for, here or in a file, found none")
                .orThrow();
    }
}
