package org.raysheaf.app;

import java.io.IOException;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.FlightTimes;
import org.raysheaf.io.list.ListFile;
import org.raysheaf.io.overview.ListFigures;
import org.raysheaf.io.overview.ListOverview;
import org.raysheaf.io.overview.ListWarnings;
import org.raysheaf.io.overview.Photopeak;

/** What check says of the events of a list. */
final class ListLook {
    private static final int BLOCK = 1 << 14;

    private ListLook() {}

    /** Reads a list once and adds what was seen, and what will hurt, to the figures of check. */
    static void add(ListFile list, DetectorSystem system, Map<String, Object> figures, Progress progress)
            throws IOException {
        ListOverview overview = new ListOverview(system, list.attributes());
        EventBlock block = new EventBlock(list.attributes(), BLOCK);
        progress.begin("looking at the events", list.events(), "events");
        try (EventSource.Cursor cursor = list.open()) {
            while (cursor.next(block)) {
                overview.accept(block);
                progress.advance(block.size());
            }
        }
        progress.end("");
        ListFigures seen = overview.figures();
        for (String line : lines(seen)) {
            figures.put(line.substring(0, 11).strip(), line.substring(11));
        }
        FlightTimes times = FlightTimes.of(system);
        if (times != null && list.attributes().contains(Attribute.TIME_DIFFERENCE)) {
            figures.put(
                    "flight",
                    String.format(
                            Locale.ROOT,
                            "time differences tell the place on a line to %.1f mm (standard deviation of the times alone)",
                            times.leastSdMm()));
        }
        List<String> warnings = new ArrayList<>(list.warnings());
        warnings.addAll(ListWarnings.of(seen, list.header()));
        figures.put("warnings", warnings);
        figures.put("verdict", warnings.isEmpty() ? "sound" : "usable, see the warnings");
    }

    /** The figures of a list, for people; every line begins with a name of at most ten letters. */
    static List<String> lines(ListFigures figures) {
        List<String> lines = new ArrayList<>();
        ListFigures.Elements elements = figures.elements();
        lines.add(String.format(
                Locale.ROOT,
                "elements   %,d, %,d of them silent; the middle one has %,d counts, the busiest (%d) %,d",
                elements.number(),
                elements.silent(),
                elements.median(),
                elements.busiest(),
                elements.most()));
        ListFigures.Energy energy = figures.energy();
        if (energy != null) {
            Photopeak peak = energy.photopeak();
            lines.add("energies   "
                    + (peak == null
                            ? String.format(Locale.ROOT, "median %.4g keV, no photopeak found", energy.median())
                            : String.format(
                                    Locale.ROOT,
                                    "photopeak at %.1f ± %.1f keV, FWHM %.1f %%",
                                    peak.position(),
                                    peak.positionError(),
                                    100 * peak.fwhm() / peak.position())));
        }
        ListFigures.Time time = figures.time();
        if (time != null) {
            lines.add(String.format(
                    Locale.ROOT,
                    "times      %.6g to %.6g s; %,d steps back%s; longest gap %.3g s",
                    time.firstPs() * 1e-12,
                    time.lastPs() * 1e-12,
                    time.backwards(),
                    time.backwards() == 0
                            ? ""
                            : String.format(Locale.ROOT, " of up to %.3g ns", time.furthestBackPs() * 1e-3),
                    time.longestGapPs() * 1e-12));
        }
        ListFigures.TimeDifference difference = figures.timeDifference();
        if (difference != null && figures.notAdmittedShare() != null) {
            lines.add(String.format(Locale.ROOT, "difference median %.1f ps", difference.median()));
        }
        Double delayed = figures.delayedShare();
        if (delayed != null) {
            lines.add(String.format(Locale.ROOT, "delayed    %.2f %% of the pairs", 100 * delayed));
        }
        return lines;
    }
}
