package org.raysheaf.transport;

import org.raysheaf.geometry.event.ListHeader;

/**
 * What came of a simulated acquisition.
 *
 * @param header the list's header; if the acquisition stopped early, its duration ends with the last event
 * @param pairs pairs of photons emitted during live time
 * @param events pairs recorded
 */
public record Simulated(ListHeader header, long pairs, long events) {}
