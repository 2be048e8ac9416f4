package org.raysheaf.geometry.event;

import java.util.List;

/**
 * How the pairs of a list were made of singles. Corrections for randoms and losses need it.
 *
 * @param settings windows, energies, what became of crowds
 * @param tally what became of the singles
 * @param singles singles within the energy window in each element, in the order of the elements; empty if that is not known
 */
public record PairingRecord(Pairing settings, PairingTally tally, List<Long> singles) {
    public PairingRecord {
        singles = List.copyOf(singles);
    }
}
