package org.raysheaf.engine;

import java.util.List;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.frame.Image;

/**
 * An image and how it came about.
 *
 * @param image activity concentration (Bq/mL), after the post-filter if there was one
 * @param passes what each pass did, in order
 * @param kept number of the pass whose image this is
 * @param reason why that one, in words
 * @param tally what became of the events of the list
 * @param events events that took part; fewer than the tally's used ones if only the odd or the even ones were selected
 * @param subsets updates per pass
 * @param lanes accumulator images that were used; needed to get the same bits again
 * @param postFilterFwhmMm width of the post-filter (mm), 0 for none
 * @param seconds how long the passes and the filter took by the clock
 */
public record Estimate(
        Image image,
        List<PassReport> passes,
        int kept,
        String reason,
        EventTally tally,
        long events,
        int subsets,
        int lanes,
        double postFilterFwhmMm,
        double seconds) {
    /** Copies the list of passes. */
    public Estimate {
        passes = List.copyOf(passes);
    }
}
