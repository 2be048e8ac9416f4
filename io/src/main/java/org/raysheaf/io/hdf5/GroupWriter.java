package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/**
 * A group being written: a folder for datasets and further groups, kept in the order of their making. Names are plain ASCII without
 * slash, 1 to 255 characters; {@code crc32c} is reserved for the checksums of columns. Not safe for use by several threads.
 */
public final class GroupWriter extends NodeWriter {
    /** Name of the group that holds the checksums of the columns beside it. */
    static final String CHECKSUMS = "crc32c";

    private final PendingFile file;
    private final Map<String, NodeWriter> members = new LinkedHashMap<>();

    GroupWriter(PendingFile file) {
        this.file = file;
    }

    /**
     * Adds a group.
     *
     * @param name its name
     * @return the group, empty
     */
    public GroupWriter group(String name) {
        return add(name, new GroupWriter(file));
    }

    /**
     * Adds a column, to be filled as a stream. Several columns may be filled side by side.
     *
     * @param name its name
     * @param type what it holds
     * @param chunkLength values per chunk, at least 1; a chunk has at most 2²⁸ bytes
     * @param compression how its chunks are stored
     * @return the column, empty
     */
    public ColumnWriter column(String name, ElementType type, int chunkLength, Compression compression) {
        return add(name, new ColumnWriter(file, type, chunkLength, compression));
    }

    /**
     * Adds a dataset of single-precision values.
     *
     * @param name its name
     * @param values its values, the last index of the shape running fastest
     * @param shape its shape, empty for a single value; the product is the number of values
     * @return the dataset, complete but for its attributes
     * @throws IOException if the disk does not take it
     */
    public ArrayWriter array(String name, float[] values, long... shape) throws IOException {
        return array(
                name,
                ElementType.FLOAT32,
                values.length,
                (buffer, from, n) -> buffer.asFloatBuffer().put(values, from, n),
                shape);
    }

    /**
     * Adds a dataset of double-precision values.
     *
     * @param name its name
     * @param values its values, the last index of the shape running fastest
     * @param shape its shape, empty for a single value; the product is the number of values
     * @return the dataset, complete but for its attributes
     * @throws IOException if the disk does not take it
     */
    public ArrayWriter array(String name, double[] values, long... shape) throws IOException {
        return array(
                name,
                ElementType.FLOAT64,
                values.length,
                (buffer, from, n) -> buffer.asDoubleBuffer().put(values, from, n),
                shape);
    }

    /**
     * Adds a dataset of unsigned 32-bit integers.
     *
     * @param name its name
     * @param values its values, the last index of the shape running fastest
     * @param shape its shape, empty for a single value; the product is the number of values
     * @return the dataset, complete but for its attributes
     * @throws IOException if the disk does not take it
     */
    public ArrayWriter array(String name, int[] values, long... shape) throws IOException {
        return array(
                name,
                ElementType.UINT32,
                values.length,
                (buffer, from, n) -> buffer.asIntBuffer().put(values, from, n),
                shape);
    }

    /**
     * Adds a dataset of signed 64-bit integers.
     *
     * @param name its name
     * @param values its values, the last index of the shape running fastest
     * @param shape its shape, empty for a single value; the product is the number of values
     * @return the dataset, complete but for its attributes
     * @throws IOException if the disk does not take it
     */
    public ArrayWriter array(String name, long[] values, long... shape) throws IOException {
        return array(
                name,
                ElementType.INT64,
                values.length,
                (buffer, from, n) -> buffer.asLongBuffer().put(values, from, n),
                shape);
    }

    /**
     * Adds a dataset that is one text of any length.
     *
     * @param name its name
     * @param text the text, stored as UTF-8
     * @return the dataset, complete but for its attributes
     * @throws IOException if the disk does not take it
     */
    public ArrayWriter text(String name, String text) throws IOException {
        byte[] utf8 = text.isEmpty() ? new byte[1] : text.getBytes(StandardCharsets.UTF_8);
        checkName(name);
        ByteBuffer type = Messages.textType(utf8.length);
        return add(name, new ArrayWriter(file, type, 1, utf8.length, (buffer, from, n) -> buffer.put(utf8, from, n)));
    }

    private ArrayWriter array(String name, ElementType type, int count, ArrayWriter.Run run, long... shape)
            throws IOException {
        long product = 1;
        for (long extent : shape) {
            product = extent < 0 ? -1 : Math.multiplyExact(product, extent);
        }
        if (product != count) {
            throw new IllegalArgumentException(
                    "dataset " + name + ": the shape holds " + product + " values, given are " + count);
        }
        checkName(name);
        return add(name, new ArrayWriter(file, Messages.datatype(type), type.bytes(), count, run, shape));
    }

    private <T extends NodeWriter> T add(String name, T member) {
        checkName(name);
        if (name.equals(CHECKSUMS)) {
            throw new IllegalArgumentException("the name " + CHECKSUMS + " is reserved for checksums");
        }
        members.put(name, member);
        return member;
    }

    private void checkName(String name) {
        if (!name.matches("[\\x21-\\x7e&&[^/]]{1,255}") || name.equals(".")) {
            throw new IllegalArgumentException(
                    "a name in HDF5 is 1 to 255 plain characters without slash: \"" + name + "\"");
        }
        if (members.containsKey(name)) {
            throw new IllegalArgumentException("the group has a member of that name: " + name);
        }
    }

    @Override
    long finish(PendingFile target) throws IOException {
        GroupWriter checksums = null;
        List<ByteBuffer> messages = new ArrayList<>(List.of(Messages.linkInfo(), Messages.groupInfo()));
        for (Map.Entry<String, NodeWriter> member : members.entrySet()) {
            if (member.getValue() instanceof ColumnWriter column) {
                int[] crcs = column.finishValues();
                checksums = checksums == null ? new GroupWriter(target) : checksums;
                checksums.array(member.getKey(), crcs, crcs.length);
            }
            messages.add(Messages.link(member.getKey(), member.getValue().finish(target)));
        }
        if (checksums != null) {
            messages.add(Messages.link(CHECKSUMS, checksums.finish(target)));
        }
        return appendHeader(target, messages);
    }
}
