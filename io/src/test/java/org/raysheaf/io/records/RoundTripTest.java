package org.raysheaf.io.records;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.BufferedOutputStream;
import java.io.IOException;
import java.io.OutputStream;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.EnumSet;
import java.util.Set;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.io.OutsideReader;
import org.raysheaf.io.hdf5.ColumnWriter;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.hdf5.ElementType;
import org.raysheaf.io.hdf5.Hdf5Writer;

/** A list goes out in every layout and comes back identical, bit for bit. */
class RoundTripTest {
    private static final int EVENTS = 1_000_000;
    private static final Set<Attribute> COLUMNS = EnumSet.of(
            Attribute.ELEMENT_A,
            Attribute.ELEMENT_B,
            Attribute.TIME,
            Attribute.TIME_DIFFERENCE,
            Attribute.ENERGY_A,
            Attribute.ENERGY_B,
            Attribute.DELAYED);
    private static final EventBlock LIST = list();

    private static final String ATTRIBUTES = """
            attributes:
              element_a: {from: ea}
              element_b: {from: eb}
              time_ps: {from: t}
              time_difference_ps: {from: dt}
              energy_a_keV: {from: xa}
              energy_b_keV: {from: xb}
              delayed: {from: d}
            """;

    @TempDir
    Path folder;

    /** Times beyond 2⁵³, and floats of all sizes. */
    private static EventBlock list() {
        EventBlock block = new EventBlock(COLUMNS, EVENTS);
        SplittableRandom random = new SplittableRandom(11);
        long time = 0;
        for (int i = 0; i < EVENTS; i++) {
            time += random.nextLong(1L << 42);
            block.ints(Attribute.ELEMENT_A)[i] = random.nextInt(Lab.ELEMENTS);
            block.ints(Attribute.ELEMENT_B)[i] = random.nextInt(Lab.ELEMENTS);
            block.longs(Attribute.TIME)[i] = time;
            float any = Float.intBitsToFloat(random.nextInt());
            block.floats(Attribute.TIME_DIFFERENCE)[i] = Float.isFinite(any) ? any : -0f;
            block.floats(Attribute.ENERGY_A)[i] = (float) random.nextDouble(0, 1000);
            block.floats(Attribute.ENERGY_B)[i] = Float.isFinite(any) ? Math.abs(any) : 0;
            block.bytes(Attribute.DELAYED)[i] = (byte) random.nextInt(2);
        }
        block.resize(EVENTS);
        return block;
    }

    private static void requireSame(Lab.Imported got) {
        EventBlock back = got.events();
        assertThat(got.result().written()).isEqualTo(EVENTS);
        assertThat(got.result().addsUp()).isTrue();
        assertThat(same(LIST.ints(Attribute.ELEMENT_A), back.ints(Attribute.ELEMENT_A)))
                .isTrue();
        assertThat(same(LIST.ints(Attribute.ELEMENT_B), back.ints(Attribute.ELEMENT_B)))
                .isTrue();
        assertThat(Arrays.equals(LIST.longs(Attribute.TIME), 0, EVENTS, back.longs(Attribute.TIME), 0, EVENTS))
                .isTrue();
        for (Attribute real : Set.of(Attribute.TIME_DIFFERENCE, Attribute.ENERGY_A, Attribute.ENERGY_B)) {
            assertThat(same(bits(LIST.floats(real)), bits(back.floats(real))))
                    .as("%s", real)
                    .isTrue();
        }
        assertThat(Arrays.equals(LIST.bytes(Attribute.DELAYED), 0, EVENTS, back.bytes(Attribute.DELAYED), 0, EVENTS))
                .isTrue();
    }

    private static boolean same(int[] a, int[] b) {
        return Arrays.equals(a, 0, EVENTS, b, 0, EVENTS);
    }

    private static int[] bits(float[] values) {
        int[] bits = new int[EVENTS];
        for (int i = 0; i < EVENTS; i++) {
            bits[i] = Float.floatToRawIntBits(values[i]);
        }
        return bits;
    }

    @ParameterizedTest
    @ValueSource(strings = {"little", "big"})
    void binary(String order) throws IOException {
        Path file = folder.resolve("list.bin");
        ByteOrder byteOrder = order.equals("big") ? ByteOrder.BIG_ENDIAN : ByteOrder.LITTLE_ENDIAN;
        try (OutputStream out = new BufferedOutputStream(Files.newOutputStream(file), 1 << 20)) {
            ByteBuffer record = ByteBuffer.allocate(25).order(byteOrder);
            for (int i = 0; i < EVENTS; i++) {
                record.clear();
                put(record, i);
                out.write(record.array());
            }
        }
        String yaml = """
                format:
                  kind: binary
                  byte_order: %s
                  records:
                    - name: event
                      bytes: 25
                      fields:
                        - {name: ea, at_byte: 0, bytes: 2}
                        - {name: eb, at_byte: 2, bytes: 2}
                        - {name: t, type: signed, at_byte: 4, bytes: 8}
                        - {name: dt, type: float, at_byte: 12, bytes: 4}
                        - {name: xa, type: float, at_byte: 16, bytes: 4}
                        - {name: xb, type: float, at_byte: 20, bytes: 4}
                        - {name: d, at_byte: 24, bytes: 1}
                """.formatted(order);
        requireSame(Lab.run(folder, yaml + ATTRIBUTES, file));
    }

    private static void put(ByteBuffer record, int i) {
        record.putShort((short) LIST.ints(Attribute.ELEMENT_A)[i])
                .putShort((short) LIST.ints(Attribute.ELEMENT_B)[i])
                .putLong(LIST.longs(Attribute.TIME)[i])
                .putFloat(LIST.floats(Attribute.TIME_DIFFERENCE)[i])
                .putFloat(LIST.floats(Attribute.ENERGY_A)[i])
                .putFloat(LIST.floats(Attribute.ENERGY_B)[i])
                .put(LIST.bytes(Attribute.DELAYED)[i]);
    }

    @Test
    void text() throws IOException {
        Path file = folder.resolve("list.csv");
        try (OutputStream out = new BufferedOutputStream(Files.newOutputStream(file), 1 << 20)) {
            out.write("ea,eb,t,dt,xa,xb,d\n".getBytes(StandardCharsets.US_ASCII));
            for (int i = 0; i < EVENTS; i++) {
                String line = LIST.ints(Attribute.ELEMENT_A)[i] + "," + LIST.ints(Attribute.ELEMENT_B)[i] + ","
                        + LIST.longs(Attribute.TIME)[i] + "," + LIST.floats(Attribute.TIME_DIFFERENCE)[i] + ","
                        + LIST.floats(Attribute.ENERGY_A)[i] + "," + (double) LIST.floats(Attribute.ENERGY_B)[i] + ","
                        + LIST.bytes(Attribute.DELAYED)[i] + "\n";
                out.write(line.getBytes(StandardCharsets.US_ASCII));
            }
        }
        String yaml = """
                format:
                  kind: text
                  header_lines: 1
                  fields:
                    - {name: ea, type: integer}
                    - {name: eb, type: integer}
                    - {name: t, type: integer}
                    - {name: dt}
                    - {name: xa}
                    - {name: xb}
                    - {name: d}
                """;
        requireSame(Lab.run(folder, yaml + ATTRIBUTES, file));
    }

    @Test
    void datasetsOfHdf5() throws IOException {
        Path file = folder.resolve("list.h5");
        try (Hdf5Writer writer = Hdf5Writer.create(file, true)) {
            for (Attribute attribute : COLUMNS) {
                ElementType type = ElementType.valueOf(attribute.type().name());
                ColumnWriter column = writer.root().column(attribute.columnName(), type, 10_000, Compression.DEFLATE);
                switch (attribute.type()) {
                    case UINT8 -> column.append(LIST.bytes(attribute), 0, EVENTS);
                    case UINT32 -> column.append(LIST.ints(attribute), 0, EVENTS);
                    case INT64 -> column.append(LIST.longs(attribute), 0, EVENTS);
                    case FLOAT32 -> column.append(LIST.floats(attribute), 0, EVENTS);
                }
            }
            writer.commit();
        }
        String yaml = """
                format:
                  kind: hdf5
                  fields:
                    - {name: ea, dataset: element_a}
                    - {name: eb, dataset: /element_b}
                    - {name: t, dataset: time_ps}
                    - {name: dt, dataset: time_difference_ps}
                    - {name: xa, dataset: energy_a_keV}
                    - {name: xb, dataset: energy_b_keV}
                    - {name: d, dataset: delayed}
                """;
        requireSame(Lab.run(folder, yaml + ATTRIBUTES, file));
    }

    /** Bare arrays, one per column, which Python then makes into the layouts of its libraries. */
    private void writeArrays() throws IOException {
        for (Attribute attribute : COLUMNS) {
            ByteBuffer bytes =
                    ByteBuffer.allocate(EVENTS * attribute.type().bytes()).order(ByteOrder.LITTLE_ENDIAN);
            String type = switch (attribute.type()) {
                case UINT8 -> "|u1";
                case UINT32 -> "<u4";
                case INT64 -> "<i8";
                case FLOAT32 -> "<f4";
            };
            switch (attribute.type()) {
                case UINT8 -> bytes.put(LIST.bytes(attribute), 0, EVENTS);
                case UINT32 -> bytes.asIntBuffer().put(LIST.ints(attribute), 0, EVENTS);
                case INT64 -> bytes.asLongBuffer().put(LIST.longs(attribute), 0, EVENTS);
                case FLOAT32 -> bytes.asFloatBuffer().put(LIST.floats(attribute), 0, EVENTS);
            }
            String header = "{'descr': '" + type + "', 'fortran_order': False, 'shape': (" + EVENTS + ",), }";
            String padded = header + " ".repeat(63 - (10 + header.length()) % 64) + "\n";
            try (OutputStream out = Files.newOutputStream(folder.resolve(attribute.columnName() + ".npy"))) {
                out.write(new byte[] {(byte) 0x93, 'N', 'U', 'M', 'P', 'Y', 1, 0});
                out.write(new byte[] {(byte) padded.length(), (byte) (padded.length() >> 8)});
                out.write(padded.getBytes(StandardCharsets.ISO_8859_1));
                out.write(bytes.array());
            }
        }
    }

    @Test
    void numpyArraysInAFolder() throws IOException {
        writeArrays();
        String yaml = """
                format:
                  kind: npy
                  fields:
                    - {name: ea, array: element_a.npy}
                    - {name: eb, array: element_b.npy}
                    - {name: t, array: time_ps.npy}
                    - {name: dt, array: time_difference_ps.npy}
                    - {name: xa, array: energy_a_keV.npy}
                    - {name: xb, array: energy_b_keV.npy}
                    - {name: d, array: delayed.npy}
                """;
        requireSame(Lab.run(folder, yaml + ATTRIBUTES, folder));
    }

    private static final String TO_TABLE = """
            import sys, numpy, h5py
            folder, kind = sys.argv[1], sys.argv[2]
            names = dict(ea="element_a", eb="element_b", t="time_ps", dt="time_difference_ps",
                         xa="energy_a_keV", xb="energy_b_keV", d="delayed")
            columns = {short: numpy.load(f"{folder}/{name}.npy") for short, name in names.items()}
            types = dict(ea=">u2", eb="<i4", t=">i8", dt="<f8", xa=">f4", xb="<f4", d="?")
            table = numpy.zeros(len(columns["t"]), dtype=[(n, types[n]) for n in types] + [("unused", "<i2")])
            for name in types:
                table[name] = columns[name]
            if kind == "npy":
                numpy.save(f"{folder}/table.npy", table)
            else:
                with h5py.File(f"{folder}/table.h5", "w", libver="latest" if kind == "latest" else None) as f:
                    group = f.create_group("run7/bank")
                    options = dict(none={}, gzip=dict(compression="gzip", chunks=(5003,), shuffle=True, fletcher32=True),
                                   lzf=dict(compression="lzf", chunks=(4096,)), latest={})[kind]
                    group.create_dataset("hits", data=table, **options)
            """;

    @ParameterizedTest
    @ValueSource(strings = {"none", "gzip", "lzf", "latest"})
    void compoundValuesThatH5pyWrote(String kind) throws IOException, InterruptedException {
        OutsideReader.assumePython("numpy", "h5py");
        writeArrays();
        OutsideReader.python(TO_TABLE, folder, kind);
        String yaml = """
                format:
                  kind: hdf5
                  dataset: run7/bank/hits
                  fields: [{name: ea}, {name: eb}, {name: t}, {name: dt}, {name: xa, member: xa}, {name: xb}, {name: d}]
                """;
        Lab.Imported got = Lab.run(folder, yaml + ATTRIBUTES, folder.resolve("table.h5"));
        requireSame(got);
        assertThat(got.result().unread()).containsExactly("run7/bank/hits.unused");
    }

    @Test
    void structuredArrayThatNumpyWrote() throws IOException, InterruptedException {
        OutsideReader.assumePython("numpy", "h5py");
        writeArrays();
        OutsideReader.python(TO_TABLE, folder, "npy");
        String yaml = """
                format:
                  kind: npy
                  fields: [{name: ea}, {name: eb}, {name: t}, {name: dt}, {name: xa}, {name: xb}, {name: d}]
                """;
        Lab.Imported got = Lab.run(folder, yaml + ATTRIBUTES, folder.resolve("table.npy"));
        requireSame(got);
        assertThat(got.result().unread()).containsExactly("unused");
    }

    @Test
    void tablesOfTwoDimensions() throws IOException, InterruptedException {
        OutsideReader.assumePython("numpy", "h5py");
        OutsideReader.python("""
                import sys, numpy, h5py
                table = numpy.arange(3000, dtype="<i4").reshape(1000, 3) % 500
                numpy.save(sys.argv[1] + "/table.npy", table)
                with h5py.File(sys.argv[1] + "/table.h5", "w") as f:
                    f.create_dataset("plain", data=table)
                    f.create_dataset("chunked", data=table, chunks=(64, 2), compression="gzip")
                """, folder);
        for (String format : new String[] {
            "{kind: npy, fields: [{name: c, column: 1}, {name: t, column: 3}]}",
            "{kind: hdf5, dataset: plain, fields: [{name: c, column: 1}, {name: t, column: 3}]}",
            "{kind: hdf5, dataset: chunked, fields: [{name: c, column: 1}, {name: t, column: 3}]}"
        }) {
            Path file = folder.resolve(format.contains("npy") ? "table.npy" : "table.h5");
            Lab.Imported got = Lab.run(
                    folder, "format: " + format + "\nattributes: {element: {from: c}, time_ps: {from: t}}\n", file);
            assertThat(got.events().size()).isEqualTo(1000);
            for (int i = 0; i < 1000; i++) {
                assertThat(Lab.elements(got)[i]).isEqualTo(3 * i % 500);
                assertThat(Lab.times(got)[i]).isEqualTo((3 * i + 2) % 500);
            }
        }
    }

    /** MATLAB puts a block of its own before the data and stores vectors as one row of doubles. */
    @Test
    void rowsOfDoublesBehindAUserBlock() throws IOException, InterruptedException {
        OutsideReader.assumePython("numpy", "h5py");
        for (String chunks : new String[] {"None", "(1, 100)"}) {
            OutsideReader.python("""
                    import sys, numpy, h5py
                    with h5py.File(sys.argv[1] + "/vectors.mat", "w", userblock_size=512) as f:
                        for name, factor in dict(channel=1, t=1000).items():
                            options = {} if sys.argv[2] == "None" else dict(chunks=eval(sys.argv[2]), compression="gzip")
                            f.create_dataset(name, data=factor * numpy.arange(500.0).reshape(1, 500), **options)
                    """, folder, chunks);
            Lab.Imported got = Lab.run(folder, """
                    format: {kind: hdf5, fields: [{name: c, dataset: channel}, {name: t, dataset: t}]}
                    attributes: {element: {from: c}, time_ps: {from: t}}
                    """, folder.resolve("vectors.mat"));
            assertThat(got.events().size()).isEqualTo(500);
            assertThat(Lab.elements(got)[499]).isEqualTo(499);
            assertThat(Lab.times(got)[499]).isEqualTo(499_000);
        }
    }
}
