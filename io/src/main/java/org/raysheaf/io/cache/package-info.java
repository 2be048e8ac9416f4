/** A folder of results that are dear to make and cheap to keep, each under a digest of all that it depends on. Public. */
@NullMarked
package org.raysheaf.io.cache;

import org.jspecify.annotations.NullMarked;
