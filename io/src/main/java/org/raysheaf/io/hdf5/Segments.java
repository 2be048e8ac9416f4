package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import org.jspecify.annotations.Nullable;

/** The bytes of a dataset's values, piece by piece in order. */
interface Segments {
    /**
     * The next piece.
     *
     * @return whole values, valid until the next call, or null after the last
     * @throws IOException if it is damaged or cannot be read
     */
    @Nullable
    ByteBuffer next() throws IOException;

    /** Values kept in an array. */
    static Segments of(byte[] bytes, long count) {
        return new Segments() {
            private boolean given;

            @Override
            public @Nullable ByteBuffer next() {
                boolean first = !given && count > 0;
                given = true;
                return first ? ByteBuffer.wrap(bytes, 0, (int) count) : null;
            }
        };
    }

    /** Values side by side in the file. */
    static Segments contiguous(FileBytes file, String place, long address, long count) {
        int pieceBytes = 1 << 20; // a multiple of every value size
        ByteBuffer piece = ByteBuffer.allocateDirect((int) Math.min(pieceBytes, count));
        return new Segments() {
            private long done;

            @Override
            public @Nullable ByteBuffer next() throws IOException {
                if (done == count) {
                    return null;
                }
                piece.clear().limit((int) Math.min(pieceBytes, count - done));
                file.fill(piece, address + done, place);
                done += piece.position();
                return piece.flip();
            }
        };
    }
}
