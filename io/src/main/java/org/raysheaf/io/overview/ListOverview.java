package org.raysheaf.io.overview;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;

/** Looks at events as they pass and gathers what an overview shows; memory does not grow with the list. One thread. */
public final class ListOverview implements EventSink {
    private static final int ENERGY_BINS = 512;
    private static final int DIFFERENCE_BINS = 401;
    private static final int MOST_RANGES = 12;

    /** Photons of one decay are well within 20 ns of each other, whatever the electronics. */
    private static final double LONGEST_TO_NEXT_PS = 20_000;

    private final DetectorSystem system;
    private final long[] counts;
    private final @Nullable Attribute elementA;
    private final @Nullable Attribute elementB;
    private final List<Attribute> energies = new ArrayList<>();
    private final boolean timed;
    private final boolean differences;
    private final boolean delayedKnown;
    private final Spectrum spectrum = new Spectrum(ENERGY_BINS, true);
    private final Spectrum differenceSpectrum;
    private final TimeCourse course = new TimeCourse();
    private long events;
    private long delayed;
    private long notAdmitted;
    private long swapped;
    private long earliest = Long.MAX_VALUE;
    private long latest = Long.MIN_VALUE;
    private long before = Long.MIN_VALUE;
    private int elementBefore = -1;
    private long backwards;
    private long furthestBack;
    private long longestGap;
    private long longestGapAt;

    /**
     * Prepares to look at a list.
     *
     * @param system the system whose elements it names
     * @param attributes the columns of its events
     */
    public ListOverview(DetectorSystem system, Set<Attribute> attributes) {
        this.system = system;
        this.counts = new long[system.elements()];
        boolean singles = attributes.contains(Attribute.ELEMENT);
        this.elementA = singles ? Attribute.ELEMENT : Attribute.ELEMENT_A;
        this.elementB = singles ? null : Attribute.ELEMENT_B;
        for (Attribute energy : List.of(Attribute.ENERGY, Attribute.ENERGY_A, Attribute.ENERGY_B)) {
            if (attributes.contains(energy)) {
                energies.add(energy);
            }
        }
        this.timed = attributes.contains(Attribute.TIME);
        this.differences = attributes.contains(Attribute.TIME_DIFFERENCE);
        this.delayedKnown = attributes.contains(Attribute.DELAYED);
        this.differenceSpectrum =
                singles ? new Spectrum(DIFFERENCE_BINS, 0, LONGEST_TO_NEXT_PS) : new Spectrum(DIFFERENCE_BINS, false);
    }

    @Override
    public void accept(EventBlock block) {
        int size = block.size();
        events += size;
        countElements(block, elementA);
        countElements(block, elementB);
        if (elementA != null && elementB != null) {
            int[] a = block.ints(elementA);
            int[] b = block.ints(elementB);
            for (int i = 0; i < size; i++) {
                notAdmitted += isElement(a[i]) && isElement(b[i]) && !system.admits(a[i], b[i]) ? 1 : 0;
            }
        }
        for (Attribute energy : energies) {
            lookAtEnergies(block.floats(energy), size);
        }
        if (timed) {
            if (elementB == null && elementA != null) {
                lookAtNeighbours(block.longs(Attribute.TIME), block.ints(elementA), size);
            }
            lookAtTimes(block.longs(Attribute.TIME), size);
        }
        if (differences) {
            float[] values = block.floats(Attribute.TIME_DIFFERENCE);
            for (int i = 0; i < size; i++) {
                differenceSpectrum.add(values[i]);
            }
        }
        if (delayedKnown) {
            byte[] flags = block.bytes(Attribute.DELAYED);
            for (int i = 0; i < size; i++) {
                delayed += flags[i];
            }
        }
    }

    private boolean isElement(int element) {
        return element >= 0 && element < counts.length;
    }

    private void countElements(EventBlock block, @Nullable Attribute attribute) {
        if (attribute == null) {
            return;
        }
        int[] elements = block.ints(attribute);
        for (int i = 0; i < block.size(); i++) {
            if (isElement(elements[i])) {
                counts[elements[i]]++;
            }
        }
    }

    private void lookAtEnergies(float[] values, int size) {
        for (int i = 0; i < size; i++) {
            spectrum.add(values[i]);
            float other = Float.intBitsToFloat(Integer.reverseBytes(Float.floatToRawIntBits(values[i])));
            swapped += isPlausible(other) && !isPlausible(values[i]) ? 1 : 0;
        }
    }

    private static boolean isPlausible(float energyKeV) {
        return energyKeV >= 20 && energyKeV <= 2000;
    }

    /** How soon a single in another element follows. */
    private void lookAtNeighbours(long[] times, int[] elements, int size) {
        for (int i = 0; i < size; i++) {
            long earlier = i == 0 ? before : times[i - 1];
            int other = i == 0 ? elementBefore : elements[i - 1];
            if (earlier != Long.MIN_VALUE && other != elements[i]) {
                differenceSpectrum.add(Math.abs((double) times[i] - earlier));
            }
        }
        elementBefore = size == 0 ? elementBefore : elements[size - 1];
    }

    private void lookAtTimes(long[] times, int size) {
        for (int i = 0; i < size; i++) {
            long time = times[i];
            earliest = Math.min(earliest, time);
            latest = Math.max(latest, time);
            if (before != Long.MIN_VALUE) {
                long step = time - before;
                if (step < 0) {
                    backwards++;
                    furthestBack = Math.max(furthestBack, -step);
                } else if (step > longestGap) {
                    longestGap = step;
                    longestGapAt = before;
                }
            }
            before = time;
            course.add(time);
        }
    }

    /**
     * What has been seen so far.
     *
     * @return the figures
     */
    public ListFigures figures() {
        ListFigures.Energy energy = energies.isEmpty()
                ? null
                : new ListFigures.Energy(
                        spectrum.median(),
                        Photopeak.of(spectrum),
                        spectrum.total() == 0 ? 0 : swapped / (double) spectrum.total(),
                        ListFigures.Histogram.of(spectrum));
        ListFigures.Time time = !timed || events == 0
                ? null
                : new ListFigures.Time(
                        earliest,
                        latest,
                        backwards,
                        furthestBack,
                        longestGap,
                        longestGapAt,
                        new ListFigures.Histogram(
                                0,
                                course.stepPs() * 1e-12,
                                Arrays.stream(course.counts()).boxed().toList(),
                                0,
                                0));
        return new ListFigures(
                events,
                elements(),
                energy,
                time,
                differences || (timed && elementB == null)
                        ? new ListFigures.TimeDifference(
                                differenceSpectrum.median(), ListFigures.Histogram.of(differenceSpectrum))
                        : null,
                delayedKnown && events > 0 ? delayed / (double) events : null,
                elementB != null && events > 0 ? notAdmitted / (double) events : null);
    }

    private ListFigures.Elements elements() {
        int silent = 0;
        int busiest = 0;
        long sum = 0;
        long round = 0;
        List<String> ranges = new ArrayList<>();
        for (int e = 0; e < counts.length; e++) {
            sum += counts[e];
            round += e % 256 == 0 ? counts[e] : 0;
            busiest = counts[e] > counts[busiest] ? e : busiest;
            if (counts[e] == 0) {
                silent++;
                boolean begins = e == 0 || counts[e - 1] > 0;
                if (begins && ranges.size() < MOST_RANGES) {
                    int end = e;
                    while (end + 1 < counts.length && counts[end + 1] == 0) {
                        end++;
                    }
                    ranges.add(end == e ? Integer.toString(e) : e + "-" + end);
                }
            }
        }
        long[] sorted = counts.clone();
        Arrays.sort(sorted);
        return new ListFigures.Elements(
                counts.length,
                silent,
                List.copyOf(ranges),
                sorted[sorted.length / 2],
                counts[busiest],
                busiest,
                sum == 0 ? 0 : round / (double) sum,
                Arrays.stream(counts).boxed().toList());
    }
}
