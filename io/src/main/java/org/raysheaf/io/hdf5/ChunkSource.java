package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import org.jspecify.annotations.Nullable;

/** Gives the chunks of a dataset in order, filters undone. Not safe for use by several threads. */
final class ChunkSource {
    private final FileBytes file;
    private final String place;
    private final Filters filters;
    private final long[] chunkShape;
    private final int chunkBytes;
    private final ChunkWalk walk;
    private @Nullable ByteBuffer plain;

    ChunkSource(FileBytes file, String place, Layout layout, Filters filters, int rank) throws IOException {
        this.file = file;
        this.place = place;
        this.filters = filters;
        this.chunkShape = layout.chunkShape();
        this.chunkBytes = (int) layout.bytes();
        this.walk = new ChunkWalk(file, place, layout.address(), rank);
    }

    /** Extent of a chunk along every axis. */
    long[] chunkShape() {
        return chunkShape;
    }

    /**
     * The next chunk.
     *
     * @param expected what is expected, for messages
     * @return its bytes, filling included, valid until the next call
     * @throws Hdf5Exception if there is none, or it is damaged
     * @throws IOException if the file cannot be read
     */
    ByteBuffer next(String expected) throws IOException {
        if (!walk.next()) {
            throw damaged("expected " + expected + ", found no more chunks");
        }
        return filters.isEmpty() ? readPlain() : readFiltered();
    }

    /** Index of the last chunk's first value along every axis. */
    long[] offset() {
        return walk.offset();
    }

    Hdf5Exception damaged(String trouble) {
        return file.damaged(place, trouble);
    }

    private ByteBuffer readPlain() throws IOException {
        if (walk.size() != chunkBytes) {
            throw damaged("expected chunks of " + chunkBytes + " bytes, found one of " + walk.size());
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
            throw damaged("expected a chunk of at most " + largest + " bytes, found one of " + walk.size());
        }
        file.requireInside(walk.address(), walk.size(), place);
        byte[] stored = new byte[(int) walk.size()];
        file.fill(ByteBuffer.wrap(stored), walk.address(), place);
        return ByteBuffer.wrap(filters.decode(stored, walk.leftOut(), chunkBytes, file, place));
    }
}
