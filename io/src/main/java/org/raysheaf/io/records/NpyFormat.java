package org.raysheaf.io.records;

import java.util.HashSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Problems;

/**
 * NumPy arrays (.npy): a data file is one array, structured or of one or two dimensions, or a folder of arrays, one or several fields in each.
 *
 * @param fields the fields to read; all their arrays are of one length
 */
public record NpyFormat(List<Field> fields) implements RecordFormat {
    /**
     * One field.
     *
     * @param name the name of the value
     * @param array file name of its array in the folder; left out if the data file is the array
     * @param member its member in a structured array; if left out there, the name of the value
     * @param column its column, from 1, in an array of two dimensions
     */
    public record Field(
            String name,
            @Nullable String array,
            @Nullable String member,
            @Nullable Integer column) {}

    public NpyFormat {
        Problems problems = new Problems("npy records")
                .rule(!fields.isEmpty(), "fields", "expected at least one field, found none");
        Set<String> names = new HashSet<>();
        for (int i = 0; i < fields.size(); i++) {
            Field field = fields.get(i);
            FieldNames.require(problems, "fields[" + i + "].name", field.name(), names);
            if (field.column() != null) {
                problems.atLeast("fields[" + i + "].column", field.column(), 1);
            }
        }
        problems.orThrow();
    }
}
