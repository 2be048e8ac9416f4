/**
 * What a list holds, seen as a whole: {@link org.raysheaf.io.overview.ListOverview} looks at events as they pass, {@link
 * org.raysheaf.io.overview.ListFigures} are its numbers, {@link org.raysheaf.io.overview.ListWarnings} says what will hurt and how to mend it. Energies
 * in keV, times in ps and s. Public.
 */
@NullMarked
package org.raysheaf.io.overview;

import org.jspecify.annotations.NullMarked;
