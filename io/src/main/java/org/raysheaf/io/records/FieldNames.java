package org.raysheaf.io.records;

import java.util.Set;
import java.util.regex.Pattern;
import org.raysheaf.geometry.settings.Problems;

/** What values may be called, so that formulas can name them. */
final class FieldNames {
    private static final Pattern NAME = Pattern.compile("[A-Za-z_][A-Za-z0-9_]*");
    private static final Set<String> TAKEN = Set.of("file", "record", "and", "or", "not");

    private FieldNames() {}

    static void require(Problems problems, String field, String name, Set<String> seen) {
        problems.rule(
                NAME.matcher(name).matches() && !TAKEN.contains(name),
                field,
                "expected a name of letters, digits and _ (not file, record, and, or, not), found " + name);
        problems.rule(seen.add(name), field, "expected another name, found " + name + " a second time");
    }
}
