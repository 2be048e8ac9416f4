package org.raysheaf.io.list;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.attribute.FileTime;
import java.util.ArrayList;
import java.util.Collections;
import java.util.EnumSet;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalLong;
import java.util.Set;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.io.hdf5.Hdf5Exception;
import org.raysheaf.io.hdf5.Hdf5File;
import org.raysheaf.io.list.ListFileException.Kind;

/**
 * A list file whose header and columns have been checked; {@link ListFormat} draws the format. Values are checked while they are read:
 * every cursor verifies each chunk's checksum before it gives any of its values, and refuses values that cannot be. Elements are checked
 * against the detector system once its size is known:
 *
 * <pre>
 * ListFile list = ListFile.open(path);
 * int elements = …;                              // from list.header().systemDescription()
 * EventSource events = list.withElements(elements);
 * </pre>
 *
 * <p>Holds no open file between reads. Immutable and safe for use by several threads; each cursor belongs to one.
 */
public final class ListFile implements EventSource {
    private static final int CHECK_BLOCK = 1 << 16;

    private final Path path;
    private final Stamp stamp;
    private final Contents contents;
    private final int elements;

    /** Tells whether a file was changed. */
    private record Stamp(long size, FileTime modified) {
        static Stamp of(Path path) throws IOException {
            return new Stamp(Files.size(path), Files.getLastModifiedTime(path));
        }
    }

    /** What opening found. */
    private record Contents(
            ListKind kind,
            ListHeader header,
            Set<Attribute> attributes,
            Set<Attribute> truth,
            long events,
            List<String> warnings,
            Optional<String> digest) {}

    private ListFile(Path path, Stamp stamp, Contents contents, int elements) {
        this.path = path;
        this.stamp = stamp;
        this.contents = contents;
        this.elements = elements;
    }

    /**
     * Opens a list and checks everything but the values themselves.
     *
     * @param path the file
     * @return the list
     * @throws ListFileException if it is no list, too new, truncated, damaged, incomplete or inconsistent
     * @throws IOException if it cannot be read
     */
    public static ListFile open(Path path) throws IOException {
        Stamp stamp = Stamp.of(path);
        try (Hdf5File file = Hdf5File.open(path)) {
            List<String> warnings = new ArrayList<>();
            HeaderReader headerReader = new HeaderReader(path, file.root(), warnings);
            ListKind kind = headerReader.kind();
            ListHeader header = headerReader.read();
            OptionalLong declared = headerReader.declaredEvents();
            ColumnsReader columnsReader = new ColumnsReader(path, file.root(), kind);
            Map<Attribute, ColumnsReader.Column> columns = columnsReader.read(declared);
            warnings.addAll(columnsReader.remarks(columns));
            long events = columns.values().iterator().next().dataset.count();
            Set<Attribute> truth = kind.truth();
            truth.retainAll(columns.keySet());
            columns.keySet().removeAll(truth);
            Contents contents = new Contents(
                    kind,
                    header,
                    Collections.unmodifiableSet(EnumSet.copyOf(columns.keySet())),
                    Collections.unmodifiableSet(truth),
                    events,
                    List.copyOf(warnings),
                    ListDigest.of(header, events, columns));
            return new ListFile(path, stamp, contents, Integer.MAX_VALUE);
        } catch (Hdf5Exception e) {
            throw new ListFileException(e);
        }
    }

    /**
     * The same list, whose cursors refuse elements that the detector system does not have.
     *
     * @param count number of elements of the system, at least 1
     * @return the list, elements checked while they are read
     */
    public ListFile withElements(int count) {
        if (count < 1) {
            throw new IllegalArgumentException("a system has at least one element: " + count);
        }
        return new ListFile(path, stamp, contents, count);
    }

    @Override
    public ListHeader header() {
        return contents.header;
    }

    @Override
    public Set<Attribute> attributes() {
        return contents.attributes;
    }

    /**
     * What one record of the list stands for.
     *
     * @return pairs or singles
     */
    public ListKind kind() {
        return contents.kind;
    }

    /**
     * What a simulation wrote beside the measured attributes. Cursors read these columns too, if a block has them; only
     * what studies a simulation may ask for them, never a reconstruction.
     *
     * @return the columns of the truth; empty for a measured list
     */
    public Set<Attribute> truth() {
        return contents.truth;
    }

    @Override
    public long events() {
        return contents.events;
    }

    /**
     * What is odd about the file, but no reason to refuse it.
     *
     * @return one remark each, in plain words; empty for the lists that we write
     */
    public List<String> warnings() {
        return contents.warnings;
    }

    /**
     * A fingerprint of the whole list but its truth: SHA-256 over its header and the checksums of all chunks.
     *
     * @return hexadecimal digits, the same for the same list; empty if the file has no checksums
     */
    public Optional<String> digest() {
        return contents.digest;
    }

    /**
     * Reads the whole list once and checks every value.
     *
     * @throws ListFileException if a chunk is damaged, or a value cannot be
     * @throws IOException if it cannot be read
     */
    public void verify() throws IOException {
        Set<Attribute> all = EnumSet.copyOf(attributes());
        all.addAll(truth());
        EventBlock block = new EventBlock(all, CHECK_BLOCK);
        try (Cursor cursor = open()) {
            while (cursor.next(block)) {
                // the cursor checks
            }
        }
    }

    /**
     * Starts reading at the first event.
     *
     * @return a cursor; the caller closes it; all blocks given to it have the same columns
     * @throws ListFileException if the file was changed since it was opened, or cannot be trusted
     * @throws IOException if it cannot be read
     */
    @Override
    public Cursor open() throws IOException {
        if (!Stamp.of(path).equals(stamp)) {
            throw new ListFileException(
                    Kind.CHANGED, path, "", "expected the file as it was when opened, found it changed; start again");
        }
        return ListCursor.open(path, contents.kind, contents.events, elements);
    }
}
