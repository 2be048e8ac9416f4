/**
 * Every byte that comes in or goes out: lists of events, volumes, descriptions, pictures.
 *
 * <p>This room implements the ports declared in {@code org.raysheaf.geometry} and turns descriptions into the records that
 * own the settings. Files speak mm, keV, ps, MBq, kBq/mL and degrees, named in each field; conversion to the units used
 * inside happens here and nowhere else.
 */
@NullMarked
package org.raysheaf.io;

import org.jspecify.annotations.NullMarked;
