/**
 * Results as JSON, for people and programs that read on: {@link org.raysheaf.io.result.ResultFile}. Public.
 *
 * <p>Keys are spelled as in descriptions ({@link org.raysheaf.io.description.KeyName}), so that settings look the same going in and coming
 * out, units included.
 */
@NullMarked
package org.raysheaf.io.result;

import org.jspecify.annotations.NullMarked;
