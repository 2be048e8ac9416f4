/**
 * Convex solids with exact chords, and their placement. {@link org.raysheaf.geometry.solid.Solid} says what every solid
 * can do, {@link org.raysheaf.geometry.solid.Shape} lists the kinds that a description can hold, {@link
 * org.raysheaf.geometry.solid.Placed} puts one into the world.
 *
 * <p>Conventions that every method inherits: lengths in mm; a solid's own frame has its origin at the solid's centre
 * and, where there is an axis, the axis along z. A line is o + t · d; its direction d may have any length, so a
 * parameter t times |d| is a distance. Solids are immutable and safe for use by several threads. Public.
 */
@NullMarked
package org.raysheaf.geometry.solid;

import org.jspecify.annotations.NullMarked;
