package org.raysheaf.transport;

import java.io.IOException;
import java.util.ArrayDeque;
import java.util.Deque;
import java.util.concurrent.ForkJoinPool;
import java.util.concurrent.ForkJoinTask;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventSink;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.settings.Problems;

/**
 * A simulated acquisition: decays in a phantom, photons into a detector system, pairs into a list.
 *
 * <p>The acquisition is cut into slices of about 65,000 expected decays, each with a random stream of its own. Slices
 * are simulated side by side, a few ahead of the one being written, and written in order of time; so memory stays flat,
 * and the list is the same on any number of threads. Immutable, safe for use by several threads.
 */
public final class Simulation {
    private static final double PS_PER_S = 1e12;

    private final Acquisition acquisition;
    private final String systemText;
    private final double expectedCandidates;
    private final Slice.Setting setting;

    /**
     * Prepares an acquisition.
     *
     * @param acquisition the settings
     * @param phantom where activity is
     * @param system what detects
     * @param systemText text of the system description, for the header of the list
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if the phantom holds no activity
     */
    public Simulation(Acquisition acquisition, Phantom phantom, DetectorSystem system, String systemText) {
        ActiveParts source = new ActiveParts(phantom);
        new Problems("acquisition")
                .rule(
                        source.candidateBq() > 0,
                        "phantom",
                        "expected a part with concentration_kBq_per_mL > 0, found none in "
                                + phantom.description().name() + "; nothing would decay")
                .orThrow();
        this.acquisition = acquisition;
        this.systemText = systemText;
        ListHeader header = acquisition.header(systemText);
        this.expectedCandidates = source.candidateBq() * header.pairsPerBecquerel();
        DecayTimes times = new DecayTimes(expectedCandidates, acquisition.durationS(), acquisition.nuclide());
        this.setting = new Slice.Setting(times, source, system, acquisition.attributes(), acquisition.seed());
    }

    /**
     * Runs the acquisition. The calling thread writes, the pool simulates. Every run gives the same events.
     *
     * @param sink receives the events in order of time; it must take the columns of {@link Acquisition#attributes()}
     * @param pool does the work
     * @param progress hears of it, in decays
     * @return what came of it
     * @throws IOException if the sink fails
     */
    public Simulated run(EventSink sink, ForkJoinPool pool, Progress progress) throws IOException {
        progress.begin("simulating decays", Math.round(expectedCandidates), "decays");
        long limit = acquisition.maxEvents() == null ? Long.MAX_VALUE : acquisition.maxEvents();
        long slices = setting.times().slices();
        int ahead = 2 * pool.getParallelism() + 1;
        Deque<ForkJoinTask<Slice>> waiting = new ArrayDeque<>();
        long started = 0;
        long pairs = 0;
        long events = 0;
        double stoppedAfterS = acquisition.durationS();
        try {
            for (long number = 0; number < slices && events < limit; number++) {
                while (started < slices && waiting.size() < ahead) {
                    waiting.add(submit(pool, started++));
                }
                Slice slice = waiting.remove().join();
                if (events + slice.events().size() >= limit) {
                    slice = Slice.simulate(setting, number, limit - events); // the same again, up to the last event
                    stoppedAfterS = timeOfLast(slice) / PS_PER_S;
                }
                if (slice.events().size() > 0) {
                    sink.accept(slice.events());
                }
                events += slice.events().size();
                pairs += slice.pairs();
                progress.advance(Math.round(expectedCandidates / slices));
            }
        } finally {
            waiting.forEach(task -> task.cancel(false));
        }
        progress.end(pairs + " pairs emitted, " + events + " recorded");
        return new Simulated(acquisition.header(systemText, stoppedAfterS), pairs, events);
    }

    private ForkJoinTask<Slice> submit(ForkJoinPool pool, long number) {
        return pool.submit(() -> Slice.simulate(setting, number, Long.MAX_VALUE));
    }

    private static double timeOfLast(Slice slice) {
        return slice.events().longs(Attribute.TIME)[slice.events().size() - 1];
    }
}
