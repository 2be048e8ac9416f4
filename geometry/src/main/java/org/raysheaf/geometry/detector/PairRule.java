package org.raysheaf.geometry.detector;

import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * Which blocks may form a coincident pair. On a ring, two blocks may when they are at least {@code blocksApart} positions apart, counted the
 * shorter way round and whatever their axial position; blocks of the same panel never may; blocks of different placements always may.
 *
 * @param blocksApart smallest distance round the ring (positions), at least 1
 */
public record PairRule(@Default("1") int blocksApart) {
    public PairRule {
        new Problems("pairs").atLeast("blocks_apart", blocksApart, 1).orThrow();
    }

    /**
     * Whether two blocks may pair.
     *
     * @param a one block
     * @param b the other block
     * @return true if they may; the order does not matter
     */
    public boolean admits(PlacedBlock a, PlacedBlock b) {
        if (a.placement() != b.placement()) {
            return true;
        }
        int around = Math.abs(a.station() - b.station());
        return Math.min(around, a.stations() - around) >= blocksApart;
    }
}
