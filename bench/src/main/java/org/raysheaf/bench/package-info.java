/**
 * Benchmarks of the hot paths, compiled by the build and run by hand.
 *
 * <p>Each benchmark has a baseline beside it, and its sizes are parameters.
 */
@NullMarked
package org.raysheaf.bench;

import org.jspecify.annotations.NullMarked;
