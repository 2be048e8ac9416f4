package org.raysheaf.engine.ray;

import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.port.Scratch;

/**
 * Where the events of a store may lie.
 *
 * @param memoryBytes the most memory that they may take (bytes); more go to the scratch file, and the result is the same to the last bit
 * @param scratch room on disk, or null if there is none
 */
public record Storage(long memoryBytes, @Nullable Scratch scratch) {
    /** Everything lies in memory, however much it is. */
    public static final Storage MEMORY = new Storage(Long.MAX_VALUE, null);
}
