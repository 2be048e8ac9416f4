package org.raysheaf.engine;

import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.engine.ray.Lattice;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;

/**
 * Maximum likelihood from a list by expectation maximisation: MLEM with one subset, OSEM with several. One update is
 *
 * <pre>
 * x_j ← x_j / (φ s_j) · Σ_e a_ej / q_e,    q_e = Σ_j a_ej x_j + b_e/c_e
 * </pre>
 *
 * <p>over the events e of one subset; x is the activity concentration (Bq/mL), a_ej the weighted length of event e in voxel j (mm), s_j
 * the sensitivity (counts per Bq/mL), b_e/c_e the background, and φ the part of all events that is in the subset. EM: Shepp &amp; Vardi
 * (1982), Lange &amp; Carson (1984); ordered subsets: Hudson &amp; Larkin (1994). The start is 1 wherever there may be activity.
 *
 * <p>Difference from the publications: events are not binned, and values within the support are kept above 10⁻³⁰, since denormal numbers
 * would slow the projector down many times.
 *
 * <p>Run by one thread, works on the threads of the pool.
 */
public final class ListModeEm {
    /** Small enough to be nothing, large enough that its products with weights are ordinary numbers. */
    private static final float FLOOR = 1e-30f;

    private final EventStore store;
    private final EstimationSettings settings;
    private final Lattice lattice;
    private final float[] sensitivity;
    private final float[] image;
    private final Lanes lanes;
    private final int[][] runs;
    private double expectedEvents;

    /**
     * Prepares an estimate.
     *
     * @param store the events, dealt into as many subsets as the settings say
     * @param sensitivity expected counts of the whole list per Bq/mL in each voxel; above 0 wherever the store's support is
     * @param settings passes, subsets, lanes, filter
     * @param pool does the work
     * @throws IllegalArgumentException if the store has another number of subsets, the sensitivity another shape, or if voxels of the
     *     support have no sensitivity
     */
    public ListModeEm(EventStore store, Image sensitivity, EstimationSettings settings, ForkJoinPool pool) {
        if (store.subsets() != settings.subsets()) {
            throw new IllegalArgumentException("the events were dealt into " + store.subsets()
                    + " subsets, the settings ask for " + settings.subsets());
        }
        this.store = store;
        this.settings = settings;
        this.lattice = store.walks().lattice();
        this.sensitivity = lattice.fromImage(sensitivity);
        this.image = store.support().clone();
        scaleSensitivity();
        int count = settings.lanes() > 0
                ? settings.lanes()
                : Lanes.suited(store.planes() / store.subsets(), lattice.grid().voxels());
        this.lanes = new Lanes(count, lattice, pool);
        this.runs = new int[store.subsets()][];
        for (int subset = 0; subset < runs.length; subset++) {
            runs[subset] = store.cut(subset, count);
        }
    }

    /** A store that holds only some of the events stands for as much less exposure. */
    private void scaleSensitivity() {
        float share = (float) store.share();
        for (int j = 0; j < sensitivity.length; j++) {
            sensitivity[j] *= share;
            if (image[j] > 0 && !(sensitivity[j] > 0 && sensitivity[j] < Float.POSITIVE_INFINITY)) {
                throw new IllegalArgumentException("voxels that may hold activity need a finite sensitivity > 0: found "
                        + sensitivity[j] + "; make the support with FieldOfView.support");
            }
            expectedEvents += (double) sensitivity[j] * image[j];
        }
    }

    /**
     * Makes all passes.
     *
     * @param listener hears of every pass
     * @param progress hears of the events visited
     * @return the estimate
     */
    public Estimate run(PassListener listener, Progress progress) {
        long start = System.nanoTime();
        List<PassReport> passes = new ArrayList<>();
        progress.begin("estimating", (long) settings.passes() * store.events(), "events");
        for (int number = 1; number <= settings.passes(); number++) {
            PassReport pass = pass(number, progress);
            passes.add(pass);
            listener.passed(pass, () -> lattice.toImage(image));
        }
        Image result = lattice.toImage(image);
        if (settings.postFilterFwhmMm() > 0) {
            result = GaussianFilter.apply(result, settings.postFilterFwhmMm());
        }
        progress.end(passes.size() + " passes");
        return new Estimate(
                result,
                passes,
                store.tally(),
                store.events(),
                store.subsets(),
                lanes.count(),
                settings.postFilterFwhmMm(),
                secondsSince(start));
    }

    private PassReport pass(int number, Progress progress) {
        long start = System.nanoTime();
        double logLikelihood = 0;
        for (int subset = 0; subset < runs.length; subset++) {
            logLikelihood += update(subset, progress);
        }
        return new PassReport(number, logLikelihood, expectedEvents, secondsSince(start));
    }

    /** One update from one subset; returns the subset's log-likelihood at the image before. */
    private double update(int subset, Progress progress) {
        double part = (store.start(subset + 1) - store.start(subset)) / (double) store.events();
        double logLikelihood = -part * expectedEvents;
        int[] run = runs[subset];
        double[] logSums = new double[lanes.count()];
        lanes.each(lane -> {
            logSums[lane] = Visit.events(store, run[lane], run[lane + 1], image, lanes.accumulator(lane));
            progress.advance(run[lane + 1] - run[lane]);
        });
        for (double logSum : logSums) {
            logLikelihood += logSum;
        }
        expectedEvents = lanes.collect((first, last, sums) -> multiply(first, last, sums, (float) part));
        return logLikelihood;
    }

    private double multiply(int first, int last, float[] sums, float part) {
        double expected = 0;
        for (int j = first; j < last; j++) {
            if (image[j] > 0) {
                image[j] = Math.max(FLOOR, image[j] * sums[j] / (part * sensitivity[j]));
                expected += (double) sensitivity[j] * image[j];
            }
        }
        return expected;
    }

    private static double secondsSince(long start) {
        return (System.nanoTime() - start) * 1e-9;
    }
}
