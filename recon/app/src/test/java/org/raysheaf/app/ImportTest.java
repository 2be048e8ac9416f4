package org.raysheaf.app;

import static org.assertj.core.api.Assertions.assertThat;
import static org.junit.jupiter.api.Assumptions.assumeTrue;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.PrintStream;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.util.List;
import java.util.Random;
import java.util.concurrent.TimeUnit;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.io.list.ListFile;
import picocli.CommandLine;

/** A lab's own records, from its files to a list, as a user does it; the examples among the samples; other languages. */
class ImportTest {
    private static final Path SAMPLES = Path.of("..", "..", "sample-data");
    private static final Path EXAMPLES = SAMPLES.resolve("import");
    private static final int PAIRS = 25_000;

    @TempDir
    private Path folder;

    private record Outcome(int exit, String out, String err) {}

    private static synchronized Outcome call(Object... arguments) {
        StringWriter err = new StringWriter();
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        PrintStream before = System.out;
        System.setOut(new PrintStream(bytes, true, StandardCharsets.UTF_8));
        try {
            CommandLine line = Raysheaf.commandLine();
            line.setErr(new PrintWriter(err, true));
            line.getSubcommands().values().forEach(verb -> verb.setErr(new PrintWriter(err, true)));
            String[] all = Stream.concat(Stream.of(arguments).map(Object::toString), Stream.of("--quiet"))
                    .toArray(String[]::new);
            int exit = line.execute(all);
            return new Outcome(exit, bytes.toString(StandardCharsets.UTF_8), err.toString());
        } finally {
            System.setOut(before);
        }
    }

    private static EventBlock read(Path path, int most) throws IOException {
        ListFile list = ListFile.open(path);
        EventBlock block = new EventBlock(list.attributes(), most);
        try (EventSource.Cursor cursor = list.open()) {
            cursor.next(block);
        }
        return block;
    }

    private Path imported(String example, String data) {
        Path list = folder.resolve(example + ".h5");
        Outcome outcome = call(
                "import",
                EXAMPLES.resolve(example).resolve("records.yaml"),
                EXAMPLES.resolve(example).resolve(data),
                "--out",
                list,
                "--report",
                folder.resolve(example));
        assertThat(outcome.err()).isEmpty();
        assertThat(outcome.exit()).isZero();
        assertThat(folder.resolve(example + ".png")).isNotEmptyFile();
        assertThat(folder.resolve(example + ".json")).isNotEmptyFile();
        return list;
    }

    @Test
    void theTextExampleGivesThePairsThatItWasMadeOf() throws IOException {
        EventBlock made = read(imported("plover-text", "pairs.txt"), PAIRS);
        EventBlock source = read(SAMPLES.resolve("heron-rods.h5"), PAIRS);
        assertThat(made.size()).isEqualTo(PAIRS);
        for (int i = 0; i < PAIRS; i++) {
            assertThat(made.ints(Attribute.ELEMENT_A)[i]).isEqualTo(source.ints(Attribute.ELEMENT_A)[i]);
            assertThat(made.ints(Attribute.ELEMENT_B)[i]).isEqualTo(source.ints(Attribute.ELEMENT_B)[i]);
            assertThat(made.longs(Attribute.TIME)[i]).isEqualTo(source.longs(Attribute.TIME)[i]);
            assertThat(made.bytes(Attribute.DELAYED)[i]).isEqualTo(source.bytes(Attribute.DELAYED)[i]);
            // amplitudes are written to 0.01, and a unit is 2 keV
            assertThat(Math.abs(made.floats(Attribute.ENERGY_A)[i] - source.floats(Attribute.ENERGY_A)[i]))
                    .isLessThan(0.02f);
        }
        assertThat(call("check", folder.resolve("plover-text.h5")).out()).contains("verdict", " sound");
    }

    @Test
    void theBinaryExampleGivesThePhotonsThatItWasMadeOf() throws IOException {
        Path singles = imported("dunlin-binary", "run.dat");
        Path pairs = folder.resolve("pairs.h5");
        Outcome paired = call("pair", singles, "--window-ns", 3, "--out", pairs);
        assertThat(paired.exit()).isZero();
        EventBlock made = read(pairs, PAIRS);
        EventBlock source = read(SAMPLES.resolve("heron-rods.h5"), PAIRS);
        // The sensors saturated in some photons, and delayed pairs were left out.
        assertThat(made.size()).isBetween(24_850, 24_963);
        int s = 0;
        for (int i = 0; i < made.size(); i++) {
            long time = made.longs(Attribute.TIME)[i];
            while (Math.abs(source.longs(Attribute.TIME)[s] - time) > 5000) {
                s++;
            }
            List<Integer> expected = List.of(source.ints(Attribute.ELEMENT_A)[s], source.ints(Attribute.ELEMENT_B)[s]);
            assertThat(List.of(made.ints(Attribute.ELEMENT_A)[i], made.ints(Attribute.ELEMENT_B)[i]))
                    .containsExactlyInAnyOrderElementsOf(expected);
        }
    }

    @Test
    void theHdf5ExampleGivesThePairsThatItWasMadeOf() throws IOException {
        EventBlock made = read(imported("sanderling-hdf5", "run.hdf5"), PAIRS);
        EventBlock source = read(SAMPLES.resolve("heron-rods.h5"), PAIRS);
        assertThat(made.size()).isEqualTo(PAIRS - PAIRS / 500); // those of poor quality
        int m = 0;
        for (int i = 0; i < PAIRS; i++) {
            if (i % 500 == 0) {
                continue;
            }
            assertThat(made.ints(Attribute.ELEMENT_A)[m]).isEqualTo(source.ints(Attribute.ELEMENT_A)[i]);
            assertThat(made.ints(Attribute.ELEMENT_B)[m]).isEqualTo(source.ints(Attribute.ELEMENT_B)[i]);
            assertThat(source.longs(Attribute.TIME)[i] - made.longs(Attribute.TIME)[m])
                    .isBetween(0L, 124L);
            m++;
        }
    }

    private Path records(String order) throws IOException {
        Files.copy(SAMPLES.resolve("systems/heron-12.yaml"), folder.resolve("system.yaml"));
        return Files.writeString(folder.resolve("records.yaml"), """
                raysheaf: records/1
                name: big-endian pairs
                system: system.yaml
                format:
                  kind: binary
                  byte_order: %s
                  records:
                    - name: pair
                      bytes: 20
                      fields:
                        - {name: a, at_byte: 0, bytes: 2}
                        - {name: b, at_byte: 2, bytes: 2}
                        - {name: t, at_byte: 4, bytes: 8, type: signed}
                        - {name: x, at_byte: 12, bytes: 4, type: float}
                        - {name: y, at_byte: 16, bytes: 4, type: float}
                attributes:
                  element_a: {from: a}
                  element_b: {from: b}
                  time_ps: {from: t, unit: ps}
                  energy_a_keV: {from: x}
                  energy_b_keV: {from: y}
                """.formatted(order));
    }

    private Path bigEndianPairs(double energyUnitKeV, double timeUnitPs) throws IOException {
        EventBlock source = read(SAMPLES.resolve("heron-rods.h5"), PAIRS);
        ByteBuffer bytes = ByteBuffer.allocate(20 * PAIRS).order(ByteOrder.BIG_ENDIAN);
        for (int i = 0; i < PAIRS; i++) {
            bytes.putShort((short) source.ints(Attribute.ELEMENT_A)[i])
                    .putShort((short) source.ints(Attribute.ELEMENT_B)[i])
                    .putLong((long) (source.longs(Attribute.TIME)[i] / timeUnitPs))
                    .putFloat((float) (source.floats(Attribute.ENERGY_A)[i] / energyUnitKeV))
                    .putFloat((float) (source.floats(Attribute.ENERGY_B)[i] / energyUnitKeV));
        }
        return Files.write(folder.resolve("pairs.dat"), bytes.array());
    }

    @Test
    void checkFindsTheWrongByteOrder() throws IOException {
        Path data = bigEndianPairs(1, 1);
        Path list = folder.resolve("list.h5");
        Outcome swapped = call("import", records("little"), data, "--out", list);
        assertThat(swapped.exit()).isZero();
        assertThat(swapped.out()).contains("of the records were set aside", "check byte_order");
        assertThat(call("check", list).out())
                .contains("byte order", "set byte_order in the description of the records");
        Outcome right = call(
                "import",
                Files.writeString(
                        folder.resolve("right.yaml"),
                        Files.readString(folder.resolve("records.yaml")).replace("little", "big")),
                data,
                "--out",
                list,
                "--replace");
        assertThat(right.out()).contains("25,000 written").doesNotContain("warning");
        assertThat(call("check", list).out()).contains(" sound");
    }

    @Test
    void checkFindsWrongUnits() throws IOException {
        Path data = bigEndianPairs(1000, 1000);
        Path list = folder.resolve("list.h5");
        Path records = records("big");
        Files.writeString(records, Files.readString(records) + "acquisition: {duration_s: 3.8}\n");
        assertThat(call("import", records, data, "--out", list).exit()).isZero();
        assertThat(call("check", list).out())
                .contains("look like MeV", "by a factor near 1e+03: the unit of the times looks wrong");
    }

    @Test
    void aLookWritesNothing() throws IOException {
        Outcome look = call("import", records("big"), bigEndianPairs(1, 1), "--first", 100);
        assertThat(look.exit()).isZero();
        assertThat(look.out()).contains("100 read", "nothing written; give --out");
        try (Stream<Path> files = Files.list(folder)) {
            assertThat(files.filter(f -> f.toString().endsWith(".h5"))).isEmpty();
        }
    }

    @Test
    void mistakesAreMessages() throws IOException {
        Path records = records("big");
        Path data = bigEndianPairs(1, 1);
        assertThat(call("import", records, folder.resolve("none.dat")))
                .returns(1, Outcome::exit)
                .extracting(Outcome::err)
                .asString()
                .contains("none.dat: there is no such file");
        assertThat(call("import", records)).returns(2, Outcome::exit);
        Files.write(data, new byte[7], StandardOpenOption.APPEND);
        Path list = folder.resolve("list.h5");
        assertThat(call("import", records, data, "--out", list))
                .returns(1, Outcome::exit)
                .extracting(Outcome::err)
                .asString()
                .contains("pairs.dat, byte 500000: expected a record of at least 20 bytes, found only 7")
                .doesNotContain("\tat ");
        assertThat(list).doesNotExist();
        assertThat(call("calibrate", records, data, "--out", folder.resolve("c.csv")))
                .returns(1, Outcome::exit)
                .extracting(Outcome::err)
                .asString()
                .contains("expected a section calibration");
    }

    @Test
    void calibrationsComeFromTheData() throws IOException {
        Files.copy(SAMPLES.resolve("systems/heron-12.yaml"), folder.resolve("system.yaml"));
        Path records = Files.writeString(folder.resolve("records.yaml"), """
                raysheaf: records/1
                name: amplitudes
                system: system.yaml
                format: {kind: text, fields: [{name: c, column: 1}, {name: x, column: 2}, {name: t, column: 3, type: integer}]}
                attributes: {element: {from: c}, time_ps: {from: t}}
                calibration: {channel: c, amplitude: x}
                """);
        Random random = new Random(6);
        StringBuilder text = new StringBuilder();
        for (int i = 0; i < 20_000; i++) {
            int channel = random.nextInt(8);
            text.append(channel)
                    .append(',')
                    .append((100 + 10 * channel) * (1 + 0.05 * random.nextGaussian()))
                    .append(',')
                    .append(i)
                    .append('\n');
        }
        Path data = Files.writeString(folder.resolve("run.txt"), text);
        Path out = folder.resolve("calibration.csv");
        Outcome outcome = call("calibrate", records, data, "--out", out);
        assertThat(outcome.err()).isEmpty();
        assertThat(outcome.out()).contains("20,000 records, 8 channels: 8 gains, 0 time offsets");
        assertThat(Files.readAllLines(out)).hasSize(2 + 1 + 8);
        // 511 keV at amplitude 120: a gain of 4.258, its error 0.05 / √2500 of it
        assertThat(Files.readAllLines(out).get(5)).matches("2,4\\.2[3-8].*");
    }

    @Test
    void thePythonSnippetsOfThePageWork() throws IOException, InterruptedException {
        assumeTrue(hasPython(), "needs /usr/bin/python3 with numpy and h5py (Debian: python3-numpy, python3-h5py)");
        String page = Files.readString(EXAMPLES.resolve("python-matlab-r.md"));
        StringBuilder script = new StringBuilder();
        for (Matcher snippet =
                        Pattern.compile("```python\n(.*?)```", Pattern.DOTALL).matcher(page);
                snippet.find(); ) {
            script.append(snippet.group(1));
        }
        Files.copy(SAMPLES.resolve("heron-rods.h5"), folder.resolve("list.h5"));
        Files.copy(SAMPLES.resolve("systems/heron-12.yaml"), folder.resolve("system.yaml"));
        Files.writeString(folder.resolve("script.py"), script);
        assertThat(python("script.py")).contains("400000 pairs in 60.7");
        assertThat(call("check", folder.resolve("half.h5")).out()).contains("200000", "list of coincidences");
        Outcome paired = call("pair", folder.resolve("singles.h5"), "--out", folder.resolve("pairs.h5"));
        assertThat(paired.err()).doesNotContain("raysheaf");
        assertThat(paired.out()).contains("800,000 read");
        Outcome imported = call(
                "import", folder.resolve("mine.yaml"), folder.resolve("mine.npy"), "--out", folder.resolve("mine.h5"));
        assertThat(imported.out()).contains("400,000 written");
    }

    private static boolean hasPython() throws InterruptedException {
        try {
            return new ProcessBuilder("/usr/bin/python3", "-c", "import numpy, h5py")
                            .redirectErrorStream(true)
                            .redirectOutput(ProcessBuilder.Redirect.DISCARD)
                            .start()
                            .waitFor()
                    == 0;
        } catch (IOException e) {
            return false;
        }
    }

    private String python(String script) throws IOException, InterruptedException {
        Process process = new ProcessBuilder("/usr/bin/python3", script)
                .directory(folder.toFile())
                .redirectErrorStream(true)
                .start();
        String printed = new String(process.getInputStream().readAllBytes(), StandardCharsets.UTF_8);
        assertThat(process.waitFor(1, TimeUnit.MINUTES)).isTrue();
        assertThat(process.exitValue()).as(printed).isZero();
        return printed;
    }
}
