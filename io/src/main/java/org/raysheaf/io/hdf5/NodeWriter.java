package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/**
 * A group or dataset being written: it has a name and attributes, and ends as an object header in the file:
 *
 * <pre>
 * offset  bytes
 *      0      4  "OHDR"
 *      4      1  version, 2
 *      5      1  flags, 2: the next field has four bytes
 *      6      4  size of all messages, n
 *     10      n  messages
 *   10+n      4  checksum (lookup3) of everything before
 * </pre>
 *
 * <p>Attributes may be set until the file is committed; setting one again replaces its value. Not safe for use by several threads.
 */
public abstract sealed class NodeWriter permits GroupWriter, ColumnWriter, ArrayWriter {
    private final Map<String, ByteBuffer> attributes = new LinkedHashMap<>();

    NodeWriter() {}

    /**
     * Sets a text attribute.
     *
     * @param name its name
     * @param value its text, stored as UTF-8 of fixed length; at most about 65,000 bytes
     * @throws IllegalArgumentException if the text is too long: store it as a dataset
     */
    public void attribute(String name, String value) {
        attributes.put(name, Messages.attribute(name, value));
    }

    /**
     * Sets an attribute that is a whole number.
     *
     * @param name its name
     * @param value its value, stored as int64
     */
    public void attribute(String name, long value) {
        attributes.put(name, Messages.attribute(name, value));
    }

    /**
     * Sets an attribute that is a real number.
     *
     * @param name its name
     * @param value its value, stored as float64
     */
    public void attribute(String name, double value) {
        attributes.put(name, Messages.attribute(name, value));
    }

    /**
     * Sets an attribute that is a row of real numbers.
     *
     * @param name its name
     * @param values its values, stored as float64, at least one, at most about 8,000
     * @throws IllegalArgumentException if there are too many
     */
    public void attribute(String name, double[] values) {
        if (values.length == 0) {
            throw new IllegalArgumentException("attribute " + name + " needs at least one number");
        }
        attributes.put(name, Messages.attribute(name, values));
    }

    /**
     * Writes what is still missing, the header last.
     *
     * @param file where to
     * @return the address of the header
     * @throws IOException if the disk does not take it
     */
    abstract long finish(PendingFile file) throws IOException;

    /**
     * Appends the object header.
     *
     * @param file where to
     * @param own the messages that make it what it is; attributes follow them
     * @return the address of the header
     * @throws IOException if the disk does not take it
     */
    final long appendHeader(PendingFile file, List<ByteBuffer> own) throws IOException {
        List<ByteBuffer> messages = new ArrayList<>(own);
        messages.addAll(attributes.values());
        int size = messages.stream().mapToInt(ByteBuffer::remaining).sum();
        ByteBuffer header = Messages.buffer(10 + size + 4);
        header.put(new byte[] {'O', 'H', 'D', 'R', 2, 2}).putInt(size);
        messages.forEach(header::put);
        header.putInt(Lookup3.hash(header, header.position()));
        return file.append(header.flip());
    }
}
