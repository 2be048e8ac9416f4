package org.raysheaf.io.records;

/** One step of the flat program that formulas and look-ups are compiled to: fills a column for the first records of a block. */
@FunctionalInterface
interface Op {
    /**
     * Runs the step.
     *
     * @param size number of records
     * @param fates what becomes of each record; a step may set aside records that are still wanted
     */
    void run(int size, int[] fates);
}
