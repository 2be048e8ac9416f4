/**
 * Photons through phantom and detectors, the readout of what they leave, and the pairing of singles. Read {@link
 * org.raysheaf.transport.Acquisition} for what a description can ask and {@link org.raysheaf.transport.Simulation} for how it is done.
 *
 * <pre>
 * in slices of time, side by side, each with a random stream of its own:
 *
 *   DecayTimes ── when ──┐
 *   Activity ──── where ─┼─ Emission ── Photon ── Flight ── Deposits ── PulseMaker ── Pulses
 *   Lutetium ────────────┘  (range, angle,        (through World:       (per channel, with all
 *                            gamma rays)           PhotonTable,          random numbers of the
 *                                                  ComptonScatter)       readout drawn)
 *
 * then in order of time, slice after slice (InOrder), without random numbers:
 *
 *   Pulses ── Channels ── TimeOrder ── Pairer ── EventSink
 *             (pile-up,   (sorts what   (windows,
 *              dead time,  blur put out  delayed
 *              singles)    of order)     pairs)
 * </pre>
 *
 * <p>SinglesPairing runs the last two steps on a list of singles. This room knows geometry only and never opens files. Random streams
 * belong to slices of the acquisition, never to threads, so a seed gives the same events on any number of threads.
 */
@NullMarked
package org.raysheaf.transport;

import org.jspecify.annotations.NullMarked;
