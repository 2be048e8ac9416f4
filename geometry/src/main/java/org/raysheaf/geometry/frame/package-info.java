/**
 * Where things are: vectors, rigid poses, voxel grids and images on them. Read {@link org.raysheaf.geometry.frame.Grid} first. Public.
 *
 * <p>Conventions that every method inherits: lengths in mm, angles in radians, a right-handed frame with its origin at the centre of
 * the field of view and +z along the detector's axis. Poses are active and map local to world coordinates.
 */
@NullMarked
package org.raysheaf.geometry.frame;

import org.jspecify.annotations.NullMarked;
