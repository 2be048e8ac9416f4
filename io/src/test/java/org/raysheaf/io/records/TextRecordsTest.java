package org.raysheaf.io.records;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.Map;
import java.util.SplittableRandom;
import java.util.zip.GZIPOutputStream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class TextRecordsTest {
    @TempDir
    Path folder;

    private static final String NAMED = """
            format:
              kind: text
              delimiter: ";"
              comment: "#"
              header_lines: 2
              quote: "'"
              decimal_comma: true
              fields:
                - {name: channel, column: "Kanal", type: integer}
                - {name: energy, column: "E / keV", invalid: ["", "n.a."]}
                - {name: t, column: 2, type: hex}
            attributes:
              element: {from: channel}
              time_ps: {from: t, unit: us}
              energy_keV: {from: energy}
            """;

    @Test
    void columnsAreFoundByNameOrNumber() throws IOException {
        Path file = Lab.text(
                folder,
                "run.txt",
                "\uFEFF# a comment\r\nrun 17\r\nKanal;T;E / keV;other\r\n\r\n5; 0x0A ;511,5;x\r\n# in between\r\n'6';b;'4,5e2';\r\n7;c;n.a.;1\r\n8;d;;1");
        Lab.Imported got = Lab.run(folder, NAMED, file);
        assertThat(Lab.elements(got)).containsExactly(5, 6);
        assertThat(Lab.times(got)).containsExactly(10_000_000, 11_000_000);
        assertThat(Lab.energies(got)).containsExactly(511.5f, 450);
        assertThat(got.result().setAside()).isEqualTo(Map.of("energy: marked as invalid", 2L));
        assertThat(got.result().unread()).containsExactly("other");
        assertThat(got.result().bytes()).isEqualTo(Files.size(file));
    }

    @Test
    void anUnreadableLineIsShownWithItsNumber() throws IOException {
        Path file = Lab.text(folder, "run.txt", "x\nKanal;T;E / keV\n5;1;511,5\n5;1;51x,5\n");
        assertThatThrownBy(() -> Lab.run(folder, NAMED, file))
                .isInstanceOf(RecordException.class)
                .hasMessageContaining("run.txt, line 4: no number in energy: expected a number, found \"51x,5\";"
                        + " the record: \"5;1;51x,5\"; to go on past such records");
    }

    @Test
    void unreadableLinesAreCountedByReason() throws IOException {
        Path file = Lab.text(
                folder,
                "run.txt",
                "x\nKanal;T;E / keV\n5;1;5\n5;1\nx;1;5\n5;zz;5\n99999999999999999999;1;5\n'5;1;5\n6;2;6\n");
        Lab.Imported got = Lab.run(folder, NAMED + "damage: {policy: skip}\n", file);
        assertThat(Lab.elements(got)).containsExactly(5, 6);
        assertThat(got.result().unreadable())
                .isEqualTo(Map.of(
                        "too few columns", 1L, "no number in channel", 2L, "no number in t", 1L, "unclosed quote", 1L));
        assertThat(got.result().unreadableExamples())
                .hasSize(5)
                .first()
                .asString()
                .contains("line 4");
    }

    @Test
    void whatIsNoTextIsShownInHexadecimal() throws IOException {
        Path file = Files.write(folder.resolve("run.bin"), new byte[] {1, 2, (byte) 0xff, 0, '\n'});
        assertThatThrownBy(() -> Lab.run(folder, PLAIN, file))
                .hasMessageContaining("line 1")
                .hasMessageContaining("the record: 01 02 ff 00;");
    }

    @Test
    void aMissingColumnNamesThoseThatAreThere() throws IOException {
        Path file = Lab.text(folder, "run.txt", "x\nKanal;T;E\n");
        assertThatThrownBy(() -> Lab.run(folder, NAMED, file))
                .hasMessageContaining("line 2: expected a column named E / keV, found the columns Kanal, T, E");
    }

    @Test
    void runsOfBlanksSeparate() throws IOException {
        Path file = Lab.text(folder, "run.txt", "  5   1.5\t 100\n6 2 200   \n");
        Lab.Imported got = Lab.run(folder, """
                format:
                  kind: text
                  delimiter: blanks
                  fields: [{name: c, column: 1}, {name: t, column: 3}]
                attributes: {element: {from: c}, time_ps: {from: t}}
                """, file);
        assertThat(Lab.elements(got)).containsExactly(5, 6);
        assertThat(Lab.times(got)).containsExactly(100, 200);
    }

    @Test
    void longLinesAndBinaryFilesAreNoTrouble() throws IOException {
        String longLine = "5,1," + "9".repeat(3 << 20) + "\n";
        String nearlyTooLong = "5,1," + "9".repeat(300_000) + "\n";
        Path file = Lab.text(folder, "run.txt", "1,10\n" + longLine + nearlyTooLong + "2,20\n");
        Lab.Imported got = Lab.run(folder, PLAIN + "damage: {policy: skip}\n", file);
        assertThat(Lab.elements(got)).containsExactly(1, 5, 2);
        assertThat(got.result().unreadable()).isEqualTo(Map.of("line too long", 1L));
        assertThat(got.result().bytes()).isEqualTo(Files.size(file));
    }

    private static final String PLAIN = """
            format: {kind: text, fields: [{name: c, column: 1}, {name: t, column: 2, type: integer}]}
            attributes: {element: {from: c}, time_ps: {from: t}}
            """;

    @Test
    void compressedFilesAreReadAsTheyAre() throws IOException {
        StringBuilder text = new StringBuilder();
        for (int i = 0; i < 50_000; i++) {
            text.append(i % 512).append(',').append(i * 7919L % 100_003).append('\n');
        }
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        try (var out = new GZIPOutputStream(bytes)) {
            out.write(text.toString().getBytes(StandardCharsets.US_ASCII));
        }
        Path file = Files.write(folder.resolve("run.txt.gz"), bytes.toByteArray());
        Lab.Imported got = Lab.run(folder, PLAIN, file);
        assertThat(got.events().size()).isEqualTo(50_000);
        assertThat(got.result().bytes()).isEqualTo(text.length());
        Files.write(file, Arrays.copyOf(bytes.toByteArray(), bytes.size() / 2));
        assertThatThrownBy(() -> Lab.run(folder, PLAIN, file))
                .isInstanceOf(RecordException.class)
                .hasMessageContaining("run.txt.gz: expected sound compressed data, found damage or the end after");
        Files.writeString(file, "1,2\n");
        assertThatThrownBy(() -> Lab.run(folder, PLAIN, file))
                .hasMessageContaining("run.txt.gz: expected data compressed with gzip");
    }

    @Test
    void impossibleValuesAreSetAsideByColumn() throws IOException {
        Path file = Lab.text(folder, "run.txt", "1,10\n512,10\n-1,10\n1.5,10\nnan,10\ninf,10\n2,-1\n3,30\n");
        Lab.Imported got = Lab.run(folder, PLAIN, file);
        assertThat(Lab.elements(got)).containsExactly(1, 3);
        assertThat(got.result().setAside())
                .isEqualTo(Map.of(
                        "element: no element of the system (0 to 511)", 5L, "time_ps: no number of at least 0", 1L));
        assertThat(got.result().records()).isEqualTo(8);
        assertThat(got.result().addsUp()).isTrue();
    }

    @Test
    void numbersAreReadAsTheJavaLibraryReadsThem() {
        NumberText numbers = new NumberText('.');
        SplittableRandom random = new SplittableRandom(5);
        for (int i = 0; i < 200_000; i++) {
            double value = switch (i % 4) {
                case 0 -> Double.longBitsToDouble(random.nextLong());
                case 1 -> Float.intBitsToFloat(random.nextInt());
                case 2 -> random.nextInt(100_000_000) / 1000.0;
                default -> random.nextLong() * Math.pow(10, random.nextInt(-30, 5));
            };
            if (Double.isFinite(value)) {
                String text = i % 8 < 4
                        ? Double.toString(value)
                        : new java.math.BigDecimal(value)
                                .round(new java.math.MathContext(1 + random.nextInt(30)))
                                .toString();
                byte[] bytes = text.getBytes(StandardCharsets.US_ASCII);
                assertThat(numbers.real(bytes, 0, bytes.length)).as(text).isTrue();
                assertThat(Double.doubleToLongBits(numbers.value()))
                        .as(text)
                        .isEqualTo(Double.doubleToLongBits(Double.parseDouble(text)));
            }
        }
    }

    @Test
    void wholeNumbersReachToTheEndsOf64Bits() {
        NumberText numbers = new NumberText('.');
        for (long value : new long[] {0, 1, -1, Long.MAX_VALUE, Long.MIN_VALUE, 1234567890123456789L}) {
            byte[] bytes = Long.toString(value).getBytes(StandardCharsets.US_ASCII);
            assertThat(numbers.integer(bytes, 0, bytes.length)).isTrue();
            assertThat(numbers.whole()).isEqualTo(value);
        }
        for (String bad : new String[] {
            "9223372036854775808", "-9223372036854775809", "", "-", "1.0", "1e3", "99999999999999999999"
        }) {
            byte[] bytes = bad.getBytes(StandardCharsets.US_ASCII);
            assertThat(numbers.integer(bytes, 0, bytes.length)).as(bad).isFalse();
        }
        for (String bad : new String[] {"", ".", "-", "1e", "e5", "1..2", "1.2.3", "0x1p3", "1d", "1 2"}) {
            byte[] bytes = bad.getBytes(StandardCharsets.US_ASCII);
            assertThat(numbers.real(bytes, 0, bytes.length)).as(bad).isFalse();
        }
    }
}
