package org.raysheaf.app;

import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.Estimate;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.io.result.NotKnown;
import org.raysheaf.quality.HalfDifference;

/**
 * The figures of an image.
 *
 * @param totalKBq activity in the whole image (kBq)
 * @param standardErrorKBq its error from counting alone (kBq)
 * @param maxKBqPerMl largest voxel (kBq/mL)
 * @param noise noise of a voxel, if halves were made
 */
record Figures(
        double totalKBq,
        double standardErrorKBq,
        double maxKBqPerMl,
        @Nullable HalfDifference noise) {
    private static final String HOW =
            "root mean square of (odd - even) / (odd + even) over all voxels, each weighted by its activity;"
                    + " error by leaving out one block of the volume after another (jackknife)";

    static Figures of(Reconstruction done) {
        Image image = done.whole().image();
        double total = image.sum() * 1e-6 * image.grid().voxelVolumeMm3();
        float max = 0;
        for (float value : image.values()) {
            max = Math.max(max, value);
        }
        double bound = 1 / Math.sqrt((double) Math.max(1, done.whole().events()));
        Estimate odd = done.odd();
        Estimate even = done.even();
        HalfDifference noise = odd == null || even == null ? null : HalfDifference.of(odd.image(), even.image());
        return new Figures(total, total * bound, 1e-3 * max, noise);
    }

    /** As result.json has them. */
    Map<String, Object> named(ListHeader header) {
        Map<String, Object> named = new LinkedHashMap<>();
        named.put("unit", ResultFolder.UNIT);
        named.put("reference_time", header.start().toString());
        named.put("total_kBq", totalKBq);
        named.put("total_standard_error_kBq", standardErrorKBq);
        named.put("total_standard_error_from", "Poisson bound 1/sqrt(events used); model errors are not in it");
        named.put("max_kBq_per_mL", maxKBqPerMl);
        named.put("noise", noise == null ? new NotKnown("no halves were made, see --halves") : named(noise));
        return named;
    }

    private static Map<String, Object> named(HalfDifference noise) {
        Map<String, Object> named = new LinkedHashMap<>();
        named.put("relative_noise", noise.relativeNoise());
        named.put(
                "standard_error",
                noise.standardError().isPresent()
                        ? noise.standardError().getAsDouble()
                        : new NotKnown("the activity sits in too few blocks"));
        named.put("from", HOW);
        named.put("correlation_mm", noise.correlationMm());
        named.put("block_mm", noise.blockMm());
        named.put("blocks", noise.blocks());
        named.put("relative_difference_of_totals", noise.relativeDifference());
        return named;
    }

    /** As a table. */
    List<String> lines() {
        String activity = String.format(
                Locale.ROOT,
                "activity   %.1f ± %.1f kBq in the image (counting only), at most %.1f kBq/mL",
                totalKBq,
                standardErrorKBq,
                maxKBqPerMl);
        if (noise == null) {
            return List.of(activity);
        }
        String error = noise.standardError().isPresent()
                ? String.format(
                        Locale.ROOT, " ± %.1f %%", 100 * noise.standardError().getAsDouble())
                : " % (error not known: activity in too few places)";
        return List.of(
                activity,
                String.format(Locale.ROOT, "noise      %.1f", 100 * noise.relativeNoise()) + error
                        + " of a voxel's activity, weighted by activity, from odd and even events");
    }
}
