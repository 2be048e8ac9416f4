package org.raysheaf.engine;

import java.util.List;
import java.util.Optional;

/** When to stop before all passes are made, and which pass to keep, as settings. Looks at nothing but the curves of the passes. */
public sealed interface Stop permits ChangeStop, HeldOutStop {
    /**
     * Every how-manieth event is kept out of the updates and only asked how well the image explains it.
     *
     * @return k for the k-th, 2k-th, 3k-th … event used; 0 if none is kept out
     */
    default int heldOutEvery() {
        return 0;
    }

    /**
     * Whether the passes so far are enough.
     *
     * @param passes made so far, in order, at least one
     * @return the reason in words if they are, or nothing
     */
    Optional<String> reached(List<PassReport> passes);

    /**
     * Which pass's image is the best so far.
     *
     * @param passes made so far, in order, at least one
     * @return the number of the pass, from 1
     */
    default int best(List<PassReport> passes) {
        return passes.size();
    }
}
