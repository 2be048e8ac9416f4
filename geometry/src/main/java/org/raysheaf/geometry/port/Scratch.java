package org.raysheaf.geometry.port;

import java.io.IOException;
import java.nio.ByteBuffer;

/** Room on disk for what does not fit into memory. Safe for use by several threads. */
public interface Scratch {
    /**
     * Opens an empty file.
     *
     * @return a file that is gone when it is closed, and when the program ends in whatever way
     * @throws IOException if there is no room, or the folder cannot be written to
     */
    File open() throws IOException;

    /** A file that only this program knows. Reading is safe for use by several threads at once; writing belongs to one. */
    interface File extends AutoCloseable {
        /**
         * Writes bytes behind all others.
         *
         * @param bytes what to write, all that remains in it
         * @return where they begin (bytes from the start of the file)
         * @throws IOException if they cannot be written, for example because the disk is full
         */
        long append(ByteBuffer bytes) throws IOException;

        /**
         * Reads bytes.
         *
         * @param at where they begin (bytes from the start of the file)
         * @param bytes receives as many as there is room for in it
         * @throws IOException if they cannot be read, or there are fewer
         */
        void read(long at, ByteBuffer bytes) throws IOException;

        @Override
        void close() throws IOException;
    }
}
