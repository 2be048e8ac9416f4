package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import org.jspecify.annotations.Nullable;

/** The bytes of a dataset's values as they are stored, filters undone, from first to last. Not safe for use by several threads. */
public final class ValueBytes {
    private final FileBytes file;
    private final String place;
    private final Segments segments;
    private @Nullable ByteBuffer segment;

    ValueBytes(FileBytes file, String place, Segments segments) {
        this.file = file;
        this.place = place;
        this.segments = segments;
    }

    /**
     * Reads the next bytes.
     *
     * @param into receives them
     * @param offset where the first goes
     * @param length how many
     * @throws Hdf5Exception if the data are damaged, or end before
     * @throws IOException if the file cannot be read
     */
    public void read(byte[] into, int offset, int length) throws IOException {
        int done = 0;
        while (done < length) {
            ByteBuffer current = segment;
            if (current == null || !current.hasRemaining()) {
                current = segments.next();
                segment = current;
                if (current == null) {
                    throw file.damaged(place, "expected " + (length - done) + " more bytes of values, found the end");
                }
            }
            int piece = Math.min(length - done, current.remaining());
            current.get(into, offset + done, piece);
            done += piece;
        }
    }
}
