package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import org.jspecify.annotations.Nullable;

/** The chunks of a one-dimensional dataset as a stream, without the filling of the last one. A missing chunk means damage. */
final class ChunkSegments implements Segments {
    private final ChunkSource chunks;
    private final int elementBytes;
    private final long count;
    private long done;

    ChunkSegments(ChunkSource chunks, int elementBytes, long count) {
        this.chunks = chunks;
        this.elementBytes = elementBytes;
        this.count = count;
    }

    @Override
    public @Nullable ByteBuffer next() throws IOException {
        if (done == count) {
            return null;
        }
        ByteBuffer chunk = chunks.next("a chunk at index " + done + " of " + count);
        if (chunks.offset()[0] != done) {
            throw chunks.damaged("expected a chunk at index " + done + ", found one at " + chunks.offset()[0]);
        }
        long values = Math.min(chunks.chunkShape()[0], count - done);
        done += values;
        return chunk.limit((int) values * elementBytes);
    }
}
