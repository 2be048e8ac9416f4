package org.raysheaf.io.records;

import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Problems;

/**
 * The value that fills a column of the list.
 *
 * @param from a formula
 * @param unit the unit of that value: ps, ns, us, ms, s, eV, keV, MeV, um, mm, cm or m; null if it is that of the column
 */
public record Mapping(String from, @Nullable String unit) {
    public Mapping {
        new Problems("attribute")
                .rule(
                        unit == null || Unit.named(unit) != null,
                        "unit",
                        "expected one of " + Unit.symbols() + ", found " + unit)
                .orThrow();
    }
}
