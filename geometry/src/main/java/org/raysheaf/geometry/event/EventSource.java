package org.raysheaf.geometry.event;

import java.io.IOException;
import java.util.Set;

/** A list of events that can be read from its start as often as needed, block by block; it may be larger than memory. */
public interface EventSource {
    /**
     * What the list says about itself.
     *
     * @return the header
     */
    ListHeader header();

    /**
     * The attributes that every event of the list has.
     *
     * @return the set of columns
     */
    Set<Attribute> attributes();

    /**
     * The number of events.
     *
     * @return how many events a full read gives
     */
    long events();

    /**
     * Starts reading at the first event.
     *
     * @return a cursor; the caller closes it
     * @throws IOException if the list cannot be read
     */
    Cursor open() throws IOException;

    /** A position in the list. Not safe for use by several threads. */
    interface Cursor extends AutoCloseable {
        /**
         * Fills a block with the next events. Only columns that the block has are read.
         *
         * @param block receives the events; its size is set to the number read, 0 at the end
         * @return true if at least one event was read
         * @throws IOException if the list is damaged or cannot be read; nothing of the block may then be used
         */
        boolean next(EventBlock block) throws IOException;

        @Override
        void close() throws IOException;
    }
}
