package org.raysheaf.engine;

import java.io.IOException;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Checkpoints;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.port.Snapshot;

/**
 * From events to an image: pass after pass of an {@link UpdateRule} over the {@link Likelihood} of a list, with a checkpoint after each.
 * The start is 1 wherever there may be activity.
 *
 * <p>Run by one thread, works on the threads of the pool.
 */
public final class Estimator {
    private final EventStore store;
    private final EstimationSettings settings;
    private final Likelihood likelihood;
    private final UpdateRule rule;

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
    public Estimator(EventStore store, Image sensitivity, EstimationSettings settings, ForkJoinPool pool) {
        if (store.subsets() != settings.subsets()) {
            throw new IllegalArgumentException("the events were dealt into " + store.subsets()
                    + " subsets, the settings ask for " + settings.subsets());
        }
        this.store = store;
        this.settings = settings;
        this.likelihood = new Likelihood(store, sensitivity, settings.lanes(), pool);
        this.rule = new ExpectationMaximisation(likelihood, store.support());
    }

    /**
     * Makes all passes, without checkpoints.
     *
     * @param listener hears of every pass
     * @param progress hears of the events visited
     * @return the estimate
     */
    public Estimate run(PassListener listener, Progress progress) {
        try {
            return run(listener, progress, Checkpoints.NONE);
        } catch (IOException e) {
            throw new IllegalStateException("no checkpoints, yet one failed", e);
        }
    }

    /**
     * Makes all passes that are not in the checkpoint yet, and leaves a checkpoint after each.
     *
     * @param listener hears of every pass made now
     * @param progress hears of the events visited
     * @param checkpoints where to go on from and what to leave behind
     * @return the estimate; the same bits whether there was a break or not
     * @throws IOException if a checkpoint can be neither read nor written
     */
    public Estimate run(PassListener listener, Progress progress, Checkpoints checkpoints) throws IOException {
        long start = System.nanoTime();
        List<PassReport> passes = resumed(checkpoints);
        progress.begin("estimating", (long) (settings.passes() - passes.size()) * store.events(), "events");
        while (passes.size() < settings.passes()) {
            likelihood.report(progress, stage(passes));
            PassReport pass = pass(passes.size() + 1);
            passes.add(pass);
            checkpoints.save(snapshot(passes));
            listener.passed(pass, () -> likelihood.lattice().toImage(rule.image()));
        }
        Image result = likelihood.lattice().toImage(rule.image());
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
                likelihood.laneCount(),
                settings.postFilterFwhmMm(),
                secondsSince(start));
    }

    private String stage(List<PassReport> passes) {
        String stage = "pass " + (passes.size() + 1) + " of " + settings.passes();
        return passes.isEmpty()
                ? stage
                : String.format(
                        Locale.ROOT,
                        "%s, log-likelihood %.7g",
                        stage,
                        passes.get(passes.size() - 1).logLikelihood());
    }

    private PassReport pass(int number) {
        long start = System.nanoTime();
        double logLikelihood = rule.pass(number);
        return new PassReport(number, logLikelihood, likelihood.expectedEvents(rule.image()), secondsSince(start));
    }

    private Snapshot snapshot(List<PassReport> passes) {
        Snapshot snapshot = new Snapshot();
        PassReport.save(passes, snapshot);
        rule.save(snapshot);
        return snapshot;
    }

    private List<PassReport> resumed(Checkpoints checkpoints) throws IOException {
        Snapshot snapshot = checkpoints.latest().orElse(null);
        if (snapshot == null) {
            return new ArrayList<>();
        }
        rule.restore(snapshot);
        return PassReport.restore(snapshot);
    }

    private static double secondsSince(long start) {
        return (System.nanoTime() - start) * 1e-9;
    }
}
