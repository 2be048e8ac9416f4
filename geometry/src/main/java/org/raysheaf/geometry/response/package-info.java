/**
 * How a crystal answers a photon that comes along a line: its effective area and the mean point of interaction, by ray tracing through all
 * blocks. {@link org.raysheaf.geometry.response.ResponseIntegral} computes them for one direction, {@link
 * org.raysheaf.geometry.response.ElementResponse} tabulates them for a system. Public.
 *
 * <p>Conventions that every type inherits. A direction is the one in which the photon flies, in the frame of the crystal's block (u, v, w), of
 * unit length; w points into the block, so photons that come through the front have w &gt; 0. Interaction points are measured from the
 * crystal's centre, along the same axes. "Interaction" means the first one; what an energy window and scatter between crystals then do to
 * it is a matter of transport.
 */
@NullMarked
package org.raysheaf.geometry.response;

import org.jspecify.annotations.NullMarked;
