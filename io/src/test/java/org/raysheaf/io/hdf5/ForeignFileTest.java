package org.raysheaf.io.hdf5;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.junit.jupiter.api.Assertions.assertTimeoutPreemptively;

import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.Arrays;
import java.util.Objects;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;
import org.raysheaf.io.hdf5.Hdf5Exception.Kind;

/** Files that the HDF5 library wrote: foreign.py and latest.py beside them made them. */
class ForeignFileTest {
    private static final int COUNT = 60;

    @TempDir
    Path folder;

    private Path copy(String name) throws IOException {
        Path path = folder.resolve(name);
        try (InputStream stored = ForeignFileTest.class.getResourceAsStream(name)) {
            Files.write(path, Objects.requireNonNull(stored).readAllBytes());
        }
        return path;
    }

    private static StoredDataset dataset(Hdf5File file, String name) throws IOException {
        return file.root().dataset(name).orElseThrow();
    }

    @ParameterizedTest
    @ValueSource(
            strings = {
                "lzf",
                "type_u1",
                "type_i1",
                "type_u2",
                "type_i2",
                "type_u4",
                "type_i4",
                "type_u8",
                "type_i8",
                "type_big_u2",
                "type_big_i4",
                "type_big_i8",
                "bool",
                "chunks",
                "gzip",
                "shuffle_gzip_fletcher",
                "fletcher_odd",
                "growing"
            })
    void readsWholeNumbersOfAnyForm(String name) throws IOException {
        byte[] bytes = new byte[COUNT];
        int[] ints = new int[COUNT];
        long[] longs = new long[COUNT];
        float[] floats = new float[COUNT];
        try (Hdf5File file = Hdf5File.open(copy("foreign.h5"))) {
            dataset(file, name).values(null).read(bytes, 0, COUNT);
            dataset(file, name).values(null).read(ints, 0, COUNT);
            dataset(file, name).values(null).read(longs, 0, COUNT);
            dataset(file, name).values(null).read(floats, 0, COUNT);
        }
        for (int i = 0; i < COUNT; i++) {
            int expected = name.equals("bool") ? i % 2 : i;
            assertThat(bytes[i]).isEqualTo((byte) expected);
            assertThat(ints[i]).isEqualTo(expected);
            assertThat(longs[i]).isEqualTo(expected);
            assertThat(floats[i]).isEqualTo(expected);
        }
    }

    @ParameterizedTest
    @ValueSource(strings = {"type_f4", "type_f8", "type_big_f4", "type_big_f8", "cube", "chunked_cube"})
    void readsRealNumbersOfAnyForm(String name) throws IOException {
        try (Hdf5File file = Hdf5File.open(copy("foreign.h5"))) {
            float[] values = dataset(file, name).floats();
            assertThat(values).hasSize(COUNT);
            for (int i = 0; i < COUNT; i++) {
                assertThat(values[i]).isEqualTo(i);
            }
        }
    }

    @Test
    void readsTextsAndAttributes() throws IOException {
        try (Hdf5File file = Hdf5File.open(copy("foreign.h5"))) {
            assertThat(dataset(file, "text").text()).isEqualTo("long µ text");
            assertThat(dataset(file, "fixed_text").text()).isEqualTo("fixed");
            StoredGroup many = file.root().group("many").orElseThrow();
            assertThat(many.names()).hasSize(40);
            assertThat(many.dataset("member39").orElseThrow().ints()).containsExactly(39);
            StoredAttributes attributes = many.attributes();
            assertThat(attributes.text("text")).hasValue("µ");
            assertThat(attributes.text("fixed")).hasValue("fixed");
            assertThat(attributes.text("empty")).hasValue("");
            assertThat(attributes.number("float32")).hasValue(0.5);
            assertThat(attributes.numbers("big_endian").orElseThrow()).containsExactly(1.5, -2);
            assertThat(attributes.number("big_endian")).isEmpty();
            assertThat(attributes.whole("one")).hasValue(7);
            assertThat(attributes.whole("minus")).hasValue(-3);
            assertThat(attributes.whole("bool")).hasValue(1);
            assertThat(attributes.has("texts")).isTrue();
            assertThat(attributes.text("texts")).isEmpty();
        }
    }

    @Test
    void refusesNumbersThatDoNotFit() throws IOException {
        try (Hdf5File file = Hdf5File.open(copy("foreign.h5"))) {
            assertThatThrownBy(() -> dataset(file, "negative").values(null).read(new byte[COUNT], 0, COUNT))
                    .hasMessageEndingWith("negative: expected at index 0 a whole number from 0 to 255, found -30");
            assertThatThrownBy(() -> dataset(file, "big_unsigned").values(null).read(new long[2], 0, 2))
                    .hasMessageContaining("expected at index 1")
                    .hasMessageEndingWith("found 9223372036854775809");
        }
    }

    @ParameterizedTest
    @CsvSource({"never_written,DAMAGED", "half_written,DAMAGED", "complex,UNSUPPORTED", "text,UNSUPPORTED"})
    void refusesDatasetsThatHoldNoNumbersItCanRead(String name, Kind expected) throws IOException {
        try (Hdf5File file = Hdf5File.open(copy("foreign.h5"))) {
            assertThatThrownBy(() -> dataset(file, name).ints())
                    .isInstanceOfSatisfying(
                            Hdf5Exception.class, e -> assertThat(e.kind()).isEqualTo(expected))
                    .hasMessageContaining("foreign.h5, " + name + ":");
        }
    }

    @Test
    void refusesTheNewestStructuresByName() throws IOException {
        try (Hdf5File file = Hdf5File.open(copy("latest.h5"))) {
            assertThat(dataset(file, "plain").ints()).containsExactly(0, 1, 2, 3, 4);
            assertThat(dataset(file, "plain").attributes().text("unit")).hasValue("ps");
            for (String name : new String[] {"chunks", "members", "attributes"}) {
                assertThatThrownBy(() -> {
                            file.root().dataset(name);
                            file.root().group(name);
                        })
                        .as(name)
                        .isInstanceOfSatisfying(
                                Hdf5Exception.class, e -> assertThat(e.kind()).isEqualTo(Kind.UNSUPPORTED))
                        .hasMessageContaining("libver=\"latest\"");
            }
        }
    }

    @Test
    void noticesAWrongFletcherChecksum() throws IOException {
        Path path = copy("foreign.h5");
        byte[] bytes = Files.readAllBytes(path);
        int chunk = indexOf(
                bytes, new byte[] {14, 15, 16, 17, 18, 19, 20}); // the third chunk of fletcher_odd, stored as it is
        bytes[chunk + 3] ^= 64;
        Files.write(path, bytes);

        try (Hdf5File file = Hdf5File.open(path)) {
            assertThatThrownBy(() -> dataset(file, "fletcher_odd").ints()).hasMessageContaining("Fletcher checksum");
        }
    }

    private static int indexOf(byte[] bytes, byte[] wanted) {
        int last = -1;
        for (int i = 0; i + wanted.length + 4 <= bytes.length; i++) {
            if (Arrays.equals(bytes, i, i + wanted.length, wanted, 0, wanted.length) && bytes[i + 7] != 21) {
                last = i;
            }
        }
        return last;
    }

    @Test
    void survivesDamage() throws IOException {
        survivesDamage(150);
    }

    @Test
    @Tag("proof")
    void survivesMoreDamage() throws IOException {
        survivesDamage(3000);
    }

    private void survivesDamage(int files) throws IOException {
        long seed = Long.getLong("test.seed", 20260302);
        byte[] original = Files.readAllBytes(copy("foreign.h5"));
        Path path = folder.resolve("damaged.h5");
        for (int i = 0; i < files; i++) {
            SplittableRandom random = new SplittableRandom(seed + i);
            byte[] bytes = original.clone();
            for (int flip = random.nextInt(30); flip >= 0; flip--) {
                bytes[random.nextInt(bytes.length)] = (byte) random.nextInt(256);
            }
            Files.write(path, bytes);
            String name = "seed " + seed + ", file " + i;
            assertTimeoutPreemptively(Duration.ofSeconds(10), () -> readEverything(path), name);
        }
    }

    private static void readEverything(Path path) throws IOException {
        try (Hdf5File file = Hdf5File.open(path)) {
            for (String name : file.root().names()) {
                try {
                    file.root().group(name);
                    StoredDataset dataset = file.root().dataset(name).orElse(null);
                    if (dataset != null && dataset.type().number()) {
                        dataset.floats();
                    } else if (dataset != null) {
                        dataset.text();
                    }
                } catch (Hdf5Exception e) {
                    assertThat(e).hasMessageContaining("damaged.h5");
                }
            }
        } catch (Hdf5Exception e) {
            assertThat(e).hasMessageContaining("damaged.h5");
        }
    }
}
