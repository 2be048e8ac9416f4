package org.raysheaf.transport;

import java.io.IOException;
import java.util.Arrays;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.event.PairingTally;

/**
 * Makes pairs of singles that come in order of time; {@link Pairing} says how. The pair's time is that of its earlier single (for a
 * delayed pair, of the single that opened the window), so pairs come in order too; a is the photon of the lower element number. Memory
 * holds the singles of one window. Not safe for use by several threads.
 */
final class Pairer implements EventSink {
    private static final int ROOM = 1 << 14;
    private static final double PS_PER_NS = 1000;

    /** What a single carries, and what it becomes for photons a and b. */
    private static final List<List<Attribute>> CARRIED = List.of(
            List.of(Attribute.ENERGY, Attribute.ENERGY_A, Attribute.ENERGY_B),
            List.of(Attribute.DEPTH, Attribute.DEPTH_A, Attribute.DEPTH_B),
            List.of(Attribute.POSITION_X, Attribute.POSITION_A_X, Attribute.POSITION_B_X),
            List.of(Attribute.POSITION_Y, Attribute.POSITION_A_Y, Attribute.POSITION_B_Y),
            List.of(Attribute.POSITION_Z, Attribute.POSITION_A_Z, Attribute.POSITION_B_Z),
            List.of(Attribute.POSITION_U_SD, Attribute.POSITION_A_U_SD, Attribute.POSITION_B_U_SD),
            List.of(Attribute.POSITION_V_SD, Attribute.POSITION_A_V_SD, Attribute.POSITION_B_V_SD),
            List.of(Attribute.POSITION_W_SD, Attribute.POSITION_A_W_SD, Attribute.POSITION_B_W_SD));

    private final DetectorSystem system;
    private final Pairing pairing;
    private final EventSink sink;
    private final long windowPs;
    private final long delayPs;
    private final long horizonPs;
    private final double lowestKeV;
    private final double highestKeV;
    private final List<List<Attribute>> carried;
    private final boolean truth;
    private EventBlock singles;
    private final EventBlock pairs;
    private int[] accepted = new int[ROOM];

    // Rows before this one are inside a window that an earlier single opened.
    private int nextOpener;

    private final long[] singlesOf;
    private final long most;
    private long outsideEnergies;
    private long alone;
    private long crowded;
    private long tooClose;
    private long paired;
    private long prompts;
    private long delayed;

    /**
     * Prepares pairing.
     *
     * @param system whose elements the singles name
     * @param pairing the settings
     * @param singleAttributes columns of the singles
     * @param sink receives pairs, with the columns that {@link #attributes} names
     */
    Pairer(DetectorSystem system, Pairing pairing, Set<Attribute> singleAttributes, EventSink sink) {
        this(system, pairing, singleAttributes, Long.MAX_VALUE, sink);
    }

    /** The same, ending with a number of pairs; singles that come later are counted nowhere. */
    Pairer(DetectorSystem system, Pairing pairing, Set<Attribute> singleAttributes, long most, EventSink sink) {
        this.most = most;
        this.system = system;
        this.pairing = pairing;
        this.sink = sink;
        windowPs = Math.round(PS_PER_NS * pairing.windowNs());
        Double delayNs = pairing.delayNs();
        delayPs = delayNs == null ? -1 : Math.round(PS_PER_NS * delayNs);
        horizonPs = windowPs + Math.max(0, delayPs);
        boolean energies = singleAttributes.contains(Attribute.ENERGY);
        Double highest = pairing.highestKeV();
        lowestKeV = energies ? pairing.lowestKeV() : 0;
        highestKeV = energies && highest != null ? highest : Double.POSITIVE_INFINITY;
        carried = CARRIED.stream()
                .filter(row -> singleAttributes.contains(row.get(0)))
                .toList();
        truth = singleAttributes.stream().anyMatch(Attribute::truth);
        singles = new EventBlock(singleAttributes, ROOM);
        pairs = new EventBlock(attributes(pairing, singleAttributes), ROOM);
        singlesOf = new long[system.elements()];
    }

    /**
     * The columns of pairs made of singles.
     *
     * @param pairing the settings
     * @param singles columns of the singles
     * @return columns of the pairs
     */
    static Set<Attribute> attributes(Pairing pairing, Set<Attribute> singles) {
        Set<Attribute> pairs =
                EnumSet.of(Attribute.ELEMENT_A, Attribute.ELEMENT_B, Attribute.TIME, Attribute.TIME_DIFFERENCE);
        for (List<Attribute> row : CARRIED) {
            if (singles.contains(row.get(0))) {
                pairs.add(row.get(1));
                pairs.add(row.get(2));
            }
        }
        if (pairing.delayNs() != null) {
            pairs.add(Attribute.DELAYED);
        }
        if (singles.stream().anyMatch(Attribute::truth)) {
            pairs.addAll(ListKind.PAIRS.truth());
        }
        return pairs;
    }

    /** How pairs were made so far; complete after {@link #finish}. */
    PairingRecord record() {
        return new PairingRecord(
                pairing, tally(), Arrays.stream(singlesOf).boxed().toList());
    }

    /** What became of the singles so far; complete after {@link #finish}. */
    PairingTally tally() {
        return new PairingTally(outsideEnergies, alone, crowded, tooClose, paired, prompts, delayed);
    }

    /** Whether there are pairs enough. */
    boolean full() {
        return prompts + delayed >= most;
    }

    @Override
    public void accept(EventBlock block) throws IOException {
        if (full()) {
            return;
        }
        int count = select(block);
        singles = singles.withRoomFor(singles.size() + count);
        singles.append(block, accepted, 0, count);
        if (singles.size() > 0) {
            pairUntil(singles.longs(Attribute.TIME)[singles.size() - 1] - horizonPs);
        }
    }

    /** Pairs what is left and passes it on. */
    void finish() throws IOException {
        pairUntil(Long.MAX_VALUE);
        flush();
    }

    private int select(EventBlock block) {
        if (accepted.length < block.size()) {
            accepted = new int[block.size()];
        }
        int count = 0;
        if (lowestKeV <= 0 && highestKeV == Double.POSITIVE_INFINITY) {
            for (int i = 0; i < block.size(); i++) {
                accepted[count++] = i;
            }
        } else {
            float[] keV = block.floats(Attribute.ENERGY);
            for (int i = 0; i < block.size(); i++) {
                if (keV[i] >= lowestKeV && keV[i] <= highestKeV) {
                    accepted[count++] = i;
                }
            }
        }
        outsideEnergies += block.size() - count;
        return count;
    }

    /** Lets every single open its windows that is older than a time; their partners are all there. */
    private void pairUntil(long timePs) throws IOException {
        long[] times = singles.longs(Attribute.TIME);
        int size = singles.size();
        int[] elements = singles.ints(Attribute.ELEMENT);
        int opener = 0;
        int later = 0;
        while (opener < size && times[opener] < timePs && !full()) {
            singlesOf[elements[opener]]++;
            if (opener >= nextOpener) {
                int end = opener + 1;
                while (end < size && times[end] - times[opener] <= windowPs) {
                    end++;
                }
                makePrompts(opener, end);
                nextOpener = end;
            }
            if (delayPs >= 0) {
                later = makeDelayed(opener, Math.max(later, opener + 1), times, size);
            }
            opener++;
        }
        drop(opener);
    }

    private void makePrompts(int from, int to) throws IOException {
        int members = to - from;
        if (members == 1) {
            alone++;
            return;
        }
        long before = prompts;
        if (members == 2) {
            pair(from, from + 1, false);
        } else {
            switch (pairing.crowds()) {
                case DISCARD -> {
                    // none of them is used
                }
                case EVERY_PAIR -> {
                    for (int i = from; i < to; i++) {
                        for (int j = i + 1; j < to; j++) {
                            pair(i, j, false);
                        }
                    }
                }
                case FIRST_TWO -> pair(from, from + 1, false);
                case STRONGEST_TWO -> {
                    int first = strongest(from, to, -1);
                    int second = strongest(from, to, first);
                    pair(Math.min(first, second), Math.max(first, second), false);
                }
            }
        }
        if (prompts > before) {
            paired += members;
        } else if (members == 2) {
            tooClose += 2;
        } else {
            crowded += members;
        }
    }

    private int strongest(int from, int to, int but) {
        int best = -1;
        for (int i = from; i < to; i++) {
            if (i != but && (best < 0 || energy(i) > energy(best))) {
                best = i;
            }
        }
        return best;
    }

    private float energy(int row) {
        return singles.has(Attribute.ENERGY) ? singles.floats(Attribute.ENERGY)[row] : 0;
    }

    private int makeDelayed(int opener, int from, long[] times, int size) throws IOException {
        long opensPs = times[opener] + delayPs;
        int first = from;
        while (first < size && times[first] < opensPs) {
            first++;
        }
        int end = first;
        while (end < size && times[end] - opensPs <= windowPs) {
            end++;
        }
        if (end - first == 1) {
            pair(opener, first, true);
        } else if (end - first > 1) {
            switch (pairing.crowds()) {
                case DISCARD -> {
                    // none of them is used
                }
                case EVERY_PAIR -> {
                    for (int i = first; i < end; i++) {
                        pair(opener, i, true);
                    }
                }
                case FIRST_TWO -> pair(opener, first, true);
                case STRONGEST_TWO -> pair(opener, strongest(first, end, -1), true);
            }
        }
        return first;
    }

    /** Makes a pair of an earlier and a later single, unless their blocks stand too close. */
    private void pair(int earlier, int later, boolean late) throws IOException {
        int[] elements = singles.ints(Attribute.ELEMENT);
        if (full() || !system.admits(elements[earlier], elements[later])) {
            return;
        }
        if (late) {
            delayed++;
        } else {
            prompts++;
        }
        boolean inOrder = elements[earlier] < elements[later];
        int a = inOrder ? earlier : later;
        int b = inOrder ? later : earlier;
        int i = pairs.size();
        pairs.resize(i + 1);
        long[] times = singles.longs(Attribute.TIME);
        long differencePs = times[later] - times[earlier] - (late ? delayPs : 0);
        pairs.ints(Attribute.ELEMENT_A)[i] = elements[a];
        pairs.ints(Attribute.ELEMENT_B)[i] = elements[b];
        pairs.longs(Attribute.TIME)[i] = times[earlier];
        pairs.floats(Attribute.TIME_DIFFERENCE)[i] = inOrder ? differencePs : -differencePs;
        for (List<Attribute> row : carried) {
            float[] values = singles.floats(row.get(0));
            pairs.floats(row.get(1))[i] = values[a];
            pairs.floats(row.get(2))[i] = values[b];
        }
        if (delayPs >= 0) {
            pairs.bytes(Attribute.DELAYED)[i] = (byte) (late ? 1 : 0);
        }
        if (truth) {
            tell(a, b, i);
        }
        if (pairs.size() == pairs.capacity()) {
            flush();
        }
    }

    private void tell(int a, int b, int i) {
        long[] decays = singles.longs(Attribute.DECAY);
        pairs.bytes(Attribute.SAME_DECAY)[i] = (byte) (decays[a] == decays[b] ? 1 : 0);
        for (Attribute count : List.of(Attribute.OBJECT_SCATTERS, Attribute.DETECTOR_SCATTERS)) {
            byte[] values = singles.bytes(count);
            pairs.bytes(count)[i] = (byte) Math.min(255, (values[a] & 0xff) + (values[b] & 0xff));
        }
        for (Attribute flag : List.of(Attribute.OUTSIDE_VIEW, Attribute.NOT_ANNIHILATION)) {
            byte[] values = singles.bytes(flag);
            pairs.bytes(flag)[i] = (byte) (values[a] | values[b]);
        }
        for (Attribute place : List.of(Attribute.EMISSION_X, Attribute.EMISSION_Y, Attribute.EMISSION_Z)) {
            pairs.floats(place)[i] = singles.floats(place)[a];
        }
    }

    /** Forgets the singles that have opened all their windows. */
    private void drop(int count) {
        singles.removeFirst(count);
        nextOpener = Math.max(0, nextOpener - count);
    }

    private void flush() throws IOException {
        if (pairs.size() > 0) {
            sink.accept(pairs);
            pairs.resize(0);
        }
    }
}
