package org.raysheaf.geometry.sheaf;

/**
 * Draws samples of everything that a detector system can produce, for where that is too much or endless. A sample is a catalogue: its weights
 * are such that sums over it estimate sums over everything, without bias. Replicates are independent of each other, so that their scatter
 * tells the error. Safe for use by several threads.
 */
@FunctionalInterface
public interface SheafSampler {
    /**
     * Draws a sample.
     *
     * @param replicate which of the independent sequences
     * @param first place in the sequence where the sample begins; samples that follow each other may be averaged
     * @param points how many sheaves are tried for every pair of blocks, best a power of two that divides first
     * @return the sample
     */
    SheafCatalogue draw(int replicate, int first, int points);
}
