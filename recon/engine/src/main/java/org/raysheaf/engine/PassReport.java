package org.raysheaf.engine;

import java.util.ArrayList;
import java.util.List;
import org.raysheaf.geometry.port.Snapshot;

/**
 * What one pass over the events did.
 *
 * @param number of the pass, from 1
 * @param logLikelihood Σ_e ln q_e − Σ_j s_j x_j at the image that the pass started from, up to terms that do not depend on the image
 *     (Σ ln c_e and the expected background). With more than one subset the image moves during the pass and each subset adds its part
 *     at the image that it found, so the value only shows the trend
 * @param penalty β R(x) of the prior at the image that the pass started from; 0 without a prior
 * @param heldOut the log-likelihood of the events that were kept out of the updates, at the image after the pass; NaN if there are none
 * @param expectedEvents Σ_j s_j x_j after the pass; without background equal to the events used, up to rounding
 * @param seconds how long the pass took by the clock
 */
public record PassReport(
        int number, double logLikelihood, double penalty, double heldOut, double expectedEvents, double seconds) {
    private static final String KEY = "passes";
    private static final int FIELDS = 5;

    /**
     * What the pass set out from: the log-likelihood less the penalty.
     *
     * @return L − β R, with the restriction that {@code logLikelihood} has
     */
    public double objective() {
        return logLikelihood - penalty;
    }

    /** Writes reports down, in order. */
    static void save(List<PassReport> passes, Snapshot snapshot) {
        double[] numbers = new double[FIELDS * passes.size()];
        for (int i = 0; i < passes.size(); i++) {
            numbers[FIELDS * i] = passes.get(i).logLikelihood;
            numbers[FIELDS * i + 1] = passes.get(i).penalty;
            numbers[FIELDS * i + 2] = passes.get(i).heldOut;
            numbers[FIELDS * i + 3] = passes.get(i).expectedEvents;
            numbers[FIELDS * i + 4] = passes.get(i).seconds;
        }
        snapshot.put(KEY, numbers);
    }

    /** Reads them back. */
    static List<PassReport> restore(Snapshot snapshot) {
        double[] numbers = snapshot.numbers(KEY);
        List<PassReport> passes = new ArrayList<>();
        for (int i = 0; i < numbers.length / FIELDS; i++) {
            int at = FIELDS * i;
            passes.add(new PassReport(
                    i + 1, numbers[at], numbers[at + 1], numbers[at + 2], numbers[at + 3], numbers[at + 4]));
        }
        return passes;
    }
}
