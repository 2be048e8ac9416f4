/** Disk space for what does not fit into memory: {@link org.raysheaf.io.scratch.ScratchFolder}. Public. */
@NullMarked
package org.raysheaf.io.scratch;

import org.jspecify.annotations.NullMarked;
