package org.raysheaf.io.hdf5;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import io.jhdf.HdfFile;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.SplittableRandom;
import java.util.stream.IntStream;
import java.util.stream.LongStream;
import java.util.stream.Stream;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class Hdf5RoundTripTest {
    @TempDir
    Path folder;

    private Path path;

    @BeforeEach
    void choosePath() {
        path = folder.resolve("file.h5");
    }

    /** Chunk counts around a full index node of 64 children, and above two full levels of 64² = 4096. */
    @ParameterizedTest
    @CsvSource({"0,NONE", "1,DEFLATE", "63,NONE", "64,NONE", "65,DEFLATE", "4096,NONE", "4097,NONE", "4200,DEFLATE"})
    void indexesAnyNumberOfChunks(int chunks, Compression compression) throws IOException {
        int[] values = IntStream.range(0, 3 * chunks).map(i -> i * i).toArray();
        try (Hdf5Writer file = Hdf5Writer.create(path, false)) {
            file.root().column("c", ElementType.UINT32, 3, compression).append(values, 0, values.length);
            file.commit();
        }

        try (Hdf5File file = Hdf5File.open(path)) {
            int[] read = new int[values.length];
            int[] checksums = file.root().checksums("c");
            file.root().dataset("c").orElseThrow().values(checksums).read(read, 0, read.length);
            assertThat(checksums).hasSize(chunks);
            assertThat(read).isEqualTo(values);
        }
        if (chunks > 0) { // the other reader refuses empty chunked data
            try (HdfFile other = new HdfFile(path)) {
                assertThat(other.getDatasetByPath("c").getData()).isEqualTo(unsigned(values));
            }
        }
    }

    @Test
    void isRecognisedByItsBytesWhateverItsName() throws IOException {
        Path odd = folder.resolve("no-ending");
        try (Hdf5Writer file = Hdf5Writer.create(odd, false)) {
            file.commit();
        }
        assertThat(Hdf5File.recognises(odd)).isTrue();
        assertThat(Hdf5File.recognises(Files.writeString(path, "raysheaf: system/1\n")))
                .isFalse();
        assertThat(Hdf5File.recognises(Files.write(path, new byte[0]))).isFalse();
    }

    private static long[] unsigned(int[] values) {
        return IntStream.of(values).mapToLong(Integer::toUnsignedLong).toArray();
    }

    @Test
    void keepsColumnsOfEveryTypeWrittenSideBySide() throws IOException {
        byte[] bytes = {0, 1, -1, 127, -128};
        long[] longs = {Long.MIN_VALUE, -1, 0, 1, Long.MAX_VALUE};
        float[] floats = {-0.0f, Float.MIN_VALUE, Float.NaN, Float.NEGATIVE_INFINITY, 511};
        double[] doubles = {Math.PI, Double.MIN_VALUE, -1e300, 0, 1};
        try (Hdf5Writer file = Hdf5Writer.create(path, false)) {
            GroupWriter group = file.root().group("g");
            ColumnWriter b = group.column("b", ElementType.UINT8, 2, Compression.DEFLATE);
            ColumnWriter l = group.column("l", ElementType.INT64, 2, Compression.DEFLATE);
            ColumnWriter f = group.column("f", ElementType.FLOAT32, 2, Compression.NONE);
            ColumnWriter d = group.column("d", ElementType.FLOAT64, 2, Compression.NONE);
            for (int i = 0; i < 5; i++) {
                b.append(bytes, i, 1);
                l.append(longs, i, 1);
                f.append(floats, i, 1);
                d.append(doubles, i, 1);
            }
            file.commit();
        }

        try (Hdf5File file = Hdf5File.open(path)) {
            StoredGroup group = file.root().group("g").orElseThrow();
            byte[] b = new byte[5];
            long[] l = new long[5];
            float[] f = new float[5];
            group.dataset("b").orElseThrow().values(group.checksums("b")).read(b, 0, 5);
            group.dataset("l").orElseThrow().values(group.checksums("l")).read(l, 0, 5);
            group.dataset("f").orElseThrow().values(group.checksums("f")).read(f, 0, 5);
            assertThat(b).isEqualTo(bytes);
            assertThat(l).isEqualTo(longs);
            assertThat(f).isEqualTo(floats);
            assertThat(group.dataset("d").orElseThrow().floats())
                    .startsWith((float) Math.PI, 0f, Float.NEGATIVE_INFINITY);
            assertThat(group.names()).containsExactly("b", "l", "f", "d", "crc32c");
        }
    }

    @Test
    void keepsVolumesTextsAndAttributes() throws IOException {
        float[] volume = new float[3 * 4 * 5];
        SplittableRandom random = new SplittableRandom(1);
        for (int i = 0; i < volume.length; i++) {
            volume[i] = random.nextInt();
        }
        String longText = "µ ≈ 0.0096 mm⁻¹\n".repeat(100_000); // far beyond what an attribute may hold
        try (Hdf5Writer file = Hdf5Writer.create(path, false)) {
            ArrayWriter array = file.root().array("activity", volume, 3, 4, 5);
            array.attribute("unit", "kBq/mL");
            array.attribute("spacing_mm", new double[] {0.5, 0.5, 0.8});
            array.attribute("passes", 20L);
            array.attribute("scale", 0.1);
            file.root().text("notes", longText);
            file.root().text("nothing", "");
            file.commit();
        }

        try (Hdf5File file = Hdf5File.open(path)) {
            StoredDataset dataset = file.root().dataset("activity").orElseThrow();
            assertThat(dataset.shape()).containsExactly(3, 4, 5);
            assertThat(dataset.floats()).isEqualTo(volume);
            assertThat(dataset.attributes().text("unit")).hasValue("kBq/mL");
            assertThat(dataset.attributes().numbers("spacing_mm").orElseThrow()).containsExactly(0.5, 0.5, 0.8);
            assertThat(dataset.attributes().whole("passes")).hasValue(20);
            assertThat(dataset.attributes().number("passes")).hasValue(20);
            assertThat(dataset.attributes().number("scale")).hasValue(0.1);
            assertThat(dataset.attributes().text("scale")).isEmpty();
            assertThat(file.root().dataset("notes").orElseThrow().text()).isEqualTo(longText);
            assertThat(file.root().dataset("nothing").orElseThrow().text()).isEmpty();
            assertThat(file.root().dataset("missing")).isEmpty();
            assertThat(file.root().group("activity")).isEmpty();
        }
        try (HdfFile other = new HdfFile(path)) {
            assertThat(other.getDatasetByPath("activity").getDataFlat()).isEqualTo(volume);
            assertThat(other.getDatasetByPath("activity").getAttribute("unit").getData())
                    .isEqualTo("kBq/mL");
        }
    }

    @Test
    void keepsArraysOfOtherTypes() throws IOException {
        try (Hdf5Writer file = Hdf5Writer.create(path, false)) {
            file.root().array("ints", new int[] {1, 2, 3}, 3);
            file.root().array("longs", new long[] {1, -2}, 1, 2);
            file.root().array("doubles", new double[] {Math.E});
            file.root().array("empty", new float[0], 0);
            file.commit();
        }

        try (Hdf5File file = Hdf5File.open(path)) {
            assertThat(file.root().dataset("ints").orElseThrow().ints()).containsExactly(1, 2, 3);
            assertThat(file.root().dataset("longs").orElseThrow().floats()).containsExactly(1, -2);
            assertThat(file.root().dataset("doubles").orElseThrow().floats()).containsExactly((float) Math.E);
            assertThat(file.root().dataset("doubles").orElseThrow().shape()).isEmpty();
            assertThat(file.root().dataset("empty").orElseThrow().floats()).isEmpty();
        }
    }

    @Test
    void noticesDamageInAnArray() throws IOException {
        try (Hdf5Writer file = Hdf5Writer.create(path, false)) {
            file.root().array("a", new float[1000], 1000);
            file.commit();
        }
        byte[] bytes = Files.readAllBytes(path);
        bytes[2000] ^= 1;
        Files.write(path, bytes);

        try (Hdf5File file = Hdf5File.open(path)) {
            StoredDataset dataset = file.root().dataset("a").orElseThrow();
            assertThatThrownBy(dataset::floats)
                    .isInstanceOf(Hdf5Exception.class)
                    .hasMessageMatching(
                            ".*file\\.h5, a: expected CRC-32C [0-9a-f]{8}, found [0-9a-f]{8}; the file is damaged.*");
        }
    }

    /** One chunk and a few objects per block are all that a stream may cost: 50 MB of values in less than 1 MB of new objects. */
    @Test
    void writesAndReadsStreamsInFlatMemory() throws IOException {
        int block = 1 << 16;
        int blocks = 200;
        float[] values = new float[block];
        long mostBytes = 1 << 20;
        try (Hdf5Writer file = Hdf5Writer.create(path, false)) {
            ColumnWriter column = file.root().column("c", ElementType.FLOAT32, block, Compression.NONE);
            column.append(values, 0, block);
            long before = allocated();
            for (int i = 1; i < blocks; i++) {
                column.append(values, 0, block);
            }
            assertThat(allocated() - before).isLessThan(mostBytes);
            file.commit();
        }

        try (Hdf5File file = Hdf5File.open(path)) {
            ValueReader reader =
                    file.root().dataset("c").orElseThrow().values(file.root().checksums("c"));
            reader.read(values, 0, block);
            long before = allocated();
            for (int i = 1; i < blocks; i++) {
                reader.read(values, 0, block);
            }
            assertThat(allocated() - before).isLessThan(mostBytes);
            assertThat(reader.position()).isEqualTo((long) block * blocks);
        }
    }

    private static long allocated() {
        var threads = (com.sun.management.ThreadMXBean) java.lang.management.ManagementFactory.getThreadMXBean();
        return threads.getCurrentThreadAllocatedBytes();
    }

    @ParameterizedTest
    @ValueSource(strings = {"", "a/b", ".", "ä", "a b", "crc32c"})
    void refusesNamesThatAreNone(String name) throws IOException {
        try (Hdf5Writer file = Hdf5Writer.create(path, false)) {
            assertThatThrownBy(() -> file.root().group(name)).isInstanceOf(IllegalArgumentException.class);
        }
    }

    @Test
    void refusesWhatHdf5CannotHold() throws IOException {
        try (Hdf5Writer file = Hdf5Writer.create(path, false)) {
            GroupWriter root = file.root();
            root.group("g");
            assertThatThrownBy(() -> root.group("g")).hasMessageContaining("has a member of that name: g");
            assertThatThrownBy(() -> root.attribute("a", "x".repeat(70_000)))
                    .hasMessageContaining("store longer text or data as a dataset");
            assertThatThrownBy(() -> root.array("v", new float[7], 2, 4))
                    .hasMessageContaining("holds 8 values, given are 7");
            assertThatThrownBy(() -> root.column("c", ElementType.INT64, 1 << 28, Compression.NONE))
                    .hasMessageContaining("a chunk holds");
            ColumnWriter column = root.column("c", ElementType.UINT8, 10, Compression.NONE);
            assertThatThrownBy(() -> column.append(new int[1], 0, 1)).hasMessage("the column holds UINT8, not UINT32");
        }
    }

    @Test
    void leavesAnExistingFileAloneUntilTheNewOneIsComplete() throws IOException {
        Files.writeString(path, "old");
        try (Hdf5Writer file = Hdf5Writer.create(path, true)) {
            file.root().attribute("a", 1);
            assertThat(path).hasContent("old");
            file.commit();
        }

        try (Hdf5File file = Hdf5File.open(path);
                Stream<Path> files = Files.list(folder)) {
            assertThat(file.root().attributes().names()).containsExactly("a");
            assertThat(files).containsExactly(path);
        }
    }

    @Test
    void doesNotReplaceAFileThatAppearedMeanwhile() throws IOException {
        try (Hdf5Writer file = Hdf5Writer.create(path, false)) {
            Files.writeString(path, "other");
            assertThatThrownBy(file::commit).hasMessageContaining("exists already");
        }
        assertThat(path).hasContent("other");
    }

    @Test
    void refusesToReadMoreThanThereIs() throws IOException {
        try (Hdf5Writer file = Hdf5Writer.create(path, false)) {
            file.root().array("a", LongStream.range(0, 5).toArray(), 5);
            file.commit();
        }

        try (Hdf5File file = Hdf5File.open(path)) {
            ValueReader reader = file.root().dataset("a").orElseThrow().values(null);
            assertThatThrownBy(() -> reader.read(new long[6], 0, 6))
                    .hasMessageContaining("only 5 values are left, wanted 6");
        }
    }
}
