package org.raysheaf.io.records;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.InputStream;
import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.Arrays;
import java.util.List;
import java.util.Objects;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Assertions;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.EnumSource;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.hdf5.ColumnWriter;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.hdf5.ElementType;
import org.raysheaf.io.hdf5.Hdf5Writer;

/**
 * Spoiled files: whatever is done to one, an import ends soon, either with a message for people or with counts that add up, and never with anything
 * that a programmer must look at.
 */
class FuzzTest {
    private static final int FEW = 300;
    private static final int MANY = 10_000;

    /** No single import of these small files may take longer. */
    private static final Duration LONGEST = Duration.ofSeconds(5);

    private static final List<String> POLICIES = List.of(
            "",
            "damage: {policy: skip}\n",
            "damage: {policy: skip, limit: 3}\n",
            "damage: {policy: resynchronise, marker: \"a5\"}\n");

    @TempDir
    Path folder;

    /** The readers, each with a sound file. */
    private enum Reader {
        TEXT("""
                format:
                  kind: text
                  header_lines: 1
                  comment: "#"
                  quote: "'"
                  fields: [{name: c}, {name: t, type: integer}, {name: e, invalid: [NA]}]
                """) {
            @Override
            byte[] sound(Path folder) {
                StringBuilder text = new StringBuilder("c,t,e\n# comment\n");
                for (int i = 0; i < 60; i++) {
                    text.append(i)
                            .append(',')
                            .append(1000 * i)
                            .append(",'")
                            .append(500.25 + i)
                            .append("'\n");
                }
                return text.toString().getBytes(StandardCharsets.UTF_8);
            }
        },
        BINARY("""
                format:
                  kind: binary
                  byte_order: big
                  skip_bytes: 5
                  records:
                    - name: event
                      bytes: 9
                      when: [{at_byte: 0, bytes: 1, equals: "0xa5"}, {bit: 60, bits: 4, equals: "1"}]
                      fields: [{name: c, bit: 40, bits: 16}, {name: t, bit: 8, bits: 32}, {name: e, type: signed, bit: 0, bits: 8}]
                    - {name: mark, bytes: 3, role: mark, when: [{bit: 12, bits: 12, equals: "0xa52"}], fields: [{name: n, bit: 0, bits: 12}]}
                """) {
            @Override
            byte[] sound(Path folder) {
                ByteBuffer bytes = ByteBuffer.allocate(5 + 60 * 9 + 20 * 3);
                bytes.position(5);
                for (int i = 0; i < 60; i++) {
                    bytes.put((byte) 0xa5)
                            .put((byte) 0x10)
                            .putShort((short) i)
                            .putInt(1000 * i)
                            .put((byte) i);
                    if (i % 3 == 0) {
                        bytes.put((byte) 0xa5).put((byte) 0x20).put((byte) i);
                    }
                }
                return bytes.array();
            }
        },
        HDF5(
                "format: {kind: hdf5, fields: [{name: c, dataset: c}, {name: t, dataset: g/t}, {name: e, dataset: e}]}\n") {
            @Override
            byte[] sound(Path folder) throws IOException {
                Path file = folder.resolve("sound.h5");
                try (Hdf5Writer writer = Hdf5Writer.create(file, true)) {
                    int[] c = new int[60];
                    long[] t = new long[60];
                    float[] e = new float[60];
                    for (int i = 0; i < 60; i++) {
                        c[i] = i;
                        t[i] = 1000L * i;
                        e[i] = 500 + i;
                    }
                    ColumnWriter columnC = writer.root().column("c", ElementType.UINT32, 16, Compression.DEFLATE);
                    columnC.append(c, 0, 60);
                    ColumnWriter columnT =
                            writer.root().group("g").column("t", ElementType.INT64, 32, Compression.NONE);
                    columnT.append(t, 0, 60);
                    writer.root()
                            .column("e", ElementType.FLOAT32, 64, Compression.DEFLATE)
                            .append(e, 0, 60);
                    writer.commit();
                }
                return Files.readAllBytes(file);
            }
        },
        COMPOUND("format: {kind: hdf5, dataset: g/hits, fields: [{name: c}, {name: t}, {name: e}]}\n") {
            @Override
            byte[] sound(Path folder) throws IOException {
                // Made by compound.py beside it: 60 compound values with an enumeration among them, compressed in
                // chunks.
                try (InputStream stored = FuzzTest.class.getResourceAsStream("compound.h5")) {
                    return Objects.requireNonNull(stored).readAllBytes();
                }
            }
        },
        NPY("format: {kind: npy, fields: [{name: c}, {name: t}, {name: e}]}\n") {
            @Override
            byte[] sound(Path folder) throws IOException {
                String header =
                        "{'descr': [('c', '<u2'), ('t', '>i8'), ('', '|V1'), ('e', '<f4')], 'fortran_order': False, 'shape': (60,), }";
                String padded = header + " ".repeat(127 - (10 + header.length()) % 64) + "\n";
                ByteArrayOutputStream out = new ByteArrayOutputStream();
                out.write(new byte[] {(byte) 0x93, 'N', 'U', 'M', 'P', 'Y', 1, 0});
                out.write(new byte[] {(byte) padded.length(), (byte) (padded.length() >> 8)});
                out.write(padded.getBytes(StandardCharsets.ISO_8859_1));
                for (int i = 0; i < 60; i++) {
                    ByteBuffer value = ByteBuffer.allocate(15);
                    value.put((byte) i).put((byte) 0).putLong(1000L * i).put((byte) 0);
                    value.putInt(Integer.reverseBytes(Float.floatToIntBits(500 + i)));
                    out.write(value.array());
                }
                return out.toByteArray();
            }
        };

        private final String format;

        Reader(String format) {
            this.format = format;
        }

        abstract byte[] sound(Path folder) throws IOException;
    }

    private static final String ATTRIBUTES = """
            compute: {x: {kind: formula, is: "e * 2 + t % (c - 7)"}}
            attributes: {element: {from: c}, time_ps: {from: t}, energy_keV: {from: e + 0 * x}}
            """;

    @ParameterizedTest
    @EnumSource
    void aSoundFileIsReadWhole(Reader reader) throws IOException {
        Path file = Files.write(folder.resolve("data"), reader.sound(folder));
        for (String policy : POLICIES) {
            Lab.Imported got = Lab.run(folder, reader.format + ATTRIBUTES + policy, file);
            assertThat(got.result().records()).isEqualTo(60);
            assertThat(got.result().written()).isEqualTo(59); // one is divided by 0
            assertThat(got.events().longs(Attribute.TIME)[58]).isEqualTo(59_000);
        }
    }

    @ParameterizedTest
    @EnumSource
    void fewSpoiledFiles(Reader reader) throws IOException {
        spoil(reader, FEW);
    }

    @ParameterizedTest
    @EnumSource
    @Tag("proof")
    void manySpoiledFiles(Reader reader) throws IOException {
        spoil(reader, MANY);
    }

    private void spoil(Reader reader, int files) throws IOException {
        byte[] sound = reader.sound(folder);
        RecordsDescription[] descriptions = new RecordsDescription[POLICIES.size()];
        for (int i = 0; i < descriptions.length; i++) {
            descriptions[i] = Lab.describe(reader.format + ATTRIBUTES + POLICIES.get(i));
        }
        int read = 0;
        for (int seed = 0; seed < files; seed++) {
            SplittableRandom random = new SplittableRandom(seed);
            Path file = Files.write(folder.resolve("data"), spoiled(sound, random));
            RecordsDescription description = descriptions[seed % descriptions.length];
            String place = reader + ", seed " + seed;
            ImportResult result = Assertions.assertTimeout(LONGEST, () -> run(file, description, place), place);
            if (result != null) {
                read++;
                assertThat(result.addsUp()).as(place).isTrue();
                if (reader == Reader.BINARY) {
                    long marks =
                            result.marks().values().stream().mapToLong(n -> n).sum();
                    assertThat(5 + 9 * result.records() + 3 * marks + result.bytesPassedOver())
                            .as(place)
                            .isEqualTo(Files.size(file));
                }
                if (reader == Reader.TEXT) {
                    assertThat(result.bytes()).as(place).isEqualTo(Files.size(file));
                }
            }
        }
        assertThat(read).as("files that were read in spite of the damage").isGreaterThan(files / 50);
    }

    private @org.jspecify.annotations.Nullable ImportResult run(Path file, RecordsDescription description, String place)
            throws IOException {
        RecordImport work = new RecordImport(folder.resolve("RECORDS.yaml"), description, Lab.system());
        try {
            return work.run(List.of(file), new Lab.Memory(work), Long.MAX_VALUE, Progress.SILENT);
        } catch (IOException e) {
            assertThat(e.getMessage()).as(place).isNotBlank().contains("data").doesNotContain("Exception");
            return null;
        }
    }

    private static byte[] spoiled(byte[] sound, SplittableRandom random) {
        byte[] bytes = sound.clone();
        switch (random.nextInt(6)) {
            case 0 -> bytes = Arrays.copyOf(bytes, random.nextInt(bytes.length));
            case 1 -> {
                for (int i = 0; i < 1 + random.nextInt(8); i++) {
                    bytes[random.nextInt(bytes.length)] ^= (byte) (1 << random.nextInt(8));
                }
            }
            case 2 -> {
                int at = random.nextInt(bytes.length);
                byte[] junk = new byte[random.nextInt(40)];
                random.nextBytes(junk);
                bytes = joined(Arrays.copyOf(bytes, at), junk, Arrays.copyOfRange(bytes, at, bytes.length));
            }
            case 3 -> {
                int from = random.nextInt(bytes.length);
                int to = from + random.nextInt(bytes.length - from);
                bytes = joined(Arrays.copyOf(bytes, from), Arrays.copyOfRange(bytes, to, bytes.length));
            }
            case 4 -> {
                int from = random.nextInt(bytes.length);
                for (int i = from; i < Math.min(bytes.length, from + 1 + random.nextInt(60)); i++) {
                    bytes[i] = (byte) (random.nextBoolean() ? 0xff : random.nextInt(256));
                }
            }
            default -> {
                bytes = new byte[random.nextInt(600)];
                random.nextBytes(bytes);
            }
        }
        return bytes;
    }

    private static byte[] joined(byte[]... parts) {
        ByteArrayOutputStream out = new ByteArrayOutputStream();
        for (byte[] part : parts) {
            out.writeBytes(part);
        }
        return out.toByteArray();
    }
}
