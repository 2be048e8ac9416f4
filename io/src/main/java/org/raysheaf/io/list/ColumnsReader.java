package org.raysheaf.io.list;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalLong;
import java.util.Set;
import java.util.stream.Collectors;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.ColumnType;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.io.hdf5.StoredDataset;
import org.raysheaf.io.hdf5.StoredGroup;
import org.raysheaf.io.hdf5.StoredType;
import org.raysheaf.io.list.ListFileException.Kind;

/** Finds the columns of a list and checks everything that can be checked without reading them: presence, types, units, lengths. */
final class ColumnsReader {
    /** Members that are no columns. */
    private static final Set<String> OTHERS =
            Set.of(ListFormat.SYSTEM, ListFormat.SINGLES, ListFormat.CHECKSUMS, ListFormat.TRUTH);

    private final Path path;
    private final StoredGroup root;
    private final ListKind kind;

    /** A column in an open file. */
    static final class Column {
        final StoredDataset dataset;
        final int @Nullable [] checksums;

        Column(StoredDataset dataset, int @Nullable [] checksums) {
            this.dataset = dataset;
            this.checksums = checksums;
        }
    }

    ColumnsReader(Path path, StoredGroup root, ListKind kind) {
        this.path = path;
        this.root = root;
        this.kind = kind;
    }

    /**
     * Finds the columns.
     *
     * @param declaredEvents the number of events that the list declares, if it does
     * @return every column that is there, of the truth too; at least those that the kind of list requires
     * @throws IOException if one cannot be a column
     */
    Map<Attribute, Column> read(OptionalLong declaredEvents) throws IOException {
        Map<Attribute, Column> columns = new EnumMap<>(Attribute.class);
        find(columns, root, kind.measured());
        Optional<StoredGroup> truth = root.group(ListFormat.TRUTH);
        if (truth.isPresent()) {
            find(columns, truth.get(), kind.truth());
        }
        String reference = "attribute events";
        long events = declaredEvents.orElse(0);
        for (Attribute attribute : kind.required()) {
            Column column = requirePresent(columns, attribute);
            if (declaredEvents.isEmpty()) {
                events = column.dataset.count();
                reference = attribute.columnName();
            }
        }
        for (Column column : columns.values()) {
            requireLength(column.dataset, events, reference);
        }
        return columns;
    }

    private void find(Map<Attribute, Column> columns, StoredGroup group, Set<Attribute> attributes) throws IOException {
        for (Attribute attribute : attributes) {
            String name = attribute.columnName();
            Optional<StoredDataset> dataset = group.dataset(name);
            if (dataset.isPresent()) {
                requireFit(dataset.get(), attribute);
                columns.put(attribute, new Column(dataset.get(), group.checksums(name)));
            }
        }
    }

    private Column requirePresent(Map<Attribute, Column> columns, Attribute attribute) throws ListFileException {
        Column column = columns.get(attribute);
        if (column == null) {
            throw new ListFileException(
                    Kind.MISSING,
                    path,
                    attribute.columnName(),
                    "expected a column of whole numbers, found no dataset of that name; members are " + root.names());
        }
        return column;
    }

    private void requireFit(StoredDataset dataset, Attribute attribute) throws ListFileException {
        boolean real = attribute.type() == ColumnType.FLOAT32;
        boolean fits = real ? dataset.type().number() : dataset.type().kind() == StoredType.Kind.INTEGER;
        if (!fits) {
            throw wrong(dataset, "expected " + (real ? "numbers" : "whole numbers") + ", found " + dataset.type());
        }
        if (dataset.shape().length != 1) {
            throw wrong(dataset, "expected one dimension, found shape " + Arrays.toString(dataset.shape()));
        }
        Optional<String> unit = dataset.attributes().text(ListFormat.UNIT);
        if (unit.isPresent() && !unit.get().equals(attribute.unit())) {
            throw wrong(
                    dataset,
                    "expected the unit " + attribute.unit() + ", found " + unit.get() + "; convert the values");
        }
    }

    private ListFileException wrong(StoredDataset dataset, String trouble) {
        return new ListFileException(Kind.WRONG_TYPE, path, dataset.place(), trouble);
    }

    private void requireLength(StoredDataset dataset, long events, String reference) throws ListFileException {
        if (dataset.count() != events) {
            throw new ListFileException(
                    Kind.INCONSISTENT_LENGTHS,
                    path,
                    dataset.place(),
                    "expected " + events + " values as in " + reference + ", found " + dataset.count()
                            + "; the recording was cut short or columns were mixed up");
        }
    }

    /**
     * What is odd about the columns, but no reason to refuse them.
     *
     * @param columns the columns found
     * @return one remark each, in plain words
     */
    List<String> remarks(Map<Attribute, Column> columns) {
        List<String> remarks = new ArrayList<>();
        String unprotected = columns.entrySet().stream()
                .filter(column -> column.getValue().checksums == null)
                .map(column -> column.getKey().columnName())
                .collect(Collectors.joining(", "));
        if (!unprotected.isEmpty()) {
            remarks.add("no checksums for " + unprotected + ": damage to these columns may go unnoticed");
        }
        for (String name : root.names()) {
            boolean known =
                    Attribute.named(name).filter(kind.measured()::contains).isPresent() || OTHERS.contains(name);
            if (!known) {
                remarks.add("member " + name + " is not part of the format and was passed over; columns are "
                        + columnNames());
            }
        }
        return remarks;
    }

    private String columnNames() {
        return kind.measured().stream().map(Attribute::columnName).collect(Collectors.joining(", "));
    }
}
