package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.Estimate;
import org.raysheaf.engine.PassReport;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.io.cache.Cache;
import org.raysheaf.io.description.DescriptionWriter;
import org.raysheaf.io.file.AtomicFile;
import org.raysheaf.io.picture.SlicePicture;
import org.raysheaf.io.result.NotKnown;
import org.raysheaf.io.result.ResultFile;
import org.raysheaf.io.volume.VolumeFile;
import org.raysheaf.quality.HalfDifference;

/** The folder that a reconstruction leaves behind, and what is said about it on screen. */
final class ResultFolder {
    private static final String UNIT = "kBq/mL";
    private static final List<String> NAMES = List.of(
            "activity.nii.gz",
            "activity.h5",
            "activity-odd.nii.gz",
            "activity-even.nii.gz",
            "sensitivity.nii.gz",
            "planes.png",
            "calibration.yaml",
            "result.json");

    private final Path folder;
    private final boolean replace;

    ResultFolder(Path folder, boolean replace) {
        this.folder = folder;
        this.replace = replace;
    }

    /** Refuses, before any work, a folder that already holds results. */
    void requireFree() throws IOException {
        if (Files.exists(folder) && !Files.isDirectory(folder)) {
            throw new IOException(folder + ": expected a folder, found a file; choose another --out");
        }
        for (String name : NAMES) {
            if (!replace && Files.exists(folder.resolve(name))) {
                throw new IOException(
                        folder + " already holds results (" + name + "); choose another --out or add --replace");
            }
        }
    }

    /** Writes everything and returns what result.json says. */
    Map<String, Object> write(Reconstruction done, @Nullable Calibration calibration, int threads) throws IOException {
        Files.createDirectories(folder);
        Image activity = kilo(done.whole().image());
        volume(activity, UNIT, "activity.nii.gz");
        volume(activity, UNIT, "activity.h5");
        volume(done.model().counts(), "mL/Bq", "sensitivity.nii.gz");
        Estimate odd = done.odd();
        Estimate even = done.even();
        if (odd != null && even != null) {
            volume(kilo(odd.image()), UNIT, "activity-odd.nii.gz");
            volume(kilo(even.image()), UNIT, "activity-even.nii.gz");
        }
        SlicePicture.write(
                activity, UNIT, centre(activity), "activity concentration", folder.resolve("planes.png"), replace);
        Map<String, Object> results = results(done, activity, threads);
        if (calibration != null) {
            results.put("calibration", calibration);
            String text = DescriptionWriter.render("calibration", calibration);
            AtomicFile.write(folder.resolve("calibration.yaml"), replace, file -> Files.writeString(file, text));
        }
        ResultFile.write(results, folder.resolve("result.json"), replace);
        return results;
    }

    private void volume(Image image, String unit, String name) throws IOException {
        VolumeFile.write(image, unit, folder.resolve(name), replace);
    }

    private static Image kilo(Image bqPerMl) {
        Image image = bqPerMl.copy();
        for (int j = 0; j < image.values().length; j++) {
            image.values()[j] *= 1e-3f;
        }
        return image;
    }

    /** The activity-weighted centre, on the middle of a voxel so that planes are not blurred. */
    private static Vector3 centre(Image image) {
        Grid grid = image.grid();
        Vector3 sum = Vector3.ZERO;
        double total = 0;
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    double value = image.at(x, y, z);
                    sum = sum.plus(new Vector3(x, y, z).times(value));
                    total += value;
                }
            }
        }
        if (!(total > 0)) {
            return grid.pose().origin();
        }
        Vector3 mean = sum.times(1 / total);
        return grid.centre(Math.rint(mean.x()), Math.rint(mean.y()), Math.rint(mean.z()));
    }

    private static Map<String, Object> results(Reconstruction done, Image activity, int threads) {
        ListHeader header = done.list().header();
        Map<String, Object> results = new LinkedHashMap<>();
        results.put("caution", Common.CAUTION);
        results.put("version", Raysheaf.version());
        results.put("list", list(done, header));
        results.put(
                "system",
                Map.of(
                        "name", done.systems().system().description().name(),
                        "elements", done.systems().system().elements(),
                        "sha256", Cache.digest(done.systems().text())));
        results.put("plan", done.plan());
        results.put(
                "grid",
                Map.of(
                        "voxels",
                                List.of(
                                        done.grid().nx(),
                                        done.grid().ny(),
                                        done.grid().nz()),
                        "spacing_mm",
                                List.of(
                                        done.grid().spacingXMm(),
                                        done.grid().spacingYMm(),
                                        done.grid().spacingZMm()),
                        "centre_mm", List.of(0, 0, 0)));
        results.put("events", accounting(done.whole().tally()));
        results.put("activity", Figures.of(done, activity).named(header));
        results.put(
                "corrections",
                Map.of(
                        "applied",
                        done.model().applied(),
                        "not_applied",
                        done.model().left()));
        results.put("passes", passes(done.whole()));
        results.put("lanes", done.whole().lanes());
        results.put("threads", threads);
        results.put("seconds", done.whole().seconds());
        return results;
    }

    private static Map<String, Object> list(Reconstruction done, ListHeader header) {
        Map<String, Object> list = new LinkedHashMap<>();
        list.put("events", done.list().events());
        list.put("digest", done.list().digest().map(d -> (Object) d).orElse(new NotKnown("the list has no checksums")));
        list.put("start", header.start().toString());
        list.put("duration_s", header.durationS());
        list.put("live_time_s", header.liveTimeS());
        list.put("nuclide", header.nuclide() == null ? new NotKnown("the list does not say") : header.nuclide());
        return list;
    }

    private static Map<String, Object> accounting(EventTally tally) {
        Map<String, Object> events = new LinkedHashMap<>();
        events.put("read", tally.read());
        events.put("used", tally.used());
        Map<String, Object> aside = new LinkedHashMap<>();
        for (EventTally.Reason reason : EventTally.Reason.values()) {
            aside.put(reason.words(), tally.setAsideFor(reason));
        }
        events.put("set_aside", aside);
        return events;
    }

    /** The figures of the image: total activity with the error of counting, and the noise if halves were made. */
    private record Figures(
            double totalKBq,
            double standardErrorKBq,
            double maxKBqPerMl,
            @Nullable HalfDifference noise) {
        static Figures of(Reconstruction done, Image activity) {
            double total = activity.sum() * 1e-3 * activity.grid().voxelVolumeMm3();
            float max = 0;
            for (float value : activity.values()) {
                max = Math.max(max, value);
            }
            double bound = 1 / Math.sqrt((double) Math.max(1, done.whole().events()));
            Estimate odd = done.odd();
            Estimate even = done.even();
            HalfDifference noise = odd == null || even == null || !(max > 0)
                    ? null
                    : HalfDifference.of(kilo(odd.image()), kilo(even.image()), hot(activity, 0.5f * max));
            return new Figures(total, total * bound, max, noise);
        }

        Map<String, Object> named(ListHeader header) {
            Map<String, Object> named = new LinkedHashMap<>();
            named.put("unit", UNIT);
            named.put("reference_time", header.start().toString());
            named.put("total_kBq", totalKBq);
            named.put("total_standard_error_kBq", standardErrorKBq);
            named.put("total_standard_error_from", "Poisson bound 1/sqrt(events used); model errors are not in it");
            named.put("max_kBq_per_mL", maxKBqPerMl);
            named.put(
                    "noise_where_above_half_max",
                    noise == null ? new NotKnown("no halves were made, see --halves") : noise);
            return named;
        }
    }

    private static Image hot(Image activity, float above) {
        Image region = new Image(activity.grid());
        for (int j = 0; j < region.values().length; j++) {
            region.values()[j] = activity.values()[j] >= above ? 1 : 0;
        }
        return region;
    }

    private static List<Map<String, Object>> passes(Estimate estimate) {
        List<Map<String, Object>> passes = new ArrayList<>();
        for (PassReport pass : estimate.passes()) {
            Map<String, Object> row = new LinkedHashMap<>();
            row.put("pass", pass.number());
            row.put("log_likelihood", pass.logLikelihood());
            row.put("expected_events", pass.expectedEvents());
            row.put("seconds", pass.seconds());
            passes.add(row);
        }
        return passes;
    }

    /** What is said on screen. */
    List<String> lines(Reconstruction done) {
        List<String> lines = new ArrayList<>();
        Grid grid = done.grid();
        lines.add(String.format(
                Locale.ROOT,
                "image      %d x %d x %d voxels of %.3f mm, %d passes, %d subsets, post-filter %.1f mm, in %s",
                grid.nx(),
                grid.ny(),
                grid.nz(),
                grid.spacingXMm(),
                done.whole().passes().size(),
                done.whole().subsets(),
                done.whole().postFilterFwhmMm(),
                UNIT));
        EventTally tally = done.whole().tally();
        lines.add(String.format(Locale.ROOT, "events     %,12d read", tally.read()));
        lines.add(String.format(Locale.ROOT, "           %,12d used", tally.used()));
        for (EventTally.Reason reason : EventTally.Reason.values()) {
            if (tally.setAsideFor(reason) > 0) {
                lines.add(String.format(
                        Locale.ROOT, "           %,12d set aside: %s", tally.setAsideFor(reason), reason.words()));
            }
        }
        Figures figures = Figures.of(done, kilo(done.whole().image()));
        lines.add(String.format(
                Locale.ROOT,
                "activity   %.1f ± %.1f kBq in the image (counting only), at most %.1f kBq/mL",
                figures.totalKBq(),
                figures.standardErrorKBq(),
                figures.maxKBqPerMl()));
        HalfDifference noise = figures.noise();
        if (noise != null) {
            lines.add(String.format(
                    Locale.ROOT,
                    "noise      %.1f ± %.1f %% per voxel where above half the maximum, from odd and even events",
                    100 * noise.relativeNoise(),
                    100 * noise.relativeNoiseError()));
        }
        if (!done.model().left().isEmpty()) {
            lines.add("           not corrected for "
                    + String.join(", ", done.model().left()));
        }
        lines.add("written    " + folder);
        for (String name : NAMES) {
            if (Files.exists(folder.resolve(name))) {
                lines.add("           " + folder.resolve(name));
            }
        }
        lines.add(Common.CAUTION);
        return lines;
    }
}
