package org.raysheaf.io.records;

import java.util.HashSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Problems;

/**
 * HDF5 files of other writers: one dataset per field, or a dataset of compound values, or a table of several columns. Chunked and compressed data are
 * read (deflate, shuffle, lzf, fletcher32). Datasets of one row count as columns, since some writers turn them. Tables of two dimensions in chunks are read into
 * memory whole and must be smaller than 2 GiB; all else streams.
 *
 * @param dataset path of the dataset that holds all fields that name none, or null
 * @param fields the fields to read; all their datasets are of one length
 */
public record Hdf5Format(@Nullable String dataset, List<Field> fields) implements RecordFormat {
    /**
     * One field.
     *
     * @param name the name of the value
     * @param dataset path of its dataset, groups joined by slashes, or null for that of the format
     * @param member its member in a dataset of compound values; if left out there, the name of the value
     * @param column its column, from 1, in a dataset of two dimensions
     */
    public record Field(
            String name,
            @Nullable String dataset,
            @Nullable String member,
            @Nullable Integer column) {}

    public Hdf5Format {
        Problems problems = new Problems("HDF5 records")
                .rule(!fields.isEmpty(), "fields", "expected at least one field, found none");
        Set<String> names = new HashSet<>();
        for (int i = 0; i < fields.size(); i++) {
            Field field = fields.get(i);
            FieldNames.require(problems, "fields[" + i + "].name", field.name(), names);
            problems.rule(
                    dataset != null || field.dataset() != null,
                    "fields[" + i + "].dataset",
                    "expected the path of a dataset, here or for the whole format, found none");
            if (field.column() != null) {
                problems.atLeast("fields[" + i + "].column", field.column(), 1);
            }
        }
        problems.orThrow();
    }
}
