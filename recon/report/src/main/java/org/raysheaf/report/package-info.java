/**
 * Reserved for the pages people show, drawn from the figures of {@code org.raysheaf.quality}; nothing lives here yet.
 */
@NullMarked
package org.raysheaf.report;

import org.jspecify.annotations.NullMarked;
