package org.raysheaf.geometry.sheaf;

/**
 * Every sheaf that a detector system can produce, each with its étendue, so that the sensitivity of the system is the sum over the
 * catalogue. It comes in numbered parts that can be made in any order and by several threads.
 */
public interface SheafCatalogue {
    /**
     * Rays in every sheaf.
     *
     * @return the count, at least 1
     */
    int raysPerSheaf();

    /**
     * Number of parts.
     *
     * @return the count; parts are numbered from 0
     */
    int parts();

    /**
     * An upper bound for the sheaves of a part, known without making them.
     *
     * @param part the part
     * @return how large a bundle must be to take the part
     */
    int capacity(int part);

    /**
     * Appends all sheaves of a part. Safe for use by several threads, each with a bundle of its own.
     *
     * @param part the part
     * @param out receives the sheaves, weight = étendue / 2π (mm²)
     */
    void fill(int part, SheafBundle out);
}
