package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.io.list.ListFile;
import org.raysheaf.io.list.ListFileException;
import org.raysheaf.io.picture.BoxOutline;
import org.raysheaf.io.picture.DetectorPicture;
import org.raysheaf.io.records.RecordImport;
import org.raysheaf.io.records.RecordsDescription;
import org.raysheaf.io.volume.Volume;
import org.raysheaf.io.volume.VolumeFile;
import org.raysheaf.transport.Acquisition;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** What a file is, and whether it is sound. */
@Command(
        name = "check",
        description =
                "What each file is, whether it is sound, and its figures: descriptions (.yaml), lists (.h5), volumes (.nii, .nii.gz, .h5).")
final class CheckVerb extends Verb {
    @Parameters(arity = "1..*", paramLabel = "FILE", description = "The files to check.")
    private List<Path> files;

    @Option(
            names = "--out",
            paramLabel = "FILE.png",
            description = "Also draw the detector, in three views, if a file describes one.")
    private @Nullable Path out;

    private final List<String> lines = new ArrayList<>();
    private final Map<String, Object> results = new LinkedHashMap<>();

    CheckVerb() {}

    @Override
    void run() throws IOException {
        for (Path file : files) {
            if (!Files.exists(file)) {
                throw new IOException(file + ": there is no such file");
            }
            lines.add(file.toString());
            Map<String, Object> figures = new LinkedHashMap<>();
            check(file, figures);
            figures.forEach((name, value) -> lines.add(String.format(Locale.ROOT, "  %-26s %s", name, value)));
            results.put(file.toString(), figures);
        }
        common().print(results, lines);
    }

    private void check(Path file, Map<String, Object> figures) throws IOException {
        String name = file.toString();
        if (name.endsWith(".yaml") || name.endsWith(".yml")) {
            description(file, figures);
        } else if (name.endsWith(".nii") || name.endsWith(".nii.gz")) {
            volume(file, figures);
        } else {
            listOrVolume(file, figures);
        }
    }

    private void description(Path file, Map<String, Object> figures) throws IOException {
        String kind = DescriptionReader.kindOf(file);
        figures.put("kind", kind + " description");
        switch (kind) {
            case "system" -> system(file, figures);
            case "phantom" -> {
                Phantom phantom = Phantoms.read(file);
                figures.put("parts", phantom.parts().size());
                figures.put("sources", phantom.description().sources().size());
                figures.put("activity_kBq", phantom.activityBq().value() / 1000);
            }
            case "acquisition" -> {
                Acquisition acquisition = DescriptionReader.read(file, kind, Acquisition.class);
                figures.put("system", sound(file, acquisition.system()));
                figures.put("phantom", sound(file, acquisition.phantom()));
                figures.put("duration_s", acquisition.durationS());
                figures.put("output", acquisition.output().phrase());
            }
            case RecordsDescription.KIND -> records(file, figures);
            case "reconstruction" -> {
                ReconstructionPlan plan = DescriptionReader.read(file, kind, ReconstructionPlan.class);
                figures.put("list", plan.list() == null ? "none" : sound(file, plan.list()));
                figures.put("passes", plan.estimation().passes());
                figures.put("subsets", plan.estimation().subsets());
            }
            default -> throw new IOException(file + ": a " + kind + " description is not known to this version");
        }
        figures.put("verdict", "sound");
    }

    private void records(Path file, Map<String, Object> figures) throws IOException {
        RecordsDescription records = DescriptionReader.read(file, RecordsDescription.KIND, RecordsDescription.class);
        Path system = file.resolveSibling(sound(file, records.system()));
        new RecordImport(
                        file,
                        records,
                        Systems.read(system, common(), common().pool(), common().progress())
                                .system())
                .verify();
        figures.put("records", records.name());
        figures.put("system", records.system());
        figures.put("columns", records.attributes().keySet());
    }

    private static String sound(Path file, String named) throws IOException {
        Path other = file.resolveSibling(named);
        if (!Files.exists(other)) {
            throw new IOException(file + ": names " + named + ", but there is no file " + other);
        }
        return named;
    }

    private void system(Path file, Map<String, Object> figures) throws IOException {
        Progress progress = common().progress();
        ForkJoinPool pool = common().pool();
        Systems systems = Systems.read(file, common(), pool, progress);
        SystemDescription description = systems.system().description();
        Coverage coverage = Coverage.atCentre(systems.system());
        double low = Double.POSITIVE_INFINITY;
        double high = Double.NEGATIVE_INFINITY;
        long pairs = 0;
        for (PlacedBlock a : systems.system().blocks()) {
            for (var corner : a.corners()) {
                low = Math.min(low, corner.z());
                high = Math.max(high, corner.z());
            }
            for (PlacedBlock b : systems.system().blocks().subList(0, a.index())) {
                if (systems.system().pairs().admits(a, b)) {
                    pairs += (long) a.kind().elements() * b.kind().elements();
                }
            }
        }
        figures.put("name", description.name());
        figures.put("blocks", systems.system().blocks().size());
        figures.put("elements", systems.system().elements());
        figures.put("pairs_of_elements", pairs);
        figures.put("axial_extent_mm", String.format(Locale.ROOT, "%.2f to %.2f", low, high));
        figures.put(
                "field_of_view_mm",
                "radius " + description.fieldOfView().radiusMm() + ", length "
                        + description.fieldOfView().lengthMm());
        figures.put("coverage_one_photon", coverage.one());
        figures.put("coverage_both_photons", coverage.both());
        if (out != null) {
            draw(systems, figures, out);
        }
    }

    private void draw(Systems systems, Map<String, Object> figures, Path picture) throws IOException {
        List<BoxOutline> boxes = systems.system().blocks().stream()
                .map(block -> new BoxOutline(List.of(block.corners()), 0))
                .toList();
        var view = systems.system().fieldOfView();
        DetectorPicture.write(
                boxes,
                view.radiusMm(),
                0.5 * view.lengthMm(),
                systems.system().description().name(),
                List.of(
                        figures.get("blocks") + " blocks, " + figures.get("elements") + " crystals, "
                                + figures.get("pairs_of_elements") + " pairs of crystals",
                        "seen from the centre: one photon " + figures.get("coverage_one_photon") + ", both "
                                + figures.get("coverage_both_photons")),
                picture,
                common().replace());
        figures.put("picture", picture.toString());
    }

    private void volume(Path file, Map<String, Object> figures) throws IOException {
        Volume volume = VolumeFile.read(file);
        var grid = volume.image().grid();
        figures.put("kind", "volume");
        figures.put("voxels", grid.nx() + " x " + grid.ny() + " x " + grid.nz());
        figures.put("spacing_mm", grid.spacingXMm() + " x " + grid.spacingYMm() + " x " + grid.spacingZMm());
        figures.put("unit", volume.unit());
        figures.put("sum", volume.image().sum());
        figures.put("verdict", "sound");
    }

    private void listOrVolume(Path file, Map<String, Object> figures) throws IOException {
        ListFile opened;
        try {
            opened = ListFile.open(file);
        } catch (ListFileException notAList) {
            try {
                volume(file, figures);
                return;
            } catch (IOException notAVolumeEither) {
                notAList.addSuppressed(notAVolumeEither);
                throw notAList;
            }
        }
        Systems systems = Systems.of(
                opened.header().systemDescription(),
                file + " (its system)",
                common(),
                common().pool(),
                common().progress());
        ListFile list = opened.withElements(systems.system().elements());
        list.verify();
        figures.put("kind", list.kind() == ListKind.PAIRS ? "list of coincidences" : "list of singles");
        figures.put("system", systems.system().description().name());
        figures.put("events", list.events());
        figures.put(
                "columns",
                list.attributes().stream().map(Attribute::columnName).sorted().toList());
        if (!list.truth().isEmpty()) {
            figures.put(
                    "truth",
                    list.truth().stream().map(Attribute::columnName).sorted().toList());
        }
        figures.put("start", list.header().start());
        figures.put("duration_s", list.header().durationS());
        figures.put("live_time_s", list.header().liveTimeS());
        figures.put(
                "nuclide",
                list.header().nuclide() == null
                        ? "not given"
                        : list.header().nuclide().name());
        ListLook.add(list, systems.system(), figures, common().progress());
    }
}
