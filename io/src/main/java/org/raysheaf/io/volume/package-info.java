/**
 * Volumes as files: NIfTI-1 and HDF5, read and written. Read {@link org.raysheaf.io.volume.VolumeFile} first. Public: it, {@link
 * org.raysheaf.io.volume.Volume} and {@link org.raysheaf.io.volume.VolumeException}; the rest is internal.
 *
 * <p>In files x runs fastest, in memory z does ({@link org.raysheaf.geometry.frame.Grid}); the change of order happens here and nowhere
 * else. Lengths in files are mm.
 */
@NullMarked
package org.raysheaf.io.volume;

import org.jspecify.annotations.NullMarked;
