/**
 * From sheaves to an image: projector kernel, sensitivity, corrections, estimators.
 *
 * <p>This room knows geometry only and never opens files; event sources and scratch space reach it through the ports of
 * {@code org.raysheaf.geometry}. Results do not depend on the number of threads.
 */
@NullMarked
package org.raysheaf.engine;

import org.jspecify.annotations.NullMarked;
