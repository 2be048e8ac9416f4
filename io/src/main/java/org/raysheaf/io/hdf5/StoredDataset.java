package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.util.List;
import java.util.OptionalLong;
import java.util.zip.CRC32C;
import org.jspecify.annotations.Nullable;

/**
 * A dataset of an open file. Its declared size has been checked against the file. Long columns are read as a stream through {@link
 * #values}; small ones whole. Not safe for use by several threads.
 */
public final class StoredDataset {
    private static final int LARGEST_CHUNK_BYTES = 1 << 28;
    private static final int SMALLEST_INDEX_ENTRY = 24;

    private final FileBytes file;
    private final String place;
    private final StoredType type;
    private final Dataspace space;
    private final Layout layout;
    private final Filters filters;
    private final StoredAttributes attributes;
    private final Fields typeFields;

    StoredDataset(FileBytes file, String place, ObjectHeader header) throws IOException {
        this.file = file;
        this.place = place;
        space = Dataspace.read(header.required(Messages.DATASPACE, "shape"));
        typeFields = header.required(Messages.DATATYPE, "type").fromStart();
        type = StoredType.read(typeFields.fromStart());
        layout = Layout.read(header.required(Messages.LAYOUT, "layout"), space.shape().length, type);
        Fields pipeline = header.message(Messages.FILTERS).orElse(null);
        filters = pipeline == null ? Filters.NONE : Filters.read(pipeline, type);
        attributes = StoredAttributes.read(header);
        if (header.message(Messages.EXTERNAL_FILES).isPresent()) {
            throw file.unsupported(place, "keeps its values in another file; store them in this one");
        }
        requireRoom();
    }

    /** Compares the declared size with the file, before anything is allocated for it. */
    private void requireRoom() throws Hdf5Exception {
        if (space.count() == 0) {
            return;
        }
        if (layout.chunked()) {
            requireRoomForChunks();
            return;
        }
        if (space.count() > layout.bytes() / type.bytes()) {
            throw file.damaged(
                    place,
                    "expected " + space.count() + " values of " + type.bytes() + " bytes, found room for "
                            + layout.bytes() + " bytes");
        }
        if (layout.compactBytes() == null) {
            file.requireInside(layout.address(), space.count() * type.bytes(), place);
        }
    }

    private void requireRoomForChunks() throws Hdf5Exception {
        if (layout.bytes() > LARGEST_CHUNK_BYTES) {
            throw file.unsupported(
                    place,
                    "has chunks of " + layout.bytes() + " bytes, expected at most " + LARGEST_CHUNK_BYTES
                            + "; use smaller chunks");
        }
        long[] shape = space.shape();
        long chunks = 1;
        long most = file.size() / SMALLEST_INDEX_ENTRY;
        for (int i = 0; i < shape.length; i++) {
            long along = (shape[i] - 1) / layout.chunkShape()[i] + 1;
            if (along > most / chunks) {
                throw file.damaged(
                        place,
                        "expected chunks for " + space.count() + " values, found a file of only " + file.size()
                                + " bytes");
            }
            chunks *= along;
        }
    }

    /**
     * Where the dataset is, for messages.
     *
     * @return names of groups and dataset, joined by slashes
     */
    public String place() {
        return place;
    }

    /**
     * The type of the values.
     *
     * @return the type
     */
    public StoredType type() {
        return type;
    }

    /**
     * The shape, last index running fastest.
     *
     * @return a copy; empty for a single value
     */
    public long[] shape() {
        return space.shape();
    }

    /**
     * The number of values.
     *
     * @return the product of the shape
     */
    public long count() {
        return space.count();
    }

    /**
     * The attributes of the dataset.
     *
     * @return all of them
     */
    public StoredAttributes attributes() {
        return attributes;
    }

    /**
     * Starts reading the values as a stream. Chunks of more than one dimension are gathered in memory first.
     *
     * @param checksums one CRC-32C per chunk ({@link ColumnWriter} says over what), or null to read unverified
     * @return a reader at the first value; it can be used until the file is closed
     * @throws Hdf5Exception if the values are no numbers, lie in chunks of several dimensions and exceed an array, or the number of checksums
     *     is wrong
     * @throws IOException if the file cannot be read
     */
    public ValueReader values(int @Nullable [] checksums) throws IOException {
        if (!type.number()) {
            throw file.unsupported(place, "expected numbers, found " + type);
        }
        return new ValueReader(file, this, segments(), checksums);
    }

    /**
     * The members of the values.
     *
     * @return the members in their order; empty if the values are not compound
     * @throws Hdf5Exception if a member is of a type that is not read here
     */
    public List<Member> members() throws Hdf5Exception {
        return Member.read(typeFields.fromStart());
    }

    /**
     * Starts reading the values as bytes, as they are stored.
     *
     * @return a reader at the first byte; it can be used until the file is closed
     * @throws Hdf5Exception if the values lie in chunks of several dimensions and exceed an array
     * @throws IOException if the file cannot be read
     */
    public ValueBytes bytes() throws IOException {
        return new ValueBytes(file, place, segments());
    }

    private Segments segments() throws IOException {
        byte[] compact = layout.compactBytes();
        if (compact != null) {
            return Segments.of(compact, space.count() * type.bytes());
        }
        if (!layout.chunked()) {
            return Segments.contiguous(file, place, layout.address(), space.count() * type.bytes());
        }
        ChunkSource chunks = new ChunkSource(file, place, layout, filters, space.shape().length);
        if (space.shape().length == 1) {
            return new ChunkSegments(chunks, type.bytes(), space.count());
        }
        return ChunkGather.whole(chunks, space.shape(), type.bytes(), arrayLength());
    }

    /** Values in a chunk, 0 if the values are not in one-dimensional chunks. */
    long chunkLength() {
        return layout.chunked() && layout.chunkShape().length == 1 ? layout.chunkShape()[0] : 0;
    }

    /**
     * Reads all values as single-precision numbers. Verifies attribute {@code crc32c} if there is one.
     *
     * @return the values, the last index of the shape running fastest
     * @throws Hdf5Exception if they are no numbers, more than an array can hold, or damaged
     * @throws IOException if the file cannot be read
     */
    public float[] floats() throws IOException {
        ValueReader reader = values(null);
        float[] values = new float[arrayLength()];
        requireChecksum();
        reader.read(values, 0, values.length);
        return values;
    }

    /**
     * Reads all values as double-precision numbers. Verifies attribute {@code crc32c} if there is one.
     *
     * @return the values, the last index of the shape running fastest
     * @throws Hdf5Exception if they are no numbers, more than an array can hold, or damaged
     * @throws IOException if the file cannot be read
     */
    public double[] doubles() throws IOException {
        ValueReader reader = values(null);
        double[] values = new double[arrayLength()];
        requireChecksum();
        reader.read(values, 0, values.length);
        return values;
    }

    /**
     * Reads all values as 32-bit integers. Verifies attribute {@code crc32c} if there is one.
     *
     * @return the values; unsigned ones above 2³¹ − 1 come out negative
     * @throws Hdf5Exception if they are no whole numbers of at most 32 bits, more than an array can hold, or damaged
     * @throws IOException if the file cannot be read
     */
    public int[] ints() throws IOException {
        ValueReader reader = values(null);
        int[] values = new int[arrayLength()];
        requireChecksum();
        reader.read(values, 0, values.length);
        return values;
    }

    /**
     * Reads all values as 64-bit integers. Verifies attribute {@code crc32c} if there is one.
     *
     * @return the values
     * @throws Hdf5Exception if they are no whole numbers, more than an array can hold, or damaged
     * @throws IOException if the file cannot be read
     */
    public long[] longs() throws IOException {
        ValueReader reader = values(null);
        long[] values = new long[arrayLength()];
        requireChecksum();
        reader.read(values, 0, values.length);
        return values;
    }

    /**
     * Reads the dataset as one text. Verifies attribute {@code crc32c} if there is one.
     *
     * @return the text
     * @throws Hdf5Exception if it is no single text, or damaged
     * @throws IOException if the file cannot be read
     */
    public String text() throws IOException {
        boolean longText = type.kind() == StoredType.Kind.LONG_TEXT;
        if (space.count() != 1 || layout.chunked() || !(longText || type.kind() == StoredType.Kind.TEXT)) {
            throw file.unsupported(place, "expected a single text, found " + space.count() + " values of " + type);
        }
        requireChecksum();
        byte[] compact = layout.compactBytes();
        Fields bytes = compact == null
                ? file.read(layout.address(), type.bytes(), place)
                : new Fields(file, place, ByteBuffer.wrap(compact));
        return longText ? GlobalHeap.text(bytes) : bytes.text(type.bytes());
    }

    private int arrayLength() throws Hdf5Exception {
        if (space.count() > Integer.MAX_VALUE - 8) {
            throw file.unsupported(
                    place, "expected at most " + (Integer.MAX_VALUE - 8) + " values, found " + space.count());
        }
        return (int) space.count();
    }

    private void requireChecksum() throws IOException {
        OptionalLong expected = attributes.whole(ArrayWriter.CHECKSUM);
        if (expected.isEmpty()) {
            return;
        }
        CRC32C crc = new CRC32C();
        Segments segments = segments();
        for (ByteBuffer segment = segments.next(); segment != null; segment = segments.next()) {
            crc.update(segment);
        }
        if (crc.getValue() != expected.getAsLong()) {
            throw file.damaged(
                    place, String.format("expected CRC-32C %08x, found %08x", expected.getAsLong(), crc.getValue()));
        }
    }
}
