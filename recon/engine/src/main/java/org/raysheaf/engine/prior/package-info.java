/**
 * What is believed of an image before any event is counted: that neighbouring voxels are alike. {@link Prior} says how, {@link Penalty}
 * computes it for images on a lattice.
 *
 * <p>The penalty of an image x is
 *
 * <pre>
 * β R(x),   R(x) = Σ_{j &lt; k} w_jk ψ(x_j, x_k)
 * </pre>
 *
 * <p>over the pairs of the 26 neighbours of each voxel of which both may hold activity, with w_jk = (smallest voxel pitch) / (distance of the
 * two centres). Every ψ is in the unit of the image and has the curvature 1/x̄ where both values are the typical activity x̄ (Bq/mL).
 *
 * <p><b>Strength.</b> β = strength · s̄, with the mean sensitivity s̄ of the voxels that may hold activity (counts per Bq/mL). So the strength
 * is a plain number: by how much one neighbour pulls at a voxel of typical activity, in parts of the pull of its events (whose curvature in
 * expectation maximisation is s/x). Twice the scan time or the sensitivity doubles likelihood and penalty alike; so does twice the activity,
 * since x̄ follows it. The same strength therefore smooths about as much at any count level; it is felt in voxels, not in mm.
 */
@NullMarked
package org.raysheaf.engine.prior;

import org.jspecify.annotations.NullMarked;
