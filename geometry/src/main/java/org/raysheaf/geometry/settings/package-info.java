/**
 * How settings are described and checked: a settings record states its rules once, through {@link
 * org.raysheaf.geometry.settings.Problems}, and its defaults once, through {@link org.raysheaf.geometry.settings.Default}. Reading
 * descriptions from files is the business of the io room; these types know nothing of files. Public.
 */
@NullMarked
package org.raysheaf.geometry.settings;

import org.jspecify.annotations.NullMarked;
