/**
 * Detector systems: how they are described, where their crystals are, and what a ray meets on its way through them. Read {@link
 * org.raysheaf.geometry.detector.SystemDescription} for the files, {@link org.raysheaf.geometry.detector.DetectorSystem} for the thing itself.
 * Public.
 *
 * <p>Conventions that every type inherits. A block has a frame of its own: origin at the centre of its front face, u along its columns, v
 * along its rows, w pointing from the front face into the block, away from the field of view. On a ring v is the world's z and u runs
 * counter-clockwise. Elements (crystals) are numbered through the whole system, see {@link
 * org.raysheaf.geometry.detector.DetectorSystem}.
 *
 * <p>{@link org.raysheaf.geometry.detector.BlockKind} and {@link org.raysheaf.geometry.detector.Placement} are sealed: a monolithic block or
 * a collimated head will be a new permitted record, and the compiler then names every place that must learn about it.
 */
@NullMarked
package org.raysheaf.geometry.detector;

import org.jspecify.annotations.NullMarked;
