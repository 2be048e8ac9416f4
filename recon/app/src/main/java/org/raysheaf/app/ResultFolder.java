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
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.io.description.DescriptionWriter;
import org.raysheaf.io.file.AtomicFile;
import org.raysheaf.io.file.Sha256;
import org.raysheaf.io.picture.SlicePicture;
import org.raysheaf.io.result.NotKnown;
import org.raysheaf.io.result.ResultFile;
import org.raysheaf.io.volume.VolumeFile;

/** The folder that a reconstruction leaves behind, and what is said about it on screen. */
final class ResultFolder {
    static final String UNIT = "kBq/mL";
    /** Everything that a reconstruction may leave behind. The last one is written last, and removed first: a folder that has it is complete. */
    private static final List<String> NAMES = List.of(
            "activity.nii.gz",
            "activity.h5",
            "activity-odd.nii.gz",
            "activity-even.nii.gz",
            "activity-frames.nii.gz",
            "sensitivity.nii.gz",
            "sensitivity-error.nii.gz",
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

    /** Writes everything, in place of all that an earlier reconstruction left if that may be replaced, and returns what result.json says. */
    Map<String, Object> write(Reconstruction done, Figures figures, @Nullable Calibration calibration, int threads)
            throws IOException {
        Map<String, Object> results = results(done, figures, threads);
        Files.createDirectories(folder);
        if (replace) {
            for (int i = NAMES.size() - 1; i >= 0; i--) {
                Files.deleteIfExists(folder.resolve(NAMES.get(i)));
            }
        }
        Image activity = kilo(done.whole().image());
        volume(activity, UNIT, "activity.nii.gz");
        volume(activity, UNIT, "activity.h5");
        volume(done.model().counts(), "mL/Bq", "sensitivity.nii.gz");
        Image countsError = done.model().countsError();
        if (countsError != null) {
            volume(countsError, "mL/Bq", "sensitivity-error.nii.gz");
        }
        Estimate odd = done.odd();
        Estimate even = done.even();
        if (odd != null && even != null) {
            volume(kilo(odd.image()), UNIT, "activity-odd.nii.gz");
            volume(kilo(even.image()), UNIT, "activity-even.nii.gz");
        }
        if (!done.frames().isEmpty()) {
            List<Image> frames =
                    done.frames().stream().map(frame -> kilo(frame.image())).toList();
            VolumeFile.writeSeries(frames, UNIT, folder.resolve("activity-frames.nii.gz"), replace);
        }
        SlicePicture.write(
                activity, UNIT, centre(activity), "activity concentration", folder.resolve("planes.png"), replace);
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

    private static Map<String, Object> results(Reconstruction done, Figures figures, int threads) {
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
                        "sha256", Sha256.ofText(done.systems().text())));
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
        results.put("events", new Accounting(done.whole().tally()).named());
        results.put("activity", figures.named(header));
        results.put(
                "corrections",
                Map.of(
                        "applied",
                        done.model().applied(),
                        "not_applied",
                        done.model().left()));
        if (!done.frames().isEmpty()) {
            results.put("frames", done.frames().stream().map(FrameImage::named).toList());
        }
        BlurChoice blur = done.blur();
        results.put("blur", blur == null ? new NotKnown("nothing was undone; see the key blur") : blur.named());
        results.put("passes", passes(done.whole()));
        results.put(
                "kept_pass",
                Map.of("pass", done.whole().kept(), "reason", done.whole().reason()));
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

    private static List<Map<String, Object>> passes(Estimate estimate) {
        List<Map<String, Object>> passes = new ArrayList<>();
        for (PassReport pass : estimate.passes()) {
            Map<String, Object> row = new LinkedHashMap<>();
            row.put("pass", pass.number());
            row.put("log_likelihood", pass.logLikelihood());
            if (pass.penalty() > 0) {
                row.put("penalty", pass.penalty());
            }
            if (!Double.isNaN(pass.heldOut())) {
                row.put("held_out_log_likelihood", pass.heldOut());
            }
            row.put("expected_events", pass.expectedEvents());
            row.put("seconds", pass.seconds());
            passes.add(row);
        }
        return passes;
    }

    /** What is said on screen. */
    List<String> lines(Reconstruction done, Figures figures) {
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
        if (done.plan().estimation().stop() != null) {
            lines.add("stopped    image after pass " + done.whole().kept() + ": "
                    + done.whole().reason());
        }
        lines.addAll(new Accounting(done.whole().tally()).lines());
        lines.addAll(figures.lines());
        for (FrameImage frame : done.frames()) {
            lines.add(String.format(
                    Locale.ROOT,
                    "%-10s %.1f kBq at the start of the list, from %,d events, %s",
                    frame.frame().name(),
                    frame.totalKBq(),
                    frame.events(),
                    frame.frame().where()));
        }
        if (!done.model().left().isEmpty()) {
            lines.add("left out   " + String.join("; ", done.model().left()));
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
