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
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.io.records.CalibrationResult;
import org.raysheaf.io.records.RecordCalibration;
import org.raysheaf.io.records.RecordsDescription;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** Gains and time offsets of channels from the lab's own records. */
@Command(
        name = "calibrate",
        description = {
            "Gains and time offsets of all channels from the lab's own records: the photopeak of every channel, and the",
            "time differences of pairs. The section calibration of RECORDS.yaml says which values to look at."
        })
final class CalibrateVerb extends Verb {
    private static final int SHOWN = 10;

    @Parameters(
            index = "0",
            paramLabel = "RECORDS.yaml",
            description = "How to read the records; paths in it start from its folder.")
    private Path input;

    @Parameters(index = "1..*", arity = "1..*", paramLabel = "DATA", description = "The data files.")
    private List<Path> data;

    @Option(
            names = "--out",
            required = true,
            paramLabel = "CALIBRATION.csv",
            description = "The table to write: channel, gain_keV, time_offset_ps and their errors.")
    private Path out;

    @Option(
            names = "--source-mm",
            split = ",",
            paramLabel = "MM",
            description = "x,y,z of a point source; its flight paths are taken off the time differences.")
    private double @Nullable [] sourceMm;

    @Option(
            names = "--positions",
            paramLabel = "POSITIONS.csv",
            description =
                    "Where channels are (channel, x_mm, y_mm, z_mm), for --source-mm. Default: where their elements are.")
    private @Nullable Path positions;

    CalibrateVerb() {}

    @Override
    void run() throws IOException {
        common().requireFree(out);
        if (sourceMm != null && sourceMm.length != 3) {
            throw new IOException("--source-mm: expected three numbers such as 0,0,5, found " + sourceMm.length);
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
        Vector3 source = sourceMm == null ? null : new Vector3(sourceMm[0], sourceMm[1], sourceMm[2]);
        CalibrationResult result = new RecordCalibration(input, description, systems.system())
                .run(data, source, positions, common().progress());
        result.write(out, common().replace());
        print(result);
    }

    private void print(CalibrationResult result) {
        List<String> lines = new ArrayList<>();
        long gains = result.channels().stream().filter(c -> c.gainKeV() != null).count();
        long offsets =
                result.channels().stream().filter(c -> c.timeOffsetPs() != null).count();
        lines.add(String.format(
                Locale.ROOT,
                "%,d records, %,d channels: %,d gains, %,d time offsets",
                result.records(),
                result.channels().size(),
                gains,
                offsets));
        Double spread = result.timeSpreadPs();
        if (spread != null) {
            lines.add(String.format(
                    Locale.ROOT,
                    "time differences scatter by %.0f ps (standard deviation, FWHM %.0f ps) about the solution",
                    spread,
                    2.3548 * spread));
        }
        result.failures().stream().limit(SHOWN).forEach(failure -> lines.add("failed: " + failure));
        if (result.failures().size() > SHOWN) {
            lines.add("failed: " + (result.failures().size() - SHOWN) + " more; all stand in " + out);
        }
        lines.add("written " + out);
        lines.add(Common.CAUTION);
        Map<String, Object> results = new LinkedHashMap<>();
        results.put("calibration", out.toString());
        results.put("result", result);
        common().print(results, lines);
    }
}
