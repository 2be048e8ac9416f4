package org.raysheaf.engine.correct;

/**
 * How well a fit meets numbers of pairs that it did not take one by one.
 *
 * @param of which numbers
 * @param efficienciesAlone χ² per degree of freedom with efficiencies of elements alone
 * @param withGeometry the same with the factors of block geometry
 * @param degreesOfFreedom numbers less the efficiencies' sums among them
 */
public record Goodness(String of, double efficienciesAlone, double withGeometry, int degreesOfFreedom) {
    /** Below it the distribution of a number of pairs is far from normal. */
    private static final double FEW = 5;

    static Goodness of(String what, double[] found, double[] alone, double[] all, int fitted) {
        double sumAlone = 0;
        double sumAll = 0;
        int terms = 0;
        for (int i = 0; i < found.length; i++) {
            if (all[i] > FEW && alone[i] > FEW) {
                sumAlone += (found[i] - alone[i]) * (found[i] - alone[i]) / alone[i];
                sumAll += (found[i] - all[i]) * (found[i] - all[i]) / all[i];
                terms++;
            }
        }
        int freedom = terms - fitted;
        return freedom > 0
                ? new Goodness(what, sumAlone / freedom, sumAll / freedom, freedom)
                : new Goodness(what, Double.NaN, Double.NaN, 0);
    }
}
