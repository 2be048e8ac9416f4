package org.raysheaf.engine.ray;

/** What else than the activity on its line could have caused each event: b/c of the model, randoms plus scatter. */
@FunctionalInterface
public interface EventBackground {
    /** No background anywhere. */
    EventBackground NONE = event -> 0;

    /**
     * Background of one event.
     *
     * @param event number of the event among those the sheaf maker used, from 0, in the order of the list
     * @return b/c (unit of the image times mm; if rays are timed, unit of the image), at least 0
     */
    float of(long event);
}
