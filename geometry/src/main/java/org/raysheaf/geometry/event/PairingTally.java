package org.raysheaf.geometry.event;

/**
 * What became of singles in pairing: every single read is in exactly one of the first five counts.
 *
 * @param outsideEnergies singles outside the energy window
 * @param alone singles without another one in their window
 * @param crowded singles in a group of more than two that made no pair
 * @param tooClose singles in groups of two whose blocks stand too close to be paired
 * @param paired singles in groups that made at least one pair
 * @param prompts pairs made of singles in one window
 * @param delayed pairs made with the later window; their singles are counted above as what they are there
 */
public record PairingTally(
        long outsideEnergies, long alone, long crowded, long tooClose, long paired, long prompts, long delayed) {
    /**
     * All singles read.
     *
     * @return the sum of the counts of singles
     */
    public long singles() {
        return outsideEnergies + alone + crowded + tooClose + paired;
    }
}
