/** What long work needs to go on after a break: {@link org.raysheaf.io.checkpoint.CheckpointFile}. Public. */
@NullMarked
package org.raysheaf.io.checkpoint;

import org.jspecify.annotations.NullMarked;
