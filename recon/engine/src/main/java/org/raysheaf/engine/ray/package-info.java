/**
 * How rays walk through voxels: the lattice of voxels with its border ({@link org.raysheaf.engine.ray.Lattice}), rays prepared for it
 * ({@link org.raysheaf.engine.ray.Walks}), the projector ({@link org.raysheaf.engine.ray.Joseph}), the order that keeps memory traffic
 * local ({@link org.raysheaf.engine.ray.RayOrder}) and the store of a list's events ({@link org.raysheaf.engine.ray.EventStore}). Read
 * them in that order. Nothing here knows of likelihoods. Public for benchmarks and for other estimators.
 *
 * <p>Conventions that every method inherits: world coordinates in mm; lattice coordinates in voxels, where the grid's voxels have the
 * numbers 1 to n along each axis and 0 and n + 1 are the border. Objects are built by one thread and then read by many; what may be
 * written concurrently says so.
 */
@NullMarked
package org.raysheaf.engine.ray;

import org.jspecify.annotations.NullMarked;
