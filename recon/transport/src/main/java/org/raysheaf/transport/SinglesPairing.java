package org.raysheaf.transport;

import java.io.IOException;
import java.util.EnumSet;
import java.util.Set;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.port.Progress;

/**
 * Pairs the singles of a list, just as a simulation pairs its own. Memory holds the singles of one window and of the disorder that is
 * allowed, whatever the length of the list. Immutable.
 */
public final class SinglesPairing {
    private static final int ROOM = 1 << 15;
    private static final double PS_PER_NS = 1000;

    private final DetectorSystem system;
    private final Pairing pairing;
    private final Set<Attribute> singles;

    /**
     * Prepares pairing.
     *
     * @param system whose elements the singles name
     * @param pairing the settings
     * @param singles columns of the singles, those of the truth too if they are to be carried over
     */
    public SinglesPairing(DetectorSystem system, Pairing pairing, Set<Attribute> singles) {
        this.system = system;
        this.pairing = pairing;
        this.singles = EnumSet.copyOf(singles);
    }

    /**
     * The columns of the pairs.
     *
     * @return attributes of every pair
     */
    public Set<Attribute> attributes() {
        return Pairer.attributes(pairing, singles);
    }

    /**
     * What the list of pairs says about itself: a pair is recorded when both photons could be, so the live share counts twice.
     *
     * @param of header of the singles
     * @param record how the pairs were made
     * @return the header of the pairs
     */
    public static ListHeader header(ListHeader of, PairingRecord record) {
        double live = of.liveTimeS() / of.durationS();
        return new ListHeader(
                of.systemDescription(), of.durationS(), live * of.liveTimeS(), of.start(), of.nuclide(), record);
    }

    /**
     * Reads all singles once and makes pairs of them.
     *
     * @param source the singles, in order of time within the disorder that the settings allow
     * @param sink receives the pairs in order of time, with the columns of {@link #attributes()}
     * @param progress hears of it, in singles
     * @return how the pairs were made
     * @throws IOException if the list cannot be read, is in greater disorder, or the sink fails
     */
    public PairingRecord run(EventSource source, EventSink sink, Progress progress) throws IOException {
        Pairer pairer = new Pairer(system, pairing, singles, sink);
        TimeOrder order = new TimeOrder(singles, Math.round(PS_PER_NS * pairing.disorderNs()), pairer);
        EventBlock block = new EventBlock(singles, ROOM);
        progress.begin("pairing singles", source.events(), "singles");
        try (EventSource.Cursor cursor = source.open()) {
            while (cursor.next(block)) {
                order.accept(block);
                progress.advance(block.size());
            }
        }
        order.finish();
        pairer.finish();
        PairingRecord record = pairer.record();
        progress.end(record.tally().prompts() + " pairs");
        return record;
    }
}
