package org.raysheaf.io.hdf5;

import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;

/**
 * Builds the messages of an object header. Every message is
 *
 * <pre>
 * offset  bytes
 *      0      1  type
 *      1      2  size of the body
 *      3      1  flags, 0
 *      4      …  body
 * </pre>
 *
 * and every method here returns one whole message, or, where so named, a body alone, ready to be read from its start.
 */
final class Messages {
    static final int DATASPACE = 0x01;
    static final int LINK_INFO = 0x02;
    static final int DATATYPE = 0x03;
    static final int FILL_VALUE = 0x05;
    static final int LINK = 0x06;
    static final int EXTERNAL_FILES = 0x07;
    static final int LAYOUT = 0x08;
    static final int GROUP_INFO = 0x0a;
    static final int FILTERS = 0x0b;
    static final int ATTRIBUTE = 0x0c;
    static final int CONTINUATION = 0x10;
    static final int SYMBOL_TABLE = 0x11;
    static final int ATTRIBUTE_INFO = 0x15;

    /** The address that means "nowhere". */
    static final long UNDEFINED = -1;

    /** Identification of a filter in a pipeline. */
    static final int DEFLATE = 1;

    static final int SHUFFLE = 2;
    static final int FLETCHER32 = 3;

    private static final int LARGEST_BODY = 0xffff;
    private static final int DEFLATE_LEVEL = 1;

    private Messages() {}

    /**
     * A little-endian buffer.
     *
     * @param capacity its size (bytes)
     * @return the buffer, empty
     */
    static ByteBuffer buffer(int capacity) {
        return ByteBuffer.allocate(capacity).order(ByteOrder.LITTLE_ENDIAN);
    }

    private static ByteBuffer message(int type, ByteBuffer body) {
        if (body.remaining() > LARGEST_BODY) {
            throw new IllegalArgumentException("HDF5 keeps at most " + LARGEST_BODY
                    + " bytes in one attribute; store longer text or data as a dataset: " + body.remaining());
        }
        return buffer(4 + body.remaining())
                .put((byte) type)
                .putShort((short) body.remaining())
                .put((byte) 0)
                .put(body)
                .flip();
    }

    /** Links are kept in the group's own header: no heap, no index. */
    static ByteBuffer linkInfo() {
        return message(
                LINK_INFO,
                buffer(18)
                        .putShort((short) 0)
                        .putLong(UNDEFINED)
                        .putLong(UNDEFINED)
                        .flip());
    }

    static ByteBuffer groupInfo() {
        return message(GROUP_INFO, buffer(2).putShort((short) 0).flip());
    }

    /** A hard link: a member's name and the address of its header. */
    static ByteBuffer link(String name, long address) {
        byte[] ascii = name.getBytes(StandardCharsets.US_ASCII);
        return message(
                LINK,
                buffer(3 + ascii.length + 8)
                        .put((byte) 1) // version
                        .put((byte) 0) // hard link, ASCII, one byte for the length of the name
                        .put((byte) ascii.length)
                        .put(ascii)
                        .putLong(address)
                        .flip());
    }

    static ByteBuffer dataspace(long... shape) {
        return message(DATASPACE, dataspaceBody(shape));
    }

    /** Shape of a column: as long as it is, and readers may think of it as growing. */
    static ByteBuffer growingDataspace(long length) {
        ByteBuffer body = buffer(20).putInt(0x01_01_01_02); // version 2, rank 1, with largest sizes, simple
        return message(DATASPACE, body.putLong(length).putLong(UNDEFINED).flip());
    }

    private static ByteBuffer dataspaceBody(long... shape) {
        ByteBuffer body = buffer(4 + 8 * shape.length)
                .put((byte) 2) // version
                .put((byte) shape.length)
                .put((byte) 0)
                .put((byte) (shape.length == 0 ? 0 : 1)); // scalar or simple
        for (long extent : shape) {
            body.putLong(extent);
        }
        return body.flip();
    }

    static ByteBuffer datatype(ElementType type) {
        return message(DATATYPE, datatypeBody(type));
    }

    /** Text of fixed length, UTF-8, filled up with zeros. */
    static ByteBuffer textType(int bytes) {
        return message(DATATYPE, textTypeBody(bytes));
    }

    private static ByteBuffer textTypeBody(int bytes) {
        return buffer(8)
                .put((byte) 0x13)
                .put((byte) 0x11)
                .putShort((short) 0)
                .putInt(bytes)
                .flip();
    }

    private static ByteBuffer datatypeBody(ElementType type) {
        return switch (type) {
            case UINT8 -> integer(1, 0x00);
            case UINT32 -> integer(4, 0x00);
            case INT64 -> integer(8, 0x08);
            case FLOAT32 -> real(4, 23, 8, 127);
            case FLOAT64 -> real(8, 52, 11, 1023);
        };
    }

    private static ByteBuffer integer(int bytes, int signBit) {
        return buffer(12)
                .put((byte) 0x10) // version 1, class 0
                .put((byte) signBit)
                .putShort((short) 0)
                .putInt(bytes)
                .putShort((short) 0) // first bit
                .putShort((short) (8 * bytes))
                .flip();
    }

    private static ByteBuffer real(int bytes, int mantissaBits, int exponentBits, int bias) {
        return buffer(20)
                .put((byte) 0x11) // version 1, class 1
                .put((byte) 0x20) // little-endian, leading mantissa bit implied
                .put((byte) (8 * bytes - 1)) // place of the sign
                .put((byte) 0)
                .putInt(bytes)
                .putShort((short) 0)
                .putShort((short) (8 * bytes))
                .put((byte) mantissaBits) // place of the exponent
                .put((byte) exponentBits)
                .put((byte) 0) // place of the mantissa
                .put((byte) mantissaBits)
                .putInt(bias)
                .flip();
    }

    /** No fill value; space is taken when chunks are written. */
    static ByteBuffer fillValue() {
        return message(FILL_VALUE, buffer(2).put((byte) 3).put((byte) 0x0b).flip());
    }

    static ByteBuffer contiguousLayout(long address, long bytes) {
        return message(
                LAYOUT,
                buffer(18)
                        .put((byte) 3)
                        .put((byte) 1)
                        .putLong(bytes == 0 ? UNDEFINED : address)
                        .putLong(bytes)
                        .flip());
    }

    /** Chunks of a column, found through a version-1 B-tree. */
    static ByteBuffer chunkedLayout(long indexAddress, int chunkLength, int elementBytes) {
        return message(
                LAYOUT,
                buffer(19)
                        .put((byte) 3)
                        .put((byte) 2)
                        .put((byte) 2) // rank + 1
                        .putLong(indexAddress)
                        .putInt(chunkLength)
                        .putInt(elementBytes)
                        .flip());
    }

    static ByteBuffer shuffleAndDeflate(int elementBytes) {
        ByteBuffer body = buffer(22).put((byte) 2).put((byte) 2); // version, number of filters
        filter(body, SHUFFLE, elementBytes);
        filter(body, DEFLATE, DEFLATE_LEVEL);
        return message(FILTERS, body.flip());
    }

    private static void filter(ByteBuffer body, int filter, int setting) {
        body.putShort((short) filter).putShort((short) 0).putShort((short) 1).putInt(setting);
    }

    static ByteBuffer attribute(String name, String value) {
        byte[] text = value.getBytes(StandardCharsets.UTF_8);
        int bytes = Math.max(1, text.length); // HDF5 knows no text of length 0
        return attribute(name, textTypeBody(bytes), dataspaceBody(), ByteBuffer.wrap(text, 0, text.length), bytes);
    }

    static ByteBuffer attribute(String name, long value) {
        return attribute(
                name,
                datatypeBody(ElementType.INT64),
                dataspaceBody(),
                buffer(8).putLong(value).flip(),
                8);
    }

    static ByteBuffer attribute(String name, double value) {
        return attribute(
                name,
                datatypeBody(ElementType.FLOAT64),
                dataspaceBody(),
                buffer(8).putDouble(value).flip(),
                8);
    }

    static ByteBuffer attribute(String name, double[] values) {
        ByteBuffer data = buffer(8 * values.length);
        data.asDoubleBuffer().put(values);
        return attribute(name, datatypeBody(ElementType.FLOAT64), dataspaceBody(values.length), data, data.capacity());
    }

    /**
     * <pre>
     * offset  bytes
     *      0      1  version, 3
     *      1      1  flags, 0
     *      2    2+2+2  sizes of name (with its closing zero), type and shape
     *      8      1  character set of the name, 1 = UTF-8
     *      9      …  name, type, shape, data
     * </pre>
     */
    private static ByteBuffer attribute(String name, ByteBuffer type, ByteBuffer shape, ByteBuffer data, int bytes) {
        byte[] utf8 = name.getBytes(StandardCharsets.UTF_8);
        ByteBuffer body = buffer(9 + utf8.length + 1 + type.remaining() + shape.remaining() + bytes);
        body.putShort((short) 3)
                .putShort((short) (utf8.length + 1))
                .putShort((short) type.remaining())
                .putShort((short) shape.remaining())
                .put((byte) 1)
                .put(utf8)
                .put((byte) 0)
                .put(type)
                .put(shape)
                .put(data)
                .position(body.capacity());
        return message(ATTRIBUTE, body.flip());
    }
}
