package org.raysheaf.transport;

import java.io.IOException;
import java.util.EnumSet;
import java.util.Set;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.matter.DecayScheme;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.settings.Problems;

/**
 * A simulated acquisition: decays in a phantom, photons into a detector system, signals into a list.
 *
 * <p>The acquisition is cut into slices of about 65,000 expected decays, each with a random stream of its own. Slices are simulated side by
 * side, a few ahead of the one whose pulses go through the readout; that runs through time in one go, without random numbers. So memory
 * stays flat, and the list is the same on any number of threads. Immutable, safe for use by several threads.
 */
public final class Simulation {
    private static final double PS_PER_S = 1e12;

    private final Acquisition acquisition;
    private final DetectorSystem system;
    private final String systemText;
    private final @Nullable DecayScheme scheme;
    private final double expectedDecays;
    private final ReadoutPlan readout;
    private final Slice.Setting setting;

    /**
     * Prepares an acquisition.
     *
     * @param acquisition the settings
     * @param phantom where activity is
     * @param system what detects
     * @param systemText text of the system description, for the header of the list
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if nothing would decay
     */
    public Simulation(Acquisition acquisition, Phantom phantom, DetectorSystem system, String systemText) {
        this.acquisition = acquisition;
        this.system = system;
        this.systemText = systemText;
        String name = acquisition.nuclide();
        scheme = name == null ? null : DecayScheme.find(name).orElseThrow();
        Activity activity = new Activity(phantom);
        Lutetium lutetium = new Lutetium(system.blocks());
        new Problems("acquisition")
                .rule(
                        activity.candidateBq() > 0 || lutetium.activityBq() > 0,
                        "phantom",
                        "expected a part or source with activity, found none in "
                                + phantom.description().name() + "; nothing would decay")
                .orThrow();
        double seconds =
                scheme == null ? acquisition.durationS() : scheme.nuclide().effectiveTimeS(acquisition.durationS());
        expectedDecays = activity.candidateBq() * seconds;
        readout = new ReadoutPlan(system);
        DecayTimes times = new DecayTimes(
                expectedDecays,
                lutetium.activityBq() * acquisition.durationS(),
                acquisition.durationS(),
                scheme == null ? null : scheme.nuclide());
        setting = new Slice.Setting(
                times,
                activity,
                new Emission.Plan(scheme, acquisition.physics()),
                lutetium,
                new World(system, phantom, acquisition.physics()),
                readout,
                acquisition.seed());
    }

    /**
     * The columns of the list.
     *
     * @return the attributes of every event, those of the truth too if they were asked for
     */
    public Set<Attribute> attributes() {
        if (acquisition.output() == ListKind.SINGLES) {
            return singleAttributes();
        }
        Set<Attribute> pairs = Pairer.attributes(acquisition.pairing(), singleAttributes());
        if (!acquisition.energies()) {
            pairs.remove(Attribute.ENERGY_A);
            pairs.remove(Attribute.ENERGY_B);
        }
        if (!acquisition.timeDifferences()) {
            pairs.remove(Attribute.TIME_DIFFERENCE);
        }
        return pairs;
    }

    private Set<Attribute> singleAttributes() {
        Set<Attribute> singles = EnumSet.of(Attribute.ELEMENT, Attribute.TIME);
        if (acquisition.energies() || acquisition.output() == ListKind.PAIRS) {
            singles.add(Attribute.ENERGY); // pairing needs it even where the list does not show it
        }
        if (readout.measuresDepth()) {
            singles.add(Attribute.DEPTH);
        }
        if (readout.measuresPoints()) {
            singles.addAll(EnumSet.range(Attribute.POSITION_X, Attribute.POSITION_Z));
            singles.addAll(EnumSet.range(Attribute.POSITION_U_SD, Attribute.POSITION_W_SD));
        }
        if (acquisition.truth()) {
            singles.addAll(ListKind.SINGLES.truth());
        }
        return singles;
    }

    /**
     * Runs the acquisition. Every run gives the same events.
     *
     * @param sink receives the events in order of time; it must take the columns of {@link #attributes()}
     * @param pool does all of the work
     * @param progress hears of it, in decays
     * @return what came of it
     * @throws IOException if the sink fails
     */
    public Simulated run(EventSink sink, ForkJoinPool pool, Progress progress) throws IOException {
        long slices = setting.times().slices();
        progress.begin("simulating decays", Math.round(expectedDecays), "decays");
        Chain chain = new Chain(sink);
        new InOrder<>(
                        slices,
                        2 * pool.getParallelism() + 1,
                        number -> Slice.simulate(setting, number),
                        (number, slice) -> {
                            progress.advance(Math.round(expectedDecays / slices));
                            return chain.take(number, slice);
                        })
                .run(pool);
        chain.finish();
        double duration = chain.last.full() ? chain.last.lastPs() / PS_PER_S : acquisition.durationS();
        double live = chain.channels.liveShare(Math.round(duration * PS_PER_S));
        double fraction = acquisition.output() == ListKind.PAIRS ? live * live : live;
        progress.end(chain.decays + " decays, " + chain.last.count() + " events");
        ListHeader header = new ListHeader(
                systemText,
                duration,
                duration * fraction,
                acquisition.start(),
                scheme == null ? null : scheme.nuclide(),
                chain.pairer == null ? null : chain.pairer.record());
        return new Simulated(
                header,
                chain.decays,
                chain.positrons,
                chain.last.count(),
                fraction,
                chain.pairer == null ? null : chain.pairer.tally());
    }

    /** From pulses to the sink: channels, order in time, pairing if pairs are wanted, the limit. */
    private final class Chain {
        final Limit last;
        final @Nullable Pairer pairer;
        final TimeOrder order;
        final Channels channels;
        private long decays;
        private long positrons;

        Chain(EventSink sink) {
            long most = acquisition.maxEvents() == null ? Long.MAX_VALUE : acquisition.maxEvents();
            last = new Limit(sink, most);
            Set<Attribute> singles = singleAttributes();
            EventSink next = last;
            if (acquisition.output() == ListKind.PAIRS) {
                pairer = new Pairer(system, acquisition.pairing(), singles, most, last);
                next = pairer;
            } else {
                pairer = null;
            }
            order = new TimeOrder(singles, readout.disorderPs(), next);
            channels = new Channels(readout, singles, order);
        }

        /** Takes the next slice; false if there are events enough. */
        boolean take(long number, Slice slice) throws IOException {
            decays += slice.decays();
            positrons += slice.positrons();
            channels.take(slice.pulses(), setting.times().startPs(number + 1));
            return !(last.full() || (pairer != null && pairer.full()));
        }

        void finish() throws IOException {
            channels.finish();
            order.finish();
            if (pairer != null) {
                pairer.finish();
            }
        }
    }

    /** Passes on events until there are enough. */
    private static final class Limit implements EventSink {
        private final EventSink sink;
        private final long limit;
        private long count;
        private long lastPs;

        Limit(EventSink sink, long limit) {
            this.sink = sink;
            this.limit = limit;
        }

        @Override
        public void accept(EventBlock block) throws IOException {
            if (full()) {
                return;
            }
            if (count + block.size() > limit) {
                block.resize((int) (limit - count));
            }
            if (block.size() > 0) {
                count += block.size();
                lastPs = block.longs(Attribute.TIME)[block.size() - 1];
                sink.accept(block);
            }
        }

        boolean full() {
            return count >= limit;
        }

        long count() {
            return count;
        }

        long lastPs() {
            return lastPs;
        }
    }
}
