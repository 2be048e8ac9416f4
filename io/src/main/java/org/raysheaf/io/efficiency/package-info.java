/** Files with the efficiencies of the elements of a system. Public. */
@NullMarked
package org.raysheaf.io.efficiency;

import org.jspecify.annotations.NullMarked;
