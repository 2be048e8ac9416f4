/**
 * Small ports through which rooms that never open files or terminals reach the outside: they live here, other rooms implement them. Public.
 */
@NullMarked
package org.raysheaf.geometry.port;

import org.jspecify.annotations.NullMarked;
