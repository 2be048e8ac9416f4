package org.raysheaf.engine.ray;

import java.io.IOException;
import org.raysheaf.geometry.event.EventTally;

/** Thrown when nothing of a list is left to estimate from: an image of no events would be 0/0 in every voxel. */
public final class NoUsableEventsException extends IOException {
    private static final long serialVersionUID = 1L;

    private final transient EventTally tally;

    /**
     * Makes the exception.
     *
     * @param tally what became of the events; it counts some as used if only the odd or the even ones were wanted
     */
    public NoUsableEventsException(EventTally tally) {
        super("expected at least one usable event, found none among " + tally.read() + " read");
        this.tally = tally;
    }

    /**
     * What became of the events.
     *
     * @return the tally, shared
     */
    public EventTally tally() {
        return tally;
    }
}
