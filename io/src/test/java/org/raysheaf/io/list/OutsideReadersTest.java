package org.raysheaf.io.list;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.file.Path;
import java.security.MessageDigest;
import java.util.HexFormat;
import java.util.List;
import java.util.Locale;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.io.OutsideReader;
import org.raysheaf.io.hdf5.Compression;

/** What others make of our lists. */
class OutsideReadersTest {
    @TempDir
    Path folder;

    @ParameterizedTest
    @CsvSource({"0,NONE,9", "1,DEFLATE,9", "1000,NONE,9", "1000,DEFLATE,9", "50000,NONE,7", "5000,DEFLATE,262144"})
    void h5pyFindsEveryValueAndAttribute(int events, Compression compression, int chunkLength) throws IOException {
        OutsideReader.assumePython("h5py", "numpy");
        EventBlock block = SampleLists.block(events, 1);
        Path path = SampleLists.write(folder.resolve("list.h5"), compression, chunkLength, block);

        List<String> printed = OutsideReader.pythonFile(getClass(), "describe.py", path)
                .lines()
                .toList();

        for (Attribute attribute : SampleLists.ALL) {
            String type = attribute.type().toString().toLowerCase(Locale.ROOT);
            assertThat(printed)
                    .contains(String.join(
                            "|", attribute.columnName(), type, Integer.toString(events), digest(block, attribute)));
            assertThat(printed).contains(attribute.columnName() + ".unit|" + attribute.unit());
            assertThat(printed).contains(attribute.columnName() + ".meaning|" + attribute.meaning());
        }
        assertThat(printed)
                .contains(
                        ".raysheaf|list/1",
                        ".duration_s|600.0",
                        ".live_time_s|580.5",
                        ".start|2026-03-01T09:30:00Z",
                        ".nuclide|F-18",
                        ".half_life_s|6586.2",
                        ".positron_branching|0.9686",
                        ".events|" + events,
                        "system.sha256 matches");
    }

    private static String digest(EventBlock block, Attribute attribute) {
        int n = block.size();
        ByteBuffer bytes = ByteBuffer.allocate(n * attribute.type().bytes()).order(ByteOrder.LITTLE_ENDIAN);
        switch (attribute.type()) {
            case UINT8 -> bytes.put(0, block.bytes(attribute), 0, n);
            case UINT32 -> bytes.asIntBuffer().put(block.ints(attribute), 0, n);
            case INT64 -> bytes.asLongBuffer().put(block.longs(attribute), 0, n);
            case FLOAT32 -> bytes.asFloatBuffer().put(block.floats(attribute), 0, n);
        }
        MessageDigest sha256 = ListFormat.newSha256();
        sha256.update(bytes);
        return HexFormat.of().formatHex(sha256.digest());
    }

    @Test
    void h5dumpShowsTheStructure() throws IOException {
        OutsideReader.assumeH5dump();
        Path path = SampleLists.write(folder.resolve("list.h5"), SampleLists.block(100, 2));

        String printed = OutsideReader.run(List.of("h5dump", "-H", "-p", path.toString()));

        assertThat(printed)
                .contains(
                        "ATTRIBUTE \"raysheaf\"",
                        "DATASET \"element_a\"",
                        "H5T_STD_U32LE",
                        "COMPRESSION DEFLATE",
                        "GROUP \"crc32c\"");
    }

    @Test
    void aListWrittenWithAFewLinesOfH5pyIsAList() throws IOException {
        OutsideReader.assumePython("h5py", "numpy");
        Path path = folder.resolve("plain.h5");

        OutsideReader.pythonFile(getClass(), "plain.py", path);

        ListFile list = ListFile.open(path).withElements(200);
        EventBlock events = SampleLists.read(list);
        assertThat(events.ints(Attribute.ELEMENT_A)).containsExactly(0, 17, 4, 2);
        assertThat(events.ints(Attribute.ELEMENT_B)).containsExactly(100, 117, 104, 102);
        assertThat(list.header().liveTimeS()).isEqualTo(600);
        assertThat(list.header().systemDescription()).startsWith("raysheaf: system/1\n");
        assertThat(list.warnings()).hasSize(2);
    }
}
