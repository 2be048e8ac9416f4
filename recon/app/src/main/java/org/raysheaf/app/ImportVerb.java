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
import org.raysheaf.geometry.event.EventSink;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.list.ListWriter;
import org.raysheaf.io.overview.ListFigures;
import org.raysheaf.io.overview.ListOverview;
import org.raysheaf.io.overview.ListWarnings;
import org.raysheaf.io.overview.OverviewPage;
import org.raysheaf.io.records.ImportResult;
import org.raysheaf.io.records.RecordImport;
import org.raysheaf.io.records.RecordsDescription;
import org.raysheaf.io.result.ResultFile;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** The lab's own records. */
@Command(
        name = "import",
        description = {
            "A list from a lab's own records: text, binary, HDF5 or NumPy arrays, as RECORDS.yaml describes them.",
            "Without --out it only looks and says what it sees."
        })
final class ImportVerb extends Verb {
    @Parameters(
            index = "0",
            paramLabel = "RECORDS.yaml",
            description = "How to read the records; paths in it start from its folder.")
    private Path input;

    @Parameters(
            index = "1..*",
            arity = "1..*",
            paramLabel = "DATA",
            description = "The data files: parts in order of time, or one per board, as RECORDS.yaml says.")
    private List<Path> data;

    @Option(names = "--out", paramLabel = "LIST.h5", description = "The list to write (singles: then pair it).")
    private @Nullable Path out;

    @Option(names = "--first", paramLabel = "N", description = "Read only the first N records (of every board).")
    private @Nullable Long first;

    @Option(
            names = "--report",
            paramLabel = "NAME",
            description =
                    "Also write NAME.json and NAME.png: counts, spectrum, times, differences, what was set aside.")
    private @Nullable Path report;

    @Option(names = "--small", description = "Compress the list: about half the size, slower to write.")
    private boolean small;

    ImportVerb() {}

    @Override
    void run() throws IOException {
        if (first != null && first < 1) {
            throw new IOException("--first: expected a number of at least 1, found " + first);
        }
        if (out != null) {
            common().requireFree(out);
        }
        for (Path file : reportFiles()) {
            common().requireFree(file);
        }
        RecordsDescription description =
                DescriptionReader.read(input, RecordsDescription.KIND, RecordsDescription.class);
        for (Path file : data) {
            if (!Files.exists(file)) {
                throw new IOException(file + ": there is no such file");
            }
        }
        Systems systems = Systems.read(
                input.resolveSibling(description.system()), common(), common().pool(), common().progress());
        RecordImport work = new RecordImport(input, description, systems.system());
        ListOverview overview = new ListOverview(systems.system(), work.attributes());
        ImportResult result;
        ListHeader header;
        if (out == null) {
            result = work.run(data, overview, most(), common().progress());
            header = work.header(systems.text(), result);
        } else {
            Compression compression = small ? Compression.DEFLATE : Compression.NONE;
            try (ListWriter writer = ListWriter.create(work.attributes(), out, common().replace(), compression)) {
                EventSink both = block -> {
                    overview.accept(block);
                    writer.accept(block);
                };
                result = work.run(data, both, most(), common().progress());
                header = work.header(systems.text(), result);
                writer.commit(header);
            }
        }
        ListFigures figures = overview.figures();
        List<String> warnings = new ArrayList<>(mostlySetAside(result));
        warnings.addAll(ListWarnings.of(figures, header));
        List<String> lines = lines(result, figures, warnings);
        if (report != null) {
            writeReport(description.name(), result, figures, warnings);
            reportFiles().forEach(file -> lines.add("written " + file));
        }
        lines.add(out == null ? "nothing written; give --out LIST.h5 for a list" : "written " + out);
        lines.add(Common.CAUTION);
        Map<String, Object> results = new LinkedHashMap<>();
        results.put("list", out == null ? "none" : out.toString());
        results.put("import", result);
        results.put("warnings", warnings);
        common().print(results, lines);
    }

    private long most() {
        return first == null ? Long.MAX_VALUE : first;
    }

    private List<Path> reportFiles() {
        return report == null ? List.of() : List.of(Path.of(report + ".json"), Path.of(report + ".png"));
    }

    /** A description that sets most records aside is hardly right, whatever the reasons. */
    private static List<String> mostlySetAside(ImportResult result) {
        if (result.records() == 0 || result.written() >= 0.5 * result.records()) {
            return List.of();
        }
        String reason = result.setAside().entrySet().stream()
                .max(Map.Entry.comparingByValue())
                .map(entry -> entry.getKey())
                .orElse("");
        return List.of(String.format(
                Locale.ROOT,
                "%.0f %% of the records were set aside, most for \"%s\": check byte_order, places of fields, units and tables of the description",
                100 * (1 - result.written() / (double) result.records()),
                reason));
    }

    private static List<String> lines(ImportResult result, ListFigures figures, List<String> warnings) {
        String row = "           %,12d %s";
        List<String> lines = new ArrayList<>();
        lines.add(String.format(Locale.ROOT, "records    %,12d read", result.records()));
        lines.add(String.format(Locale.ROOT, row, result.written(), "written"));
        result.setAside()
                .forEach((why, count) -> lines.add(String.format(Locale.ROOT, row, count, "set aside: " + why)));
        result.marks()
                .forEach((type, count) -> lines.add(String.format(Locale.ROOT, row, count, "beside them: " + type)));
        result.unreadable()
                .forEach((why, count) -> lines.add(String.format(Locale.ROOT, row, count, "unreadable: " + why)));
        if (result.bytesPassedOver() > 0) {
            lines.add(String.format(Locale.ROOT, row, result.bytesPassedOver(), "bytes passed over"));
        }
        result.unreadableExamples().stream().limit(3).forEach(example -> lines.add("           e.g. " + example));
        result.clocks()
                .forEach((name, clock) -> lines.add(String.format(
                        Locale.ROOT,
                        "clock      %s wrapped around %,d times, went back %,d times",
                        name,
                        clock.wraps(),
                        clock.stepsBack())));
        if (!result.unmapped().isEmpty()) {
            lines.add(String.format(
                    Locale.ROOT,
                    "unmapped   %s (%,d values each): read and serve nothing",
                    String.join(", ", result.unmapped()),
                    result.records()));
        }
        if (!result.unread().isEmpty()) {
            lines.add("not read   " + String.join(", ", result.unread()));
        }
        lines.addAll(ListLook.lines(figures));
        warnings.forEach(warning -> lines.add("warning    " + warning));
        return lines;
    }

    /** What became of the records, in a few lines of a picture. */
    private static List<String> notes(ImportResult result) {
        List<String> notes = new ArrayList<>();
        notes.add(String.format(Locale.ROOT, "%,d records read, %,d written", result.records(), result.written()));
        notes.add(counts("set aside", result.setAside()));
        notes.add(counts("beside them", result.marks()));
        notes.add(counts("unreadable", result.unreadable()));
        result.clocks()
                .forEach((name, clock) -> notes.add(String.format(
                        Locale.ROOT,
                        "clock %s: wrapped around %,d times, went back %,d times",
                        name,
                        clock.wraps(),
                        clock.stepsBack())));
        notes.removeIf(String::isEmpty);
        return notes;
    }

    private static String counts(String what, Map<String, Long> counts) {
        List<String> parts = new ArrayList<>();
        counts.forEach((name, count) -> parts.add(String.format(Locale.ROOT, "%s %,d", name, count)));
        return parts.isEmpty() ? "" : what + ": " + String.join(", ", parts);
    }

    private void writeReport(String name, ImportResult result, ListFigures figures, List<String> warnings)
            throws IOException {
        Map<String, Object> all = new LinkedHashMap<>();
        all.put("records", name);
        all.put("data", data.stream().map(Path::toString).toList());
        all.put("import", result);
        all.put("overview", figures);
        all.put("warnings", warnings);
        ResultFile.write(all, reportFiles().get(0), common().replace());
        OverviewPage.write(name, figures, notes(result), warnings, reportFiles().get(1), common().replace());
    }
}
