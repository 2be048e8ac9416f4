package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.util.List;
import java.util.zip.CRC32C;

/**
 * A dataset written in one go, its values side by side in the file. Attribute {@code crc32c} holds the CRC-32C of their little-endian
 * bytes. Made by {@link GroupWriter}; only attributes can still be added. Not safe for use by several threads.
 */
public final class ArrayWriter extends NodeWriter {
    /** Name of the attribute that holds the checksum. */
    static final String CHECKSUM = "crc32c";

    private static final int PIECE_BYTES = 1 << 20;

    private final ByteBuffer typeMessage;
    private final long[] shape;
    private final long address;
    private final long bytes;

    /** Puts a run of the caller's values into an empty buffer. */
    interface Run {
        void put(ByteBuffer buffer, int from, int count);
    }

    ArrayWriter(PendingFile file, ByteBuffer typeMessage, int elementBytes, int count, Run run, long... shape)
            throws IOException {
        this.typeMessage = typeMessage;
        this.shape = shape.clone();
        this.bytes = (long) count * elementBytes;
        this.address = file.end();
        CRC32C crc = new CRC32C();
        int most = PIECE_BYTES / elementBytes;
        ByteBuffer piece = Messages.buffer(Math.min(most, Math.max(1, count)) * elementBytes);
        for (int from = 0; from < count; from += most) {
            int n = Math.min(most, count - from);
            run.put(piece.clear(), from, n);
            piece.position(0).limit(n * elementBytes);
            crc.update(piece.duplicate());
            file.append(piece);
        }
        attribute(CHECKSUM, crc.getValue());
    }

    @Override
    long finish(PendingFile file) throws IOException {
        return appendHeader(
                file,
                List.of(
                        Messages.dataspace(shape),
                        typeMessage,
                        Messages.fillValue(),
                        Messages.contiguousLayout(address, bytes)));
    }
}
