/**
 * Reserved for geometry studies, which compare variants of a detector system cell by cell and end in a verdict; nothing
 * lives here yet.
 */
@NullMarked
package org.raysheaf.study;

import org.jspecify.annotations.NullMarked;
