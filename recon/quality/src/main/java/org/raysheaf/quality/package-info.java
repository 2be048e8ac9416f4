/**
 * What an image is worth: figures of merit, bootstrap, observers, information.
 *
 * <p>This room knows geometry and the engine, and never opens files.
 */
@NullMarked
package org.raysheaf.quality;

import org.jspecify.annotations.NullMarked;
