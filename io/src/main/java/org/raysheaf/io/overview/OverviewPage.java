package org.raysheaf.io.overview;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Locale;
import org.raysheaf.io.picture.PlotPage;

/** The figures of a list as a page of histograms. */
public final class OverviewPage {
    private static final int MOST_BARS = 660;

    private OverviewPage() {}

    /**
     * Draws and writes the page.
     *
     * @param title title of the page
     * @param figures what was seen
     * @param notes further lines of text, such as what became of records
     * @param warnings what will hurt, drawn as lines of text
     * @param file the PNG file to make
     * @param replace whether an existing file may be overwritten
     * @throws IOException if the file cannot be written, or Java finds no font
     */
    public static void write(
            String title, ListFigures figures, List<String> notes, List<String> warnings, Path file, boolean replace)
            throws IOException {
        List<PlotPage.Plot> plots = new ArrayList<>();
        plots.add(elements(figures.elements()));
        ListFigures.Energy energy = figures.energy();
        if (energy != null) {
            plots.add(energy(energy));
        }
        ListFigures.Time time = figures.time();
        if (time != null) {
            plots.add(course(time));
        }
        ListFigures.TimeDifference difference = figures.timeDifference();
        if (difference != null) {
            boolean singles = figures.notAdmittedShare() == null;
            plots.add(plot(
                    singles ? "from a single to the next" : "time differences",
                    singles
                            ? "time to the next single in another element (ps)"
                            : "arrival of b minus arrival of a (ps)",
                    difference.histogram(),
                    singles ? null : difference.median(),
                    singles
                            ? "photons that belong together stand out near 0"
                            : String.format(Locale.ROOT, "median %.1f ps", difference.median())));
        }
        List<String> lines = new ArrayList<>();
        Double delayed = figures.delayedShare();
        lines.add(String.format(Locale.ROOT, "%,d events", figures.events())
                + (delayed == null ? "" : String.format(Locale.ROOT, ", %.2f %% of them delayed", 100 * delayed)));
        lines.addAll(notes);
        warnings.forEach(warning -> lines.add("! " + warning));
        PlotPage.write(title, lines, plots, file, replace);
    }

    /** Counts of elements; neighbours share a bar if there are more elements than pixels. */
    private static PlotPage.Plot elements(ListFigures.Elements elements) {
        int together = (elements.number() + MOST_BARS - 1) / MOST_BARS;
        double[] bars = new double[(elements.number() + together - 1) / together];
        for (int e = 0; e < elements.number(); e++) {
            bars[e / together] += elements.counts().get(e) / (double) together;
        }
        return new PlotPage.Plot(
                "counts per element",
                "element",
                0,
                together,
                Arrays.stream(bars).boxed().toList(),
                null,
                elements.silent() + " of " + elements.number() + " silent");
    }

    private static PlotPage.Plot energy(ListFigures.Energy energy) {
        Photopeak peak = energy.photopeak();
        String note = peak == null
                ? "no photopeak found"
                : String.format(
                        Locale.ROOT,
                        "photopeak %.1f ± %.1f keV, FWHM %.1f %%",
                        peak.position(),
                        peak.positionError(),
                        100 * peak.fwhm() / peak.position());
        return plot("energies", "energy (keV)", energy.spectrum(), peak == null ? null : peak.position(), note);
    }

    private static PlotPage.Plot course(ListFigures.Time time) {
        ListFigures.Histogram all = time.course();
        int used = all.counts().size();
        while (used > 1 && all.counts().get(used - 1) == 0) {
            used--;
        }
        double[] rates = new double[used];
        for (int i = 0; i < used; i++) {
            rates[i] = all.counts().get(i) / all.step();
        }
        return new PlotPage.Plot(
                "events per second",
                "time (s)",
                0,
                all.step(),
                Arrays.stream(rates).boxed().toList(),
                null,
                String.format(
                        Locale.ROOT,
                        "%,d steps back, longest gap %.3g s",
                        time.backwards(),
                        time.longestGapPs() * 1e-12));
    }

    private static PlotPage.Plot plot(
            String title,
            String horizontal,
            ListFigures.Histogram histogram,
            @org.jspecify.annotations.Nullable Double mark,
            String note) {
        List<Double> heights =
                histogram.counts().stream().map(Long::doubleValue).toList();
        return new PlotPage.Plot(title, horizontal, histogram.low(), histogram.step(), heights, mark, note);
    }
}
