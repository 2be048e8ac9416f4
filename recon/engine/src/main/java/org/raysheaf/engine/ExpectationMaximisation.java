package org.raysheaf.engine;

import org.raysheaf.geometry.port.Snapshot;

/**
 * Expectation maximisation: MLEM with one subset, OSEM with several. One update is
 *
 * <pre>
 * x_j ← x_j / (φ s_j) · Σ_e a_ej / q_e
 * </pre>
 *
 * <p>over the events e of one subset, with the names of {@link Likelihood}. EM: Shepp &amp; Vardi (1982), Lange &amp; Carson (1984);
 * ordered subsets: Hudson &amp; Larkin (1994).
 *
 * <p>Difference from the publications: events are not binned, and values within the support are kept above 10⁻³⁰, since denormal numbers
 * would slow the projector down many times.
 */
final class ExpectationMaximisation implements UpdateRule {
    /** Small enough to be nothing, large enough that its products with weights are ordinary numbers. */
    private static final float FLOOR = 1e-30f;

    private static final String IMAGE = "image";

    private final Likelihood likelihood;
    private final float[] image;
    private double expectedEvents;

    ExpectationMaximisation(Likelihood likelihood, float[] start) {
        this.likelihood = likelihood;
        image = start.clone();
        expectedEvents = likelihood.expectedEvents(image);
    }

    @Override
    public double pass(int number) {
        double logLikelihood = 0;
        for (int subset = 0; subset < likelihood.subsets(); subset++) {
            logLikelihood += update(subset);
        }
        return logLikelihood;
    }

    /** One update from one subset; returns the subset's log-likelihood at the image before. */
    private double update(int subset) {
        double part = likelihood.part(subset);
        double logLikelihood = likelihood.visit(subset, image) - part * expectedEvents;
        expectedEvents = likelihood.collect((first, last, sums) -> multiply(first, last, sums, (float) part));
        return logLikelihood;
    }

    private double multiply(int first, int last, float[] sums, float part) {
        float[] sensitivity = likelihood.sensitivity();
        double expected = 0;
        for (int j = first; j < last; j++) {
            if (image[j] > 0) {
                image[j] = Math.max(FLOOR, image[j] * sums[j] / (part * sensitivity[j]));
                expected += (double) sensitivity[j] * image[j];
            }
        }
        return expected;
    }

    @Override
    public float[] image() {
        return image;
    }

    @Override
    public void save(Snapshot snapshot) {
        snapshot.put(IMAGE, image);
        snapshot.put("expected_events", expectedEvents);
    }

    @Override
    public void restore(Snapshot snapshot) {
        System.arraycopy(snapshot.values(IMAGE, image.length), 0, image, 0, image.length);
        expectedEvents = snapshot.number("expected_events");
    }
}
