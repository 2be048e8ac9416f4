/**
 * The command line and its wiring: one thin class per verb.
 *
 * <p>The only room that knows all others. A verb reads its options, calls the rooms that do the work, and turns the outcome
 * into an exit code. Start with {@link org.raysheaf.app.Raysheaf}.
 */
@NullMarked
package org.raysheaf.app;

import org.jspecify.annotations.NullMarked;
