package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import org.jspecify.annotations.Nullable;

/** The chunks of a one-dimensional dataset in order, filters undone, without the filling of the last one. A missing chunk means damage. */
final class ChunkSegments implements Segments {
    private final FileBytes file;
    private final String place;
    private final Filters filters;
    private final int elementBytes;
    private final int chunkBytes;
    private final long chunkLength;
    private final long count;
    private final ChunkWalk walk;
    private @Nullable ByteBuffer plain;
    private long done;

    ChunkSegments(FileBytes file, String place, Layout layout, Filters filters, int elementBytes, long count)
            throws IOException {
        this.file = file;
        this.place = place;
        this.filters = filters;
        this.elementBytes = elementBytes;
        this.chunkBytes = (int) layout.bytes();
        this.chunkLength = layout.chunkShape()[0];
        this.count = count;
        this.walk = new ChunkWalk(file, place, layout.address(), 1);
    }

    @Override
    public @Nullable ByteBuffer next() throws IOException {
        if (done == count) {
            return null;
        }
        if (!walk.next() || walk.offset()[0] != done) {
            throw file.damaged(place, "expected a chunk at index " + done + " of " + count + ", found none");
        }
        ByteBuffer chunk = filters.isEmpty() ? readPlain() : readFiltered();
        long values = Math.min(chunkLength, count - done);
        done += values;
        return chunk.limit((int) values * elementBytes);
    }

    private ByteBuffer readPlain() throws IOException {
        if (walk.size() != chunkBytes) {
            throw file.damaged(
                    place, "expected a chunk of " + chunkBytes + " bytes at index " + done + ", found " + walk.size());
        }
        file.requireInside(walk.address(), chunkBytes, place);
        if (plain == null) {
            plain = ByteBuffer.allocateDirect(chunkBytes);
        }
        plain.clear();
        file.fill(plain, walk.address(), place);
        return plain.flip();
    }

    private ByteBuffer readFiltered() throws IOException {
        long largest = chunkBytes + chunkBytes / 100L + 1024; // no filter makes data larger than that
        if (walk.size() > largest) {
            throw file.damaged(
                    place,
                    "expected a chunk of at most " + largest + " bytes at index " + done + ", found " + walk.size());
        }
        file.requireInside(walk.address(), walk.size(), place);
        byte[] stored = new byte[(int) walk.size()];
        file.fill(ByteBuffer.wrap(stored), walk.address(), place);
        String chunk = place + ", chunk at index " + done;
        return ByteBuffer.wrap(filters.decode(stored, walk.leftOut(), chunkBytes, file, chunk));
    }
}
