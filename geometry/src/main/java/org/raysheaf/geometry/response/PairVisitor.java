package org.raysheaf.geometry.response;

/** Hears of pairs with their lines, one call after another. */
@FunctionalInterface
public interface PairVisitor {
    /**
     * Takes a pair.
     *
     * @param a element of one photon
     * @param b element of the other
     * @param line their line; filled anew for every call
     */
    void pair(int a, int b, LineOfResponse line);
}
