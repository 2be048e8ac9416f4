/**
 * What stands between the counts of a list and becquerels per millilitre, beside the geometry: attenuation, random coincidences, scatter in
 * the object, efficiencies of elements. Each is a {@link org.raysheaf.geometry.response.PairFactor}, which the sensitivity counts with, or a
 * background of each event, see {@link org.raysheaf.engine.correct.Backgrounds}.
 */
@NullMarked
package org.raysheaf.engine.correct;

import org.jspecify.annotations.NullMarked;
