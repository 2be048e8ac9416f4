package org.raysheaf.io.volume;

import org.raysheaf.geometry.frame.Image;

/**
 * What a volume file holds.
 *
 * @param image the values on their grid
 * @param unit the unit of the values, for example {@code kBq/mL}; empty if the file does not say
 */
public record Volume(Image image, String unit) {}
