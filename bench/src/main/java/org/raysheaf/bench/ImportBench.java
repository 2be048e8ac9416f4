package org.raysheaf.bench;

import java.io.BufferedOutputStream;
import java.io.IOException;
import java.io.OutputStream;
import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.SplittableRandom;
import java.util.concurrent.Callable;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.event.EventSink;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.io.list.ListWriter;
import org.raysheaf.io.overview.ListOverview;
import org.raysheaf.io.records.ImportResult;
import org.raysheaf.io.records.RecordImport;
import org.raysheaf.io.records.RecordsDescription;
import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;

/**
 * How many megabytes of lab records per second an import takes in, on one thread, and whether its memory grows with the file. Binary: records of 16 bytes,
 * big-endian, with marks among them, a channel table, an energy calibration per channel and a clock that wraps around; text: six columns of numbers. Files are
 * made for the purpose and removed afterwards.
 */
@Command(
        name = "bench/run import",
        description = "Speed and memory of an import of made-up records.",
        mixinStandardHelpOptions = true,
        showDefaultValues = true)
public final class ImportBench implements Callable<Integer> {
    private static final int MARK_EVERY = 1000;
    private static final int CHANNELS = 4608;

    @Option(names = "--megabytes", defaultValue = "500", description = "Size of the files (MB).")
    private long megabytes;

    @Option(names = "--rounds", defaultValue = "3", description = "Rounds.")
    private int rounds;

    @Option(names = "--folder", description = "Where to make files; by default a temporary folder.")
    private Path folder = Path.of(System.getProperty("java.io.tmpdir", "/tmp"));

    /** For picocli. */
    ImportBench() {}

    /**
     * Runs the bench.
     *
     * @param arguments see {@code --help}
     */
    public static void main(String[] arguments) {
        System.exit(new CommandLine(new ImportBench()).execute(arguments));
    }

    private static final String ATTRIBUTES = """
            compute:
              crystal: {kind: table, file: channels.csv, key: channel, column: element}
              energy: {kind: energy, file: channels.csv, key: channel, of: amplitude}
              time: {kind: clock, of: tick, tick_ps: 15.625, bits: 40}
            set_aside: [{reason: saturated, value: amplitude, in: [4095]}]
            attributes:
              element: {from: crystal}
              time_ps: {from: time}
              energy_keV: {from: energy}
            """;

    private static final String BINARY = """
            raysheaf: records/1
            name: bench
            system: none
            format:
              kind: binary
              byte_order: big
              records:
                - name: event
                  bytes: 16
                  when: [{bit: 124, bits: 4, equals: "1"}]
                  fields:
                    - {name: channel, bit: 100, bits: 14}
                    - {name: amplitude, bit: 84, bits: 12}
                    - {name: quality, bit: 64, bits: 8}
                    - {name: tick, bit: 3, bits: 40}
                - {name: mark, bytes: 16, role: mark, when: [{bit: 124, bits: 4, equals: "2"}], fields: [{name: rate, bit: 0, bits: 32}]}
            """ + ATTRIBUTES;

    private static final String TEXT = """
            raysheaf: records/1
            name: bench
            system: none
            format:
              kind: text
              fields:
                - {name: channel, column: 1, type: integer}
                - {name: amplitude, column: 2}
                - {name: tick, column: 3, type: integer}
                - {name: quality, column: 4}
            """ + ATTRIBUTES;

    @Override
    public Integer call() throws IOException {
        Path work = Files.createTempDirectory(folder, "raysheaf-import-bench");
        try {
            writeTable(work.resolve("channels.csv"));
            Path binary = work.resolve("run.dat");
            Path text = work.resolve("run.txt");
            long size = megabytes * 1_000_000;
            writeBinary(binary, size);
            writeText(text, size);
            DetectorSystem system = system();
            run("binary", BINARY, binary, work, system);
            run("text", TEXT, text, work, system);
            System.out.printf(
                    Locale.ROOT,
                    "peak heap %.0f MB, peak resident %.0f MB%n",
                    Memory.peakHeap() * 1e-6,
                    Memory.peakResident().orElse(0) * 1e-6);
            return 0;
        } finally {
            try (var files = Files.list(work)) {
                for (Path file : files.toList()) {
                    Files.deleteIfExists(file);
                }
            }
            Files.deleteIfExists(work);
        }
    }

    private void run(String what, String yaml, Path data, Path work, DetectorSystem system) throws IOException {
        RecordsDescription description =
                DescriptionReader.readText(yaml, "bench", RecordsDescription.KIND, RecordsDescription.class);
        RecordImport job = new RecordImport(work.resolve("records.yaml"), description, system);
        List<Double> bare = new ArrayList<>();
        List<Double> whole = new ArrayList<>();
        Path list = work.resolve("list.h5");
        for (int round = 0; round < rounds; round++) {
            bare.add(time(job, data, block -> {}));
            ListOverview overview = new ListOverview(system, job.attributes());
            long begun = System.nanoTime();
            try (ListWriter writer = ListWriter.create(job.attributes(), list, true)) {
                ImportResult result = job.run(
                        List.of(data),
                        block -> {
                            overview.accept(block);
                            writer.accept(block);
                        },
                        Long.MAX_VALUE,
                        Progress.SILENT);
                writer.commit(job.header("", result));
                whole.add(result.bytes() * 1e-6 / ((System.nanoTime() - begun) * 1e-9));
            }
        }
        print(what + ", read and mapped", bare);
        print(what + ", list and overview too", whole);
    }

    private static double time(RecordImport job, Path data, EventSink sink) throws IOException {
        long begun = System.nanoTime();
        ImportResult result = job.run(List.of(data), sink, Long.MAX_VALUE, Progress.SILENT);
        if (!result.addsUp() || result.written() == 0) {
            throw new IOException("the counts do not add up: " + result);
        }
        return result.bytes() * 1e-6 / ((System.nanoTime() - begun) * 1e-9);
    }

    private static void print(String what, List<Double> values) {
        List<Double> sorted = values.stream().sorted().toList();
        System.out.printf(
                Locale.ROOT,
                "%-32s %6.0f MB/s (%.0f to %.0f in %d rounds)%n",
                what,
                sorted.get(sorted.size() / 2),
                sorted.get(0),
                sorted.get(sorted.size() - 1),
                sorted.size());
    }

    private static DetectorSystem system() throws IOException {
        String text = """
                raysheaf: system/1
                name: bench
                field_of_view: {radius_mm: 29, length_mm: 62}
                blocks:
                  - {kind: crystal_block, name: tile, columns: 8, rows: 8, pitch_mm: [2, 2, 10], crystal_mm: [1.9, 1.9, 10], material: lyso}
                placements:
                  - {kind: rings, block: tile, count: 18, inner_radius_mm: 60, axial_mm: [-30, -10, 10, 30]}
                """;
        return new DetectorSystem(DescriptionReader.readText(text, "bench", "system", SystemDescription.class));
    }

    private static void writeTable(Path path) throws IOException {
        StringBuilder table = new StringBuilder("channel,element,gain_keV,offset_keV\n");
        for (int c = 0; c < CHANNELS; c++) {
            table.append(c)
                    .append(',')
                    .append(CHANNELS - 1 - c)
                    .append(',')
                    .append(0.25 + 1e-5 * c)
                    .append(",3\n");
        }
        Files.writeString(path, table.toString());
    }

    private static void writeBinary(Path path, long size) throws IOException {
        SplittableRandom random = new SplittableRandom(1);
        try (OutputStream out = new BufferedOutputStream(Files.newOutputStream(path), 1 << 20)) {
            ByteBuffer record = ByteBuffer.allocate(16);
            long tick = 0;
            for (long i = 0; i < size / 16; i++) {
                tick += random.nextInt(200_000);
                boolean mark = i % MARK_EVERY == 0;
                long high = (mark ? 2L : 1L) << 60
                        | (long) random.nextInt(CHANNELS) << 36
                        | (long) random.nextInt(4096) << 20
                        | random.nextInt(256);
                record.putLong(0, high).putLong(8, (tick & 0xff_ffff_ffffL) << 3);
                out.write(record.array());
            }
        }
    }

    private static void writeText(Path path, long size) throws IOException {
        SplittableRandom random = new SplittableRandom(1);
        try (OutputStream out = new BufferedOutputStream(Files.newOutputStream(path), 1 << 20)) {
            long tick = 0;
            long written = 0;
            while (written < size) {
                tick = (tick + random.nextInt(200_000)) & 0xff_ffff_ffffL;
                String line = random.nextInt(CHANNELS) + "," + random.nextInt(40960) / 10.0 + "," + tick + ","
                        + random.nextInt(1000) / 1000.0 + ",ok,17\n";
                out.write(line.getBytes(StandardCharsets.US_ASCII));
                written += line.length();
            }
        }
    }
}
