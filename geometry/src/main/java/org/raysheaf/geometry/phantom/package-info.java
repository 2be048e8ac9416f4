/**
 * Phantoms: solids filled with materials and activity. {@link org.raysheaf.geometry.phantom.PhantomDescription} is what
 * a file says, {@link org.raysheaf.geometry.phantom.Phantom} answers questions about it. Public.
 *
 * <p>Conventions that every type inherits: where parts overlap, the later part replaces the earlier ones, material and
 * activity alike. Concentrations are kBq/mL in descriptions and Bq/mL everywhere else; 1 mL is 1000 mm³. Activities
 * hold at the start of an acquisition.
 */
@NullMarked
package org.raysheaf.geometry.phantom;

import org.jspecify.annotations.NullMarked;
