/**
 * What spreads activity before a ray sees it: positrons that travel, photons that do not part in opposite directions, crystals that are wider
 * than a line. An operator on the image, see {@link org.raysheaf.engine.blur.Blur}, applied once per update and never per event.
 */
@NullMarked
package org.raysheaf.engine.blur;

import org.jspecify.annotations.NullMarked;
