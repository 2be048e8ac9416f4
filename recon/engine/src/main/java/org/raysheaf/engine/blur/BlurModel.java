package org.raysheaf.engine.blur;

import org.jspecify.annotations.Nullable;

/**
 * What blurs an image: a kernel that is the same everywhere, and a Gaussian whose width changes from place to place. Immutable.
 *
 * @param kernel positron range, a measured kernel, or both
 * @param chords what detectors at a distance add, or null for nothing
 */
public record BlurModel(Mixture kernel, @Nullable ChordWidths chords) {}
