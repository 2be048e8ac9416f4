package org.raysheaf.io.overview;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.PairingRecord;

/** What in a list will hurt its reconstruction, and what to do about it. The limits are named below with their reasons. */
public final class ListWarnings {
    /** In a list of few events elements are silent by chance: of counts with mean m, exp(−m) are 0; from 20 on none is. */
    private static final double MEAN_THAT_LEAVES_NONE_SILENT = 20;

    /** A photopeak of annihilation photons farther from 511 keV than this share is no drift any more. */
    private static final double PEAK_TOLERANCE = 0.1;

    private static final double ANNIHILATION_KEV = 510.999;

    /** Electronics write nearly in order of time; where every fifth event goes back, the numbers are no times. */
    private static final double CHAOS = 0.2;

    /** Of numbers that are spread evenly, one in 256 is a multiple of 256. */
    private static final double ROUND_SHARE = 0.3;

    /** Ratios by which units of time or energy differ, within a factor of 3. */
    private static final double[] UNIT_RATIOS = {1e3, 1e6, 1e9, 1e12};

    private static final double UNIT_SLACK = 3;

    private final List<String> found = new ArrayList<>();

    private ListWarnings() {}

    /**
     * Judges a list.
     *
     * @param figures what was seen of it
     * @param header what it says about itself
     * @return one sentence per warning: what, and the fix; empty if all is well
     */
    public static List<String> of(ListFigures figures, ListHeader header) {
        ListWarnings warnings = new ListWarnings();
        if (figures.events() == 0) {
            return List.of("no events: nothing can be reconstructed; look at what the import set aside, and why");
        }
        warnings.elements(figures);
        ListFigures.Energy energy = figures.energy();
        if (energy != null) {
            warnings.energies(energy, header.pairing());
        }
        ListFigures.Time time = figures.time();
        if (time != null) {
            warnings.times(time, figures.events(), header);
        }
        warnings.pairs(figures);
        return List.copyOf(warnings.found);
    }

    private void warn(String format, Object... values) {
        found.add(String.format(Locale.ROOT, format, values));
    }

    private void elements(ListFigures figures) {
        ListFigures.Elements elements = figures.elements();
        boolean manyElements = elements.number() > 1024;
        if (manyElements && elements.multiplesOf256() > ROUND_SHARE) {
            warn(
                    "%.0f %% of all counts are in elements whose number is a multiple of 256: the bytes of the element (or channel)"
                            + " look swapped; set byte_order in the description of the records to the other value",
                    100 * elements.multiplesOf256());
        }
        double mean = 0;
        for (long count : elements.counts()) {
            mean += count / (double) elements.number();
        }
        if (elements.silent() > 0 && mean > MEAN_THAT_LEAVES_NONE_SILENT) {
            warn(
                    "%d of %d elements have no counts (%s%s): dead channels, or a look-up table that never names them;"
                            + " check the table, and tell the reconstruction about dead elements by a normalization",
                    elements.silent(),
                    elements.number(),
                    String.join(", ", elements.silentRanges()),
                    elements.silentRanges().size() < 12 ? "" : ", …");
        }
        if (elements.median() > MEAN_THAT_LEAVES_NONE_SILENT && elements.most() > 20 * elements.median()) {
            warn(
                    "element %d has %,d counts, the middle element %,d: a noisy channel; add it to a list of bad channels"
                            + " (set_aside with a file)",
                    elements.busiest(), elements.most(), elements.median());
        }
    }

    private void energies(ListFigures.Energy energy, @Nullable PairingRecord pairing) {
        double median = energy.median();
        if (energy.swappedShare() > 0.5) {
            warn(
                    "%.0f %% of the energies make sense only with their bytes in the other order:"
                            + " set byte_order in the description of the records to the other value",
                    100 * energy.swappedShare());
            return;
        }
        if (median < 20 || median > 20_000) {
            String guess = "";
            for (double ratio : UNIT_RATIOS) {
                if (isNear(median * ratio, 400)) {
                    guess = ratio == 1e3 ? " (they look like MeV)" : "";
                } else if (isNear(median / ratio, 400)) {
                    guess = ratio == 1e3 ? " (they look like eV)" : "";
                }
            }
            warn(
                    "the middle energy is %.3g keV%s: not of annihilation photons; state the unit of the energies in the"
                            + " description of the records (unit: MeV or eV), or calibrate them",
                    median, guess);
            return;
        }
        Photopeak peak = energy.photopeak();
        if (peak == null) {
            warn(
                    "no photopeak was found in the spectrum: energies may be amplitudes without calibration; run calibrate");
        } else if (Math.abs(peak.position() - ANNIHILATION_KEV) > PEAK_TOLERANCE * ANNIHILATION_KEV) {
            warn(
                    "the photopeak is at %.0f keV, expected near 511 keV: the gain is off by a factor %.2f; run calibrate, or"
                            + " correct the unit",
                    peak.position(), ANNIHILATION_KEV / peak.position());
        }
        if (pairing != null) {
            outsideWindow(
                    energy,
                    pairing.settings().lowestKeV(),
                    pairing.settings().highestKeV() == null
                            ? Double.POSITIVE_INFINITY
                            : pairing.settings().highestKeV());
        }
    }

    private void outsideWindow(ListFigures.Energy energy, double lowest, double highest) {
        ListFigures.Histogram spectrum = energy.spectrum();
        long outside = lowest > spectrum.low() ? spectrum.below() : 0;
        outside += Double.isInfinite(highest) ? 0 : spectrum.above();
        long all = spectrum.below() + spectrum.above();
        for (int i = 0; i < spectrum.counts().size(); i++) {
            double low = spectrum.low() + i * spectrum.step();
            long count = spectrum.counts().get(i);
            all += count;
            outside += low + spectrum.step() <= lowest || low >= highest ? count : 0;
        }
        if (outside > 0.01 * all) {
            warn(
                    "%.1f %% of the energies are outside the window of %.0f to %.0f keV that the list names:"
                            + " correct the window or the calibration",
                    100.0 * outside / all, lowest, highest);
        }
    }

    private void times(ListFigures.Time time, long events, ListHeader header) {
        double spanS = (time.lastPs() - (double) time.firstPs()) * 1e-12;
        double durationS = header.durationS();
        if (time.backwards() > CHAOS * events) {
            warn(
                    "%.0f %% of the events are earlier than the one before: these numbers are hardly times;"
                            + " the byte order, the place or the sign of the time is wrong in the description of the records",
                    100.0 * time.backwards() / events);
        } else if (time.backwards() > 0) {
            warn(
                    "%,d events are earlier than the one before, by up to %,.0f ns: set order_ns in the description of the records"
                            + " to that or more, or give pair --disorder-ns",
                    time.backwards(), time.furthestBackPs() * 1e-3);
        }
        if (header.liveTimeS() > spanS * 1.05 && header.liveTimeS() > spanS + 1) {
            warn(
                    "the live time of %.6g s is longer than the %.6g s from the first event to the last%s",
                    header.liveTimeS(), spanS, unitGuess(header.liveTimeS() / spanS, "correct live_time_s", "larger"));
        }
        if (time.lastPs() * 1e-12 > durationS * 1.001) {
            warn(
                    "the last event is at %.6g s, after the end of the acquisition of %.6g s%s",
                    time.lastPs() * 1e-12,
                    durationS,
                    unitGuess(time.lastPs() * 1e-12 / durationS, "correct duration_s", "smaller"));
        }
        if (time.backwards() == 0
                && events > 1000
                && time.longestGapPs() > 0.05e12 * spanS
                && time.longestGapPs() > 1e9) {
            warn(
                    "no event for %.3g s from %.6g s on: if the acquisition paused there, the live time is shorter than the"
                            + " clock says; correct live_time_s",
                    time.longestGapPs() * 1e-12, time.longestGapAtPs() * 1e-12);
        }
    }

    private static String unitGuess(double ratio, String otherwise, String direction) {
        for (double unit : UNIT_RATIOS) {
            if (isNear(ratio, unit)) {
                return String.format(
                        Locale.ROOT,
                        ", by a factor near %.0e: the unit of the times looks wrong; a %s one (unit: ps, ns, us, ms or s) or"
                                + " another tick_ps would fit",
                        unit,
                        direction);
            }
        }
        return "; " + otherwise + ", or the unit of the times";
    }

    private static boolean isNear(double value, double target) {
        return value > target / UNIT_SLACK && value < target * UNIT_SLACK;
    }

    private void pairs(ListFigures figures) {
        Double notAdmitted = figures.notAdmittedShare();
        if (notAdmitted != null && notAdmitted > 0.01) {
            warn(
                    "%.1f %% of the pairs are between blocks too close to each other to be paired (blocks_apart), and will be set"
                            + " aside: the elements may be numbered otherwise than in the system; check the look-up table",
                    100 * notAdmitted);
        }
    }
}
