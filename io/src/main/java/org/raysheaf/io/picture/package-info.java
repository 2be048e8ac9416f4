/**
 * Pictures as PNG files: {@link org.raysheaf.io.picture.SlicePicture} of a volume, {@link org.raysheaf.io.picture.DetectorPicture} of a
 * detector. Both and {@link org.raysheaf.io.picture.BoxOutline} are public; the rest is internal.
 *
 * <p>All panels of a picture have one scale in mm. Axes are named by sign and letter of the world frame; there are no anatomical
 * letters, since nothing here knows how the subject lay. Text needs a font: where Java finds none, writing fails and says so.
 */
@NullMarked
package org.raysheaf.io.picture;

import org.jspecify.annotations.NullMarked;
