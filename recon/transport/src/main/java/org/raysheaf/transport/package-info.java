/**
 * Photons through phantom and detectors, the readout of what they leave, and the pairing of singles.
 *
 * <p>This room knows geometry only and never opens files. Random streams belong to chunks of work, never to threads, so a
 * seed gives the same events on any number of threads.
 */
@NullMarked
package org.raysheaf.transport;

import org.jspecify.annotations.NullMarked;
