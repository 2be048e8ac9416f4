/**
 * Detectors and subjects that move while a list is taken. A {@link org.raysheaf.geometry.motion.Motion} says where the detector stood
 * against the image at any time; {@link org.raysheaf.geometry.motion.MovingSheaves} turns the rays of every event with it, {@link
 * org.raysheaf.geometry.motion.MovingCatalogue} those of everything that could have been recorded. Nothing downstream knows of motion.
 * Public.
 */
@NullMarked
package org.raysheaf.geometry.motion;

import org.jspecify.annotations.NullMarked;
