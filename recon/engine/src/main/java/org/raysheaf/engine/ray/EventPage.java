package org.raysheaf.engine.ray;

import org.jspecify.annotations.Nullable;

/**
 * Some events of an {@link EventStore} that lie in memory one after another. Event e of the store, from first to end − 1, has the walks
 * (e − offset) · raysPerEvent and those after it, and the background at e − offset.
 *
 * @param walks the rays; shared
 * @param background b/c of the events (unit of the image times mm); shared; null if there is none
 * @param offset number of the event that is first in the arrays
 * @param first first event of the page
 * @param end after the last event of the page
 */
@SuppressWarnings("ArrayRecordComponent") // the arrays are the point; nobody compares pages
public record EventPage(Walks walks, float @Nullable [] background, int offset, int first, int end) {}
