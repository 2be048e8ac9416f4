package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.util.Arrays;

/** Puts the chunks of a dataset of several dimensions together, row by row. */
final class ChunkGather {
    private final ChunkSource chunks;
    private final long[] shape;
    private final int elementBytes;
    private final ByteBuffer whole;

    private ChunkGather(ChunkSource chunks, long[] shape, int elementBytes, ByteBuffer whole) {
        this.chunks = chunks;
        this.shape = shape;
        this.elementBytes = elementBytes;
        this.whole = whole;
    }

    /**
     * Reads all chunks. Memory is taken only after the first chunk has proved sound.
     *
     * @param chunks the chunks
     * @param shape shape of the dataset, two dimensions or more
     * @param elementBytes size of a value (bytes)
     * @param count number of values
     * @return the values in one piece
     * @throws Hdf5Exception if a chunk is missing, out of place or damaged, or the values exceed an array
     * @throws IOException if the file cannot be read
     */
    static Segments whole(ChunkSource chunks, long[] shape, int elementBytes, int count) throws IOException {
        long bytes = (long) count * elementBytes;
        if (bytes > Integer.MAX_VALUE - 8) {
            throw chunks.damaged("expected at most 2 GiB in chunks of several dimensions, found " + bytes + " bytes");
        }
        if (count == 0) {
            return Segments.of(new byte[0], 0);
        }
        ByteBuffer chunk = chunks.next("a first chunk");
        byte[] all = new byte[(int) bytes];
        ChunkGather gather = new ChunkGather(chunks, shape, elementBytes, ByteBuffer.wrap(all));
        gather.place(chunk);
        for (long left = gather.chunksExpected() - 1; left > 0; left--) {
            gather.place(chunks.next(left + " more chunks"));
        }
        return Segments.of(all, bytes);
    }

    private long chunksExpected() {
        long expected = 1;
        for (int axis = 0; axis < shape.length; axis++) {
            expected *= (shape[axis] - 1) / chunks.chunkShape()[axis] + 1;
        }
        return expected;
    }

    private void place(ByteBuffer chunk) throws Hdf5Exception {
        long[] offset = chunks.offset();
        for (int axis = 0; axis < shape.length; axis++) {
            boolean aligned = offset[axis] >= 0 && offset[axis] % chunks.chunkShape()[axis] == 0;
            if (!aligned || offset[axis] >= shape[axis]) {
                throw chunks.damaged("expected a chunk within " + Arrays.toString(shape) + ", found one at "
                        + Arrays.toString(offset));
            }
        }
        copy(chunk, 0, 0, 0);
    }

    /** Copies what lies behind one index along each of the axes before. */
    private void copy(ByteBuffer chunk, int axis, long from, long to) {
        long[] extent = chunks.chunkShape();
        long first = chunks.offset()[axis];
        long n = Math.min(extent[axis], shape[axis] - first);
        long source = from * extent[axis];
        long target = to * shape[axis] + first;
        if (axis == shape.length - 1) {
            int bytes = (int) n * elementBytes;
            whole.put((int) target * elementBytes, chunk, (int) source * elementBytes, bytes);
            return;
        }
        for (long i = 0; i < n; i++) {
            copy(chunk, axis + 1, source + i, target + i);
        }
    }
}
