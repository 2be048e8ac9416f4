package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.zip.CRC32C;
import org.jspecify.annotations.Nullable;

/**
 * A one-dimensional dataset that is written as a stream: values are appended, each full chunk goes to the file at once, so memory holds one
 * chunk and 16 bytes for every chunk written. A column shorter than one chunk becomes one chunk of its own length.
 *
 * <p>For each chunk a CRC-32C is kept beside the column: dataset {@code crc32c/NAME} in the same group, uint32, one per chunk, each over
 * the little-endian bytes of the chunk's values before compression, without the filling of the last chunk.
 *
 * <p>Made by {@link GroupWriter#column}. Not safe for use by several threads.
 */
public final class ColumnWriter extends NodeWriter {
    private static final int LARGEST_CHUNK_BYTES = 1 << 28;

    private final PendingFile file;
    private final ElementType type;
    private final int chunkLength;
    private final ByteBuffer buffer;
    private final @Nullable ChunkEncoder encoder;
    private final ChunkIndex index = new ChunkIndex();
    private int[] checksums = new int[16];
    private long length;

    ColumnWriter(PendingFile file, ElementType type, int chunkLength, Compression compression) {
        if (chunkLength < 1 || (long) chunkLength * type.bytes() > LARGEST_CHUNK_BYTES) {
            throw new IllegalArgumentException("a chunk holds 1 value to " + LARGEST_CHUNK_BYTES + " bytes: "
                    + chunkLength + " values of " + type.bytes() + " bytes");
        }
        this.file = file;
        this.type = type;
        this.chunkLength = chunkLength;
        int chunkBytes = chunkLength * type.bytes();
        buffer = ByteBuffer.allocateDirect(chunkBytes).order(ByteOrder.LITTLE_ENDIAN);
        encoder = compression == Compression.DEFLATE ? new ChunkEncoder(type.bytes(), chunkBytes) : null;
    }

    /** Puts a run of the caller's values into the buffer. */
    private interface Run {
        void put(int from, int count);
    }

    /**
     * Appends 8-bit values.
     *
     * @param values holds them
     * @param from index of the first
     * @param count how many
     * @throws IOException if the disk does not take them
     */
    public void append(byte[] values, int from, int count) throws IOException {
        append(ElementType.UINT8, from, count, (first, n) -> buffer.slice().put(values, first, n));
    }

    /**
     * Appends 32-bit integers.
     *
     * @param values holds them
     * @param from index of the first
     * @param count how many
     * @throws IOException if the disk does not take them
     */
    public void append(int[] values, int from, int count) throws IOException {
        append(
                ElementType.UINT32,
                from,
                count,
                (first, n) -> buffer.asIntBuffer().put(values, first, n));
    }

    /**
     * Appends 64-bit integers.
     *
     * @param values holds them
     * @param from index of the first
     * @param count how many
     * @throws IOException if the disk does not take them
     */
    public void append(long[] values, int from, int count) throws IOException {
        append(
                ElementType.INT64,
                from,
                count,
                (first, n) -> buffer.asLongBuffer().put(values, first, n));
    }

    /**
     * Appends single-precision values.
     *
     * @param values holds them
     * @param from index of the first
     * @param count how many
     * @throws IOException if the disk does not take them
     */
    public void append(float[] values, int from, int count) throws IOException {
        append(
                ElementType.FLOAT32,
                from,
                count,
                (first, n) -> buffer.asFloatBuffer().put(values, first, n));
    }

    /**
     * Appends double-precision values.
     *
     * @param values holds them
     * @param from index of the first
     * @param count how many
     * @throws IOException if the disk does not take them
     */
    public void append(double[] values, int from, int count) throws IOException {
        append(
                ElementType.FLOAT64,
                from,
                count,
                (first, n) -> buffer.asDoubleBuffer().put(values, first, n));
    }

    private void append(ElementType given, int from, int count, Run run) throws IOException {
        if (given != type) {
            throw new IllegalArgumentException("the column holds " + type + ", not " + given);
        }
        int next = from;
        int end = Math.addExact(from, count);
        while (next < end) {
            int n = Math.min(end - next, buffer.remaining() / type.bytes());
            run.put(next, n);
            buffer.position(buffer.position() + n * type.bytes());
            length += n;
            next += n;
            if (!buffer.hasRemaining()) {
                flush();
            }
        }
    }

    /** Writes the chunk in the buffer, if it holds any value. */
    private void flush() throws IOException {
        if (buffer.position() == 0) {
            return;
        }
        remember(crc(buffer.duplicate().flip()));
        if (index.chunks() > 0) {
            fillUp(); // all chunks have the same length; a lone one needs no filling
        }
        buffer.flip();
        ByteBuffer stored = encoder == null ? buffer : encoder.encode(buffer);
        int bytes = stored.remaining();
        index.add(file.append(stored), bytes);
        buffer.clear();
    }

    private void fillUp() {
        while (buffer.hasRemaining()) {
            buffer.put((byte) 0);
        }
    }

    private static int crc(ByteBuffer values) {
        CRC32C crc = new CRC32C();
        crc.update(values);
        return (int) crc.getValue();
    }

    private void remember(int checksum) {
        int chunk = index.chunks();
        if (chunk == checksums.length) {
            checksums = Arrays.copyOf(checksums, 2 * chunk);
        }
        checksums[chunk] = checksum;
    }

    /**
     * Ends the column and tells its checksums.
     *
     * @return one CRC-32C per chunk, in order
     * @throws IOException if the disk does not take the last chunk
     */
    int[] finishValues() throws IOException {
        flush();
        if (encoder != null) {
            encoder.close();
        }
        return Arrays.copyOf(checksums, index.chunks());
    }

    @Override
    long finish(PendingFile target) throws IOException {
        int stored = (int) Math.max(1, Math.min(length, chunkLength));
        List<ByteBuffer> messages = new ArrayList<>(List.of(
                Messages.growingDataspace(length),
                Messages.datatype(type),
                Messages.fillValue(),
                Messages.chunkedLayout(index.append(target, stored), stored, type.bytes())));
        if (encoder != null) {
            messages.add(Messages.shuffleAndDeflate(type.bytes()));
        }
        return appendHeader(target, messages);
    }
}
