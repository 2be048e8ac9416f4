package org.raysheaf.app;

import java.io.IOException;
import java.util.LinkedHashMap;
import java.util.Locale;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.ray.Walks;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.FlightTimes;

/**
 * Decides whether the time differences of a list are used, and says so.
 *
 * @param list the list
 * @param system its system
 * @param wanted what the plan says
 */
record TimesOfFlight(EventSource list, DetectorSystem system, Corrections.TimeOfFlight wanted) {
    /** Parts of the catalogue over which the width is averaged. */
    private static final int SAMPLED_PARTS = 12;

    /**
     * The times to use, or null; what was decided is added to the report.
     *
     * @throws IOException if they are wanted always and cannot be used
     */
    @Nullable
    FlightTimes choose(CoincidenceSheaves sheaves, boolean randoms, Applied applied) throws IOException {
        FlightTimes times = FlightTimes.of(system);
        String obstacle = obstacle(times, randoms);
        if (times == null || obstacle != null) {
            if (wanted == Corrections.TimeOfFlight.ALWAYS) {
                throw new IOException("time_of_flight: always, but " + obstacle);
            }
            applied.leave("time of flight (" + obstacle + ")");
            return null;
        }
        if (wanted == Corrections.TimeOfFlight.NEVER) {
            applied.leave("time of flight (the plan says never)");
            return null;
        }
        double sdMm = meanSdMm(sheaves, times);
        double radiusMm = system.fieldOfView().radiusMm();
        if (wanted == Corrections.TimeOfFlight.AUTO && sdMm > radiusMm) {
            applied.leave(String.format(
                    Locale.ROOT,
                    "time of flight (it tells the place to %.1f mm (standard deviation), too little in a field of view of"
                            + " radius %s mm)",
                    sdMm,
                    radiusMm));
            return null;
        }
        Map<String, Object> row = new LinkedHashMap<>();
        row.put("sd_mm", sdMm);
        row.put("time_difference_sd_ps", sdMm / FlightTimes.MM_PER_PS);
        row.put("followed_to_sd", Walks.REACH);
        row.put("share_of_density_further_out", Walks.LOSS);
        applied.add("time_of_flight", row);
        return times;
    }

    private @Nullable String obstacle(@Nullable FlightTimes times, boolean randoms) throws IOException {
        if (!list.attributes().contains(Attribute.TIME_DIFFERENCE)) {
            return "the list has no column " + Attribute.TIME_DIFFERENCE.columnName();
        }
        if (times == null) {
            return "a block of the system has no time_fwhm_ps above 0 in its readout";
        }
        if (randoms && list.header().pairing() == null) {
            return "the list does not tell its pairing window, over which randoms spread";
        }
        return null;
    }

    /** Standard deviation along the line, averaged over pairs of some blocks. */
    static double meanSdMm(CoincidenceSheaves sheaves, FlightTimes times) {
        double[] sum = new double[2];
        int parts = sheaves.parts();
        for (int i = 0; i < Math.min(SAMPLED_PARTS, parts); i++) {
            sheaves.visit((int) ((long) i * parts / SAMPLED_PARTS % parts), (a, b, line) -> {
                sum[0] += times.sdMm(a, b, line);
                sum[1]++;
            });
        }
        return sum[1] > 0 ? sum[0] / sum[1] : times.leastSdMm();
    }
}
