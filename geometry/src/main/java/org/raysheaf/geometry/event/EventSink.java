package org.raysheaf.geometry.event;

import java.io.IOException;

/** Takes events block by block, in order. Not safe for use by several threads. */
public interface EventSink {
    /**
     * Takes the events of a block. The block may be filled again as soon as the call returns.
     *
     * @param block the events; it has every column that the sink was made for
     * @throws IOException if they cannot be stored
     */
    void accept(EventBlock block) throws IOException;
}
