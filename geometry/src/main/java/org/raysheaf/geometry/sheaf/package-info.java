/**
 * The one idea of Raysheaf: an event is a sheaf of weighted rays. Whatever was measured, the probability density that an emission at r
 * produced the event is a small sum of weighted rays. {@link org.raysheaf.geometry.sheaf.SheafMaker} makes sheaves from events, {@link
 * org.raysheaf.geometry.sheaf.SheafCatalogue} enumerates all that a system can produce, and {@link
 * org.raysheaf.geometry.sheaf.SheafBundle} holds them in memory. Étendue is conserved along a ray, so there is no distance factor
 * anywhere. Public.
 */
@NullMarked
package org.raysheaf.geometry.sheaf;

import org.jspecify.annotations.NullMarked;
