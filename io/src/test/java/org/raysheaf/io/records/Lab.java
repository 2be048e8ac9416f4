package org.raysheaf.io.records;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.List;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.description.DescriptionReader;

/** An invented lab: a small system, and imports into memory. */
final class Lab {
    /** Two facing panels of 2 x 2 blocks of 8 x 8 crystals: 512 elements. */
    static final String SYSTEM = """
            raysheaf: system/1
            name: finch
            field_of_view: {radius_mm: 10, length_mm: 20}
            blocks:
              - kind: crystal_block
                name: tile
                columns: 8
                rows: 8
                pitch_mm: [2, 2, 10]
                crystal_mm: [1.9, 1.9, 10]
                material: lyso
            placements:
              - {kind: panel, block: tile, columns: 2, rows: 2, pitch_mm: [17, 17, 0], centre_mm: [0, 30, 0], facing: [0, -1, 0]}
              - {kind: panel, block: tile, columns: 2, rows: 2, pitch_mm: [17, 17, 0], centre_mm: [0, -30, 0], facing: [0, 1, 0]}
            """;

    static final int ELEMENTS = 512;

    private Lab() {}

    static DetectorSystem system() {
        try {
            return new DetectorSystem(DescriptionReader.readText(SYSTEM, "finch", "system", SystemDescription.class));
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    static RecordsDescription describe(String yaml) throws IOException {
        return DescriptionReader.readText(
                "raysheaf: records/1\nname: test\nsystem: finch.yaml\n" + yaml,
                "RECORDS.yaml",
                RecordsDescription.KIND,
                RecordsDescription.class);
    }

    /** What an import gave. */
    record Imported(EventBlock events, ImportResult result) {}

    static Imported run(Path folder, String yaml, Path... files) throws IOException {
        return run(folder, yaml, Long.MAX_VALUE, files);
    }

    static Imported run(Path folder, String yaml, long most, Path... files) throws IOException {
        RecordImport work = new RecordImport(folder.resolve("RECORDS.yaml"), describe(yaml), system());
        Memory memory = new Memory(work);
        ImportResult result = work.run(List.of(files), memory, most, Progress.SILENT);
        return new Imported(memory.all, result);
    }

    /** Keeps all events. */
    static final class Memory implements EventSink {
        EventBlock all;

        Memory(RecordImport work) {
            all = new EventBlock(work.attributes(), 1 << 12);
        }

        @Override
        public void accept(EventBlock block) {
            if (all.size() + block.size() > all.capacity()) {
                EventBlock larger =
                        new EventBlock(all.attributes(), Math.max(2 * all.capacity(), all.size() + block.size()));
                EventRows.append(all, 0, all.size(), larger);
                all = larger;
            }
            EventRows.append(block, 0, block.size(), all);
        }
    }

    static Path text(Path folder, String name, String content) throws IOException {
        return Files.writeString(folder.resolve(name), content, StandardCharsets.UTF_8);
    }

    static long[] times(Imported imported) {
        return Arrays.copyOf(
                imported.events().longs(Attribute.TIME), imported.events().size());
    }

    static int[] elements(Imported imported) {
        return Arrays.copyOf(
                imported.events().ints(Attribute.ELEMENT), imported.events().size());
    }

    static float[] energies(Imported imported) {
        return Arrays.copyOf(
                imported.events().floats(Attribute.ENERGY), imported.events().size());
    }
}
