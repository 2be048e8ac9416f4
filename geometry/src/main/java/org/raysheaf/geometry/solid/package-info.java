/** Convex solids with exact chord lengths, and their placement. Public. */
@NullMarked
package org.raysheaf.geometry.solid;

import org.jspecify.annotations.NullMarked;
