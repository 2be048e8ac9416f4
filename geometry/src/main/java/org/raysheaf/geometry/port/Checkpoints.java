package org.raysheaf.geometry.port;

import java.io.IOException;
import java.util.Optional;

/** Keeps the latest {@link Snapshot} of one computation, so that it can go on after a break. Used by one thread. */
public interface Checkpoints {
    /** Keeps nothing. */
    Checkpoints NONE = new Checkpoints() {
        @Override
        public Optional<Snapshot> latest() {
            return Optional.empty();
        }

        @Override
        public void save(Snapshot snapshot) {
            // Nothing is kept.
        }
    };

    /**
     * What was saved last.
     *
     * @return the snapshot, or nothing if the computation begins
     * @throws IOException if there is one that cannot be read
     */
    Optional<Snapshot> latest() throws IOException;

    /**
     * Keeps a snapshot in place of the one before; either the old or the new one is there whatever happens meanwhile.
     *
     * @param snapshot what to keep
     * @throws IOException if it cannot be kept; the one before still is
     */
    void save(Snapshot snapshot) throws IOException;
}
