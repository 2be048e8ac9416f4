/** Proofs that take several rooms at once: from a simulated acquisition to becquerels per millilitre. */
@NullMarked
package org.raysheaf.app.proof;

import org.jspecify.annotations.NullMarked;
