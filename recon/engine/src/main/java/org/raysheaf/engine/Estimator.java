package org.raysheaf.engine;

import java.io.IOException;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.blur.BlurModel;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Checkpoints;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.port.Snapshot;

/**
 * From events to an image: pass after pass of an {@link UpdateRule} over the {@link Likelihood} of a list, with a checkpoint after each.
 * The start is uniform wherever there may be activity, or an image given beforehand.
 *
 * <p>Run by one thread, works on the threads of the pool.
 */
public final class Estimator {
    private static final String BEST = "best";

    /** Least activity of a start, in parts of the typical one. */
    private static final double FAINT = 0.01;

    private final EventStore store;
    private final EstimationSettings settings;
    private final Likelihood likelihood;
    private final Objective objective;
    private final UpdateRule rule;
    /** The image to be kept if the passes after it are no better; empty if that is always the last one. */
    private final float[] best;

    /**
     * Prepares an estimate.
     *
     * @param store the events, dealt into {@link EstimationSettings#parts} subsets
     * @param sensitivity expected counts of the whole list per Bq/mL in each voxel; above 0 wherever the store's support is
     * @param settings method, passes, subsets, lanes, filter
     * @param pool does the work
     * @throws IllegalArgumentException if the store has another number of subsets, the sensitivity another shape, or if voxels of the
     *     support have no sensitivity
     */
    public Estimator(EventStore store, Image sensitivity, EstimationSettings settings, ForkJoinPool pool) {
        this(store, sensitivity, null, null, settings, pool);
    }

    /**
     * Prepares an estimate that starts from an image, of activity before it was blurred.
     *
     * @param store the events, dealt into {@link EstimationSettings#parts} subsets
     * @param sensitivity expected counts of the whole list per Bq/mL in each voxel, as without blur; above 0 wherever the store's support is
     * @param blur what blurs activity before rays see it, or null for nothing
     * @param start activity concentration (Bq/mL) on the store's grid, finite; null for a uniform one. Where it is less than {@value #FAINT} of
     *     what is typical, that is taken, since what is nothing could not grow
     * @param settings method, passes, subsets, lanes, filter
     * @param pool does the work
     * @throws IllegalArgumentException if the store has another number of subsets, sensitivity or start another shape, or if voxels of
     *     the support have no sensitivity
     */
    public Estimator(
            EventStore store,
            Image sensitivity,
            @Nullable BlurModel blur,
            @Nullable Image start,
            EstimationSettings settings,
            ForkJoinPool pool) {
        if (store.subsets() != settings.parts()) {
            throw new IllegalArgumentException("the events were dealt into " + store.subsets()
                    + " subsets, the settings ask for " + settings.parts());
        }
        this.store = store;
        this.settings = settings;
        this.likelihood = new Likelihood(
                store, sensitivity, blur, settings.subsets(), settings.heldOutEvery(), settings.lanes(), pool);
        this.objective = new Objective(likelihood, settings.prior());
        this.rule = rule(start);
        this.best = new float[settings.heldOutEvery() > 0 ? rule.image().length : 0];
    }

    private UpdateRule rule(@Nullable Image start) {
        Relaxation relaxation = settings.relaxation() == null ? Relaxation.USUAL : settings.relaxation();
        return switch (settings.method()) {
            case EM -> new ExpectationMaximisation(likelihood, first(start, 1));
            case BSREM -> new RelaxedSubsets(objective, relaxation, first(start, objective.typical()));
            case VARIANCE_REDUCED -> new VarianceReduced(objective, first(start, objective.typical()));
        };
    }

    /** The image before the first pass. One update of EM sets any scale right; a prior needs about the right one from the start. */
    private float[] first(@Nullable Image start, double uniform) {
        float[] image = start == null ? null : likelihood.lattice().fromImage(start);
        float faint = (float) (FAINT * objective.typical());
        float[] values = likelihood.support().clone();
        for (int j = 0; j < values.length; j++) {
            values[j] *= image == null ? (float) uniform : Math.max(faint, image[j]);
        }
        return values;
    }

    /**
     * What the estimate makes as large as it can, by a visit to all events: the log-likelihood less the penalty of the prior, if there is one, up
     * to terms that do not depend on the image.
     *
     * @param image activity concentration (Bq/mL) on the store's grid, above 0 wherever there may be activity
     * @return the objective (counts)
     */
    public double objective(Image image) {
        return objective.value(likelihood.lattice().fromImage(image));
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
        Optional<String> enough = enough(passes);
        while (passes.size() < settings.passes() && enough.isEmpty()) {
            likelihood.report(progress, stage(passes));
            PassReport pass = pass(passes.size() + 1);
            passes.add(pass);
            if (best.length > 0 && kept(passes) == pass.number()) {
                System.arraycopy(rule.image(), 0, best, 0, best.length);
            }
            checkpoints.save(snapshot(passes));
            listener.passed(pass, () -> likelihood.lattice().toImage(rule.image()));
            enough = enough(passes);
        }
        Image result = likelihood.lattice().toImage(best.length > 0 ? best : rule.image());
        if (settings.postFilterFwhmMm() > 0) {
            result = GaussianFilter.apply(result, settings.postFilterFwhmMm());
        }
        progress.end(passes.size() + " passes");
        return new Estimate(
                result,
                passes,
                kept(passes),
                enough.orElseGet(() -> allMade(passes)),
                store.tally(),
                store.events(),
                likelihood.subsets(),
                likelihood.laneCount(),
                settings.postFilterFwhmMm(),
                secondsSince(start));
    }

    private Optional<String> enough(List<PassReport> passes) {
        Stop stop = settings.stop();
        return stop == null || passes.isEmpty() ? Optional.empty() : stop.reached(passes);
    }

    private int kept(List<PassReport> passes) {
        Stop stop = settings.stop();
        return stop == null ? passes.size() : stop.best(passes);
    }

    private String allMade(List<PassReport> passes) {
        String made = "all " + passes.size() + " passes were made";
        return best.length == 0
                ? made
                : made + ", and the held-out events are explained best after pass " + kept(passes)
                        + "; more passes may do better";
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
        double penalty = objective.penalty(rule.image());
        double logLikelihood = rule.pass(number);
        double heldOut = likelihood.heldOut(rule.image());
        return new PassReport(
                number, logLikelihood, penalty, heldOut, likelihood.expectedEvents(rule.image()), secondsSince(start));
    }

    private Snapshot snapshot(List<PassReport> passes) {
        Snapshot snapshot = new Snapshot();
        PassReport.save(passes, snapshot);
        rule.save(snapshot);
        if (best.length > 0) {
            snapshot.put(BEST, best);
        }
        return snapshot;
    }

    private List<PassReport> resumed(Checkpoints checkpoints) throws IOException {
        Snapshot snapshot = checkpoints.latest().orElse(null);
        if (snapshot == null) {
            return new ArrayList<>();
        }
        rule.restore(snapshot);
        if (best.length > 0) {
            System.arraycopy(snapshot.values(BEST, best.length), 0, best, 0, best.length);
        }
        return PassReport.restore(snapshot);
    }

    private static double secondsSince(long start) {
        return (System.nanoTime() - start) * 1e-9;
    }
}
