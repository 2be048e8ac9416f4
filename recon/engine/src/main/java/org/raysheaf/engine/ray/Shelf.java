package org.raysheaf.engine.ray;

import java.io.IOException;
import java.util.function.Consumer;
import org.jspecify.annotations.Nullable;

/**
 * Where sorted events are put while a list is loaded, and where they are found afterwards. They come in segments: runs of events of one
 * subset, each sorted for itself. Putting belongs to one thread; reading is safe for use by several.
 */
interface Shelf extends AutoCloseable {
    /**
     * Takes a segment.
     *
     * @param walks the rays of sorted events; shared, not written any more
     * @param background b/c of these events, or null if there is none
     * @param first the segment's first event in these arrays
     * @param events events of the segment
     * @return number of the segment, from 0
     * @throws IOException if there is no room for it
     */
    int put(Walks walks, float @Nullable [] background, int first, int events) throws IOException;

    /**
     * Brings a part of a segment before a visitor, in as many pages as it takes.
     *
     * @param segment number of the segment
     * @param from first event, counted within the segment
     * @param to after the last event
     * @param number number that the segment's first event has in the store
     * @param visitor may use a page only until it returns
     */
    void each(int segment, int from, int to, int number, Consumer<EventPage> visitor);

    @Override
    void close() throws IOException;
}
