/**
 * Photons through phantom and detectors, the readout of what they leave, and the pairing of singles. Read {@link
 * org.raysheaf.transport.Acquisition} for what a description can ask and {@link org.raysheaf.transport.Simulation} for
 * how it is done.
 *
 * <p>So far emission is ideal: pairs are emitted exactly back to back from where the decay was, nothing scatters, and
 * only crystals stop photons. The way of a decay is
 *
 * <pre>
 * DecayTimes ── when ──┐
 *                      ├─ Photon, Photon ── CrystalWalk ── PairReadout ── EventSink
 * ActiveParts ─ where ─┘                    (each photon)
 * </pre>
 *
 * <p>This room knows geometry only and never opens files. Random streams belong to slices of the acquisition, never to
 * threads, so a seed gives the same events on any number of threads.
 */
@NullMarked
package org.raysheaf.transport;

import org.jspecify.annotations.NullMarked;
