package org.raysheaf.io.records;

import java.io.IOException;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import java.util.Set;

/** Reads the records of data files, one file after another, into the columns of a block. One thread. */
interface RecordReader extends AutoCloseable {
    /**
     * Opens the next file; the one before is closed. What marks in the stream have said so far goes on.
     *
     * @param file the file
     * @throws IOException if it cannot be read or is not of the format
     */
    void open(Path file) throws IOException;

    /** The block that is filled; it has its columns as soon as the first file is open, and keeps them. */
    FieldBlock block();

    /**
     * Fills the block with the next records.
     *
     * @param most the most records to read, at least 1
     * @return false at the end of the file, with an empty block
     * @throws IOException if the file cannot be read, or damage ends the import
     */
    boolean next(int most) throws IOException;

    /** Bytes of the file that have been read so far. */
    long position();

    /** Records that are no events, by type. */
    Map<String, Long> marks();

    /** Fields that the reader itself uses. */
    default Set<String> used() {
        return Set.of();
    }

    /** Names of what the open file holds and no field reads. */
    List<String> unread();

    @Override
    void close() throws IOException;
}
