/**
 * The ground floor: what the world of a measurement is made of.
 *
 * <p>Frames and grids, solids and matter, detectors, events, and the sheaves of weighted rays that events become. It imports
 * none of the other rooms. The small ports through which the other rooms reach files (event source, event sink, scratch
 * space, progress listener) are declared here and implemented in {@code org.raysheaf.io}.
 *
 * <p>Conventions that all rooms inherit: lengths in mm, energies in keV, event times in ps, angles in radians, activity
 * concentrations in Bq/mL. Right-handed frame, origin at the centre of the field of view, +z along the axis.
 */
@NullMarked
package org.raysheaf.geometry;

import org.jspecify.annotations.NullMarked;
