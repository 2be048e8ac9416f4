package org.raysheaf.io.list;

import java.io.IOException;
import java.nio.file.Path;
import java.util.EnumMap;
import java.util.Locale;
import java.util.Map;
import java.util.Objects;
import java.util.Set;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.event.PairingTally;
import org.raysheaf.geometry.matter.Nuclide;
import org.raysheaf.io.hdf5.ArrayWriter;
import org.raysheaf.io.hdf5.ColumnWriter;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.hdf5.ElementType;
import org.raysheaf.io.hdf5.GroupWriter;
import org.raysheaf.io.hdf5.Hdf5Writer;

/**
 * Writes a list of any size as a stream; memory holds one chunk per column. The file appears under its name, complete, when {@link
 * #commit} is called; closed without commit, nothing remains:
 *
 * <pre>
 * try (ListWriter list = ListWriter.create(attributes, path, false)) {
 *     while (more) {
 *         list.accept(block);
 *     }
 *     list.commit(header);
 * }
 * </pre>
 *
 * <p>The same events give the same bytes, however they were cut into blocks (compressed ones if Java brings the same deflate). Not safe for use by several threads.
 */
public final class ListWriter implements EventSink, AutoCloseable {
    private final Hdf5Writer file;
    private final ListKind kind;
    private final Map<Attribute, ColumnWriter> columns = new EnumMap<>(Attribute.class);
    private long events;

    private ListWriter(
            Hdf5Writer file, ListKind kind, Set<Attribute> attributes, Compression compression, int chunkLength) {
        this.file = file;
        this.kind = kind;
        addColumns(file.root(), kind.measured(), attributes, compression, chunkLength);
        if (attributes.stream().anyMatch(Attribute::truth)) {
            addColumns(file.root().group(ListFormat.TRUTH), kind.truth(), attributes, compression, chunkLength);
        }
    }

    private void addColumns(
            GroupWriter group,
            Set<Attribute> candidates,
            Set<Attribute> attributes,
            Compression compression,
            int chunkLength) {
        for (Attribute attribute : candidates) {
            if (attributes.contains(attribute)) {
                columns.put(attribute, newColumn(group, attribute, compression, chunkLength));
            }
        }
    }

    /**
     * Starts a list, its columns stored as they are, which is fastest.
     *
     * @param attributes what it says about every event; at least what {@link ListKind#required()} names for its kind
     * @param path where the file is to appear; the folder exists
     * @param replace whether a file that is already there may be replaced
     * @return the writer; the caller commits and closes it
     * @throws java.nio.file.FileAlreadyExistsException if the path exists and must not be replaced
     * @throws IOException if the folder cannot be written to
     */
    public static ListWriter create(Set<Attribute> attributes, Path path, boolean replace) throws IOException {
        return create(attributes, path, replace, Compression.NONE);
    }

    /**
     * Starts a list. Compressed, a typical list takes three fifths of the room, and its writing several times as long.
     *
     * @param attributes what it says about every event; at least what {@link ListKind#required()} names for its kind
     * @param path where the file is to appear; the folder exists
     * @param replace whether a file that is already there may be replaced
     * @param compression how columns are stored
     * @return the writer; the caller commits and closes it
     * @throws java.nio.file.FileAlreadyExistsException if the path exists and must not be replaced
     * @throws IOException if the folder cannot be written to
     */
    public static ListWriter create(Set<Attribute> attributes, Path path, boolean replace, Compression compression)
            throws IOException {
        return create(attributes, path, replace, compression, ListFormat.CHUNK_LENGTH);
    }

    /** The same with another chunk length, for tests that want many chunks of few events. */
    static ListWriter create(
            Set<Attribute> attributes, Path path, boolean replace, Compression compression, int chunkLength)
            throws IOException {
        ListKind kind = ListKind.of(attributes);
        if (!attributes.containsAll(kind.required())) {
            throw new IllegalArgumentException(
                    kind.phrase() + " has at least " + kind.required() + ", found " + attributes);
        }
        for (Attribute attribute : attributes) {
            if (!attribute.belongsTo(kind)) {
                throw new IllegalArgumentException(kind.phrase() + " has no " + attribute.columnName());
            }
        }
        Hdf5Writer file = Hdf5Writer.create(path, replace);
        try {
            return new ListWriter(file, kind, attributes, compression, chunkLength);
        } catch (RuntimeException e) {
            file.close();
            throw e;
        }
    }

    private static ColumnWriter newColumn(
            GroupWriter group, Attribute attribute, Compression compression, int chunkLength) {
        ElementType type = switch (attribute.type()) {
            case UINT8 -> ElementType.UINT8;
            case UINT32 -> ElementType.UINT32;
            case INT64 -> ElementType.INT64;
            case FLOAT32 -> ElementType.FLOAT32;
        };
        ColumnWriter column = group.column(attribute.columnName(), type, chunkLength, compression);
        column.attribute(ListFormat.UNIT, attribute.unit());
        column.attribute(ListFormat.MEANING, attribute.meaning());
        return column;
    }

    private void writeHeader(ListHeader header) throws IOException {
        GroupWriter root = file.root();
        root.attribute(ListFormat.MARK, kind.word() + "/" + ListFormat.VERSION);
        root.attribute(ListFormat.WRITER, writerName());
        root.attribute(ListFormat.LIVE_TIME, header.liveTimeS());
        root.attribute(ListFormat.DURATION, header.durationS());
        root.attribute(ListFormat.START, header.start().toString());
        Nuclide nuclide = header.nuclide();
        if (nuclide != null) {
            root.attribute(ListFormat.NUCLIDE, nuclide.name());
            root.attribute(ListFormat.HALF_LIFE, nuclide.halfLifeS());
            root.attribute(ListFormat.BRANCHING, nuclide.positronBranching());
        }
        PairingRecord pairing = header.pairing();
        if (pairing != null) {
            writePairing(root, pairing);
        }
        ArrayWriter system = root.text(ListFormat.SYSTEM, header.systemDescription());
        system.attribute(ListFormat.SHA256, ListFormat.sha256(header.systemDescription()));
    }

    private static void writePairing(GroupWriter root, PairingRecord pairing) throws IOException {
        Pairing settings = pairing.settings();
        root.attribute(ListFormat.WINDOW, settings.windowNs());
        root.attribute(ListFormat.LOWEST, settings.lowestKeV());
        Double highest = settings.highestKeV();
        if (highest != null) {
            root.attribute(ListFormat.HIGHEST, highest);
        }
        Double delay = settings.delayNs();
        if (delay != null) {
            root.attribute(ListFormat.DELAY, delay);
        }
        root.attribute(ListFormat.DISORDER, settings.disorderNs());
        root.attribute(ListFormat.CROWDS, settings.crowds().name().toLowerCase(Locale.ROOT));
        PairingTally tally = pairing.tally();
        root.attribute(ListFormat.OUTSIDE_ENERGIES, tally.outsideEnergies());
        root.attribute(ListFormat.ALONE, tally.alone());
        root.attribute(ListFormat.CROWDED, tally.crowded());
        root.attribute(ListFormat.TOO_CLOSE, tally.tooClose());
        root.attribute(ListFormat.PAIRED, tally.paired());
        root.attribute(ListFormat.PROMPTS, tally.prompts());
        root.attribute(ListFormat.DELAYED, tally.delayed());
        if (!pairing.singles().isEmpty()) {
            long[] singles =
                    pairing.singles().stream().mapToLong(Long::longValue).toArray();
            root.array(ListFormat.SINGLES, singles, singles.length).attribute(ListFormat.UNIT, "1");
        }
    }

    private static String writerName() {
        String version = ListWriter.class.getPackage().getImplementationVersion();
        return "raysheaf " + Objects.requireNonNullElse(version, "(unpacked)");
    }

    /**
     * Appends the events of a block.
     *
     * @param block the events; it has every column that the list was made with
     * @throws IllegalArgumentException if a column is missing or a value cannot be: not a number, a negative time, energy or element
     * @throws IOException if the disk does not take them
     */
    @Override
    public void accept(EventBlock block) throws IOException {
        columns.keySet().forEach(attribute -> requirePossible(block, attribute));
        for (Map.Entry<Attribute, ColumnWriter> column : columns.entrySet()) {
            append(column.getValue(), block, column.getKey());
        }
        events += block.size();
    }

    private void requirePossible(EventBlock block, Attribute attribute) {
        int bad = EventRules.firstImpossible(block, attribute, Integer.MAX_VALUE);
        if (bad != EventRules.NONE) {
            throw new IllegalArgumentException(attribute.columnName() + ", event " + (events + bad) + ": expected "
                    + EventRules.expected(attribute, Integer.MAX_VALUE) + ", found "
                    + EventRules.found(block, attribute, bad));
        }
    }

    private static void append(ColumnWriter column, EventBlock block, Attribute attribute) throws IOException {
        switch (attribute.type()) {
            case UINT8 -> column.append(block.bytes(attribute), 0, block.size());
            case UINT32 -> column.append(block.ints(attribute), 0, block.size());
            case INT64 -> column.append(block.longs(attribute), 0, block.size());
            case FLOAT32 -> column.append(block.floats(attribute), 0, block.size());
        }
    }

    /**
     * Completes the list and lets it appear under its name. Call once, after the last block.
     *
     * @param header what the list says about itself
     * @throws IOException if the disk does not take it
     */
    public void commit(ListHeader header) throws IOException {
        writeHeader(header);
        file.root().attribute(ListFormat.EVENTS, events);
        file.commit();
    }

    /**
     * Ends the writing; without a commit before, nothing remains of the list.
     *
     * @throws IOException if the temporary file cannot be removed
     */
    @Override
    public void close() throws IOException {
        file.close();
    }
}
