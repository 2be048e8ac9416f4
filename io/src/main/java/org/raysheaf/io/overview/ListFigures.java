package org.raysheaf.io.overview;

import java.util.Arrays;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * What was seen of a list.
 *
 * @param events number of events
 * @param elements what elements counted
 * @param energy the energies, or null if the list has none
 * @param time the times, or null if the list has none
 * @param timeDifference differences of arrival, or null if the list has neither these nor times of singles
 * @param delayedShare share of delayed pairs, or null if the list does not tell
 * @param notAdmittedShare share of pairs whose blocks are too close to be paired, or null for singles
 */
public record ListFigures(
        long events,
        Elements elements,
        @Nullable Energy energy,
        @Nullable Time time,
        @Nullable TimeDifference timeDifference,
        @Nullable Double delayedShare,
        @Nullable Double notAdmittedShare) {

    /**
     * What elements counted; every pair counts in both.
     *
     * @param number elements of the system
     * @param silent elements without any count
     * @param silentRanges the first of them, as ranges
     * @param median counts of the middle element
     * @param most counts of the busiest element
     * @param busiest the busiest element
     * @param multiplesOf256 share of counts in elements whose number is a multiple of 256
     * @param counts counts of every element
     */
    public record Elements(
            int number,
            int silent,
            List<String> silentRanges,
            long median,
            long most,
            int busiest,
            double multiplesOf256,
            List<Long> counts) {}

    /**
     * A histogram.
     *
     * @param low lower edge
     * @param step width of a bin
     * @param counts counts
     * @param below values below it
     * @param above values above it
     */
    public record Histogram(double low, double step, List<Long> counts, long below, long above) {
        static Histogram of(Spectrum spectrum) {
            return new Histogram(
                    spectrum.low(),
                    spectrum.step(),
                    Arrays.stream(spectrum.counts()).boxed().toList(),
                    spectrum.below(),
                    spectrum.above());
        }
    }

    /**
     * Energies of all photons (keV).
     *
     * @param median the middle one (keV)
     * @param photopeak the photopeak (keV), or null if none was found
     * @param swappedShare share of energies that would be within 20 to 2000 keV if their four bytes stood in the other order, and are not as they are
     * @param spectrum the spectrum (keV)
     */
    public record Energy(double median, @Nullable Photopeak photopeak, double swappedShare, Histogram spectrum) {}

    /**
     * Times.
     *
     * @param firstPs the earliest (ps)
     * @param lastPs the latest (ps)
     * @param backwards events earlier than the one before
     * @param furthestBackPs the largest such step (ps)
     * @param longestGapPs the longest time without an event (ps), as far as events are in order
     * @param longestGapAtPs when it began (ps)
     * @param course events per bin of time (s)
     */
    public record Time(
            long firstPs,
            long lastPs,
            long backwards,
            long furthestBackPs,
            long longestGapPs,
            long longestGapAtPs,
            Histogram course) {}

    /**
     * Differences of arrival in pairs (ps), or of a single from the one before it in another element (ps): there photons that belong together show as a peak at 0.
     *
     * @param median the middle one (ps)
     * @param histogram the distribution (ps)
     */
    public record TimeDifference(double median, Histogram histogram) {}
}
