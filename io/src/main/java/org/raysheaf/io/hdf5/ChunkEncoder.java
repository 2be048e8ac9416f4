package org.raysheaf.io.hdf5;

import java.nio.ByteBuffer;
import java.util.zip.Deflater;

/** Turns the values of a chunk into the bytes that are stored: shuffle, then deflate. Owns its work space; not safe for several threads. */
final class ChunkEncoder implements AutoCloseable {
    private final int elementBytes;
    private final Deflater deflater = new Deflater(Deflater.BEST_SPEED);
    private final byte[] raw;
    private final byte[] shuffled;
    private final byte[] stored;

    ChunkEncoder(int elementBytes, int chunkBytes) {
        this.elementBytes = elementBytes;
        raw = new byte[chunkBytes];
        shuffled = new byte[chunkBytes];
        stored = new byte[chunkBytes + chunkBytes / 1000 + 64]; // more than deflate ever needs
    }

    /**
     * Encodes a chunk.
     *
     * @param values its values, all that remain
     * @return the bytes to store, valid until the next call
     */
    ByteBuffer encode(ByteBuffer values) {
        int bytes = values.remaining();
        values.get(raw, 0, bytes);
        int count = bytes / elementBytes;
        for (int place = 0; place < elementBytes; place++) {
            int to = place * count;
            for (int from = place; from < bytes; from += elementBytes) {
                shuffled[to++] = raw[from];
            }
        }
        deflater.reset();
        deflater.setInput(shuffled, 0, bytes);
        deflater.finish();
        int length = 0;
        while (!deflater.finished()) {
            length += deflater.deflate(stored, length, stored.length - length);
        }
        return ByteBuffer.wrap(stored, 0, length);
    }

    @Override
    public void close() {
        deflater.end();
    }
}
