package org.raysheaf.io.records;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.nio.file.Path;
import java.util.List;
import java.util.Random;
import java.util.SortedMap;
import java.util.TreeMap;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.port.Progress;

class CalibrationTest {
    private static final int PAIRS = 120_000;
    private static final int CHANNELS = 60;
    private static final double SIGMA_KEV = 28;
    private static final double SIGMA_PS = 250;

    /** Five standard errors: among some hundred checks, none fails by chance more often than once in ten thousand runs. */
    private static final double FIVE = 5;

    private static final String YAML = """
            format:
              kind: text
              fields: [{name: ca, column: 1}, {name: xa, column: 2}, {name: cb, column: 3}, {name: xb, column: 4}, {name: dt, column: 5}]
            compute:
              ea: {kind: energy, file: calibration.csv, key: ca, of: xa}
              eb: {kind: energy, file: calibration.csv, key: cb, of: xb}
              la: {kind: table, file: calibration.csv, key: ca, column: time_offset_ps}
              lb: {kind: table, file: calibration.csv, key: cb, column: time_offset_ps}
            attributes:
              element_a: {from: ca}
              element_b: {from: cb}
              time_difference_ps: {from: dt - lb + la}
              energy_a_keV: {from: ea}
              energy_b_keV: {from: eb}
            acquisition: {duration_s: 1}
            calibration: {channel: ca, channel_b: cb, amplitude: xa, amplitude_b: xb, time_difference_ps: dt, window_ns: 20}
            """;

    @TempDir
    Path folder;

    /** Made-up electronics: the first half of the channels faces the second half. Channel 7 is dead, 8 gives noise only, 9 counts rarely. */
    private final Random random = new Random(21);

    private final double[] gain = random.doubles(CHANNELS, 0.3, 3).toArray();
    private final double[] late = random.doubles(CHANNELS, -2000, 2000).toArray();

    private double amplitude(int channel) {
        double energy =
                random.nextInt(3) > 0 ? 510.999 + SIGMA_KEV * random.nextGaussian() : 50 + 290 * random.nextDouble();
        return channel == 8 ? 5 * random.nextDouble() / gain[channel] : energy / gain[channel];
    }

    private Path data(DetectorSystem system, Vector3 source) throws IOException {
        StringBuilder text = new StringBuilder();
        for (int i = 0; i < PAIRS; i++) {
            int a = random.nextInt(CHANNELS / 2);
            int b = CHANNELS / 2 + random.nextInt(CHANNELS / 2);
            if (a == 7 || (a == 9 && i % 100 > 0)) {
                continue;
            }
            if (random.nextBoolean()) {
                int swap = a;
                a = b;
                b = swap;
            }
            boolean randomPair = random.nextInt(10) == 0;
            double path = (system.centre(b).minus(source).norm()
                            - system.centre(a).minus(source).norm())
                    / 0.299792458;
            double dt = randomPair
                    ? 40_000 * (random.nextDouble() - 0.5)
                    : path + late[b] - late[a] + SIGMA_PS * random.nextGaussian();
            text.append(a)
                    .append(',')
                    .append(amplitude(a))
                    .append(',')
                    .append(b)
                    .append(',')
                    .append(amplitude(b))
                    .append(',')
                    .append(dt)
                    .append('\n');
        }
        return Lab.text(folder, "run.txt", text.toString());
    }

    @Test
    void gainsAndOffsetsAreFoundAndThenUsed() throws IOException {
        DetectorSystem system = Lab.system();
        Vector3 source = new Vector3(3, 20, -4); // far from the middle, so that flight paths matter
        Path data = data(system, source);
        RecordCalibration work = new RecordCalibration(folder.resolve("RECORDS.yaml"), Lab.describe(YAML), system);
        CalibrationResult result = work.run(List.of(data), source, null, Progress.SILENT);

        assertThat(result.channels()).hasSize(CHANNELS - 1);
        assertThat(result.failures())
                .hasSize(3)
                .anyMatch(f -> f.matches("channel 9, energy: only \\d+ counts, expected 200"))
                .anyMatch(f -> f.matches("channel 9, time: only \\d+ pairs, expected 200"))
                .anyMatch(f -> f.startsWith("channel 8, energy: no photopeak that a fit finds"));
        assertThat(result.timeSpreadPs())
                .isCloseTo(SIGMA_PS, within(0.1 * SIGMA_PS)); // from the middle half, with random pairs among them
        double meanLate = 0;
        int told = 0;
        for (CalibrationResult.Channel c : result.channels()) {
            meanLate += c.timeOffsetPs() == null ? 0 : late[(int) c.channel()] - c.timeOffsetPs();
            told += c.timeOffsetPs() == null ? 0 : 1;
        }
        meanLate /= told; // only differences can be known
        for (CalibrationResult.Channel c : result.channels()) {
            int channel = (int) c.channel();
            if (c.gainKeV() != null && c.gainErrorKeV() != null) {
                // The foot of scattered photons adds about as much again to the error of the peak.
                assertThat(c.gainKeV())
                        .as("gain of %d", channel)
                        .isCloseTo(gain[channel], within(2 * FIVE * c.gainErrorKeV()));
                assertThat(c.fwhmPercent()).isCloseTo(100 * 2.3548 * SIGMA_KEV / 510.999, within(3.0));
            }
            if (c.timeOffsetPs() != null && c.timeOffsetErrorPs() != null) {
                assertThat(c.timeOffsetPs() + meanLate)
                        .as("offset of %d", channel)
                        .isCloseTo(late[channel], within(FIVE * c.timeOffsetErrorPs()));
            }
        }

        result.write(folder.resolve("calibration.csv"), false);
        Lab.Imported got = Lab.run(folder, YAML, data);
        assertThat(got.result().setAside().keySet()).allMatch(reason -> reason.contains("calibration.csv"));
        long near = 0;
        for (int i = 0; i < got.events().size(); i++) {
            near += Math.abs(got.events().floats(Attribute.ENERGY_A)[i] - 511) < 3 * SIGMA_KEV ? 1 : 0;
        }
        assertThat(near / (double) got.events().size()).isBetween(0.62, 0.72);
    }

    @Test
    void singlesThatFollowEachOtherTellOffsetsToo() throws IOException {
        StringBuilder text = new StringBuilder();
        long time = 1_000_000;
        SortedMap<Long, Integer> singles = new TreeMap<>();
        for (int i = 0; i < 40_000; i++) {
            time += 1_000_000;
            int a = random.nextInt(10);
            int b = 10 + random.nextInt(10);
            singles.put(time + Math.round(late[a] + SIGMA_PS * random.nextGaussian()), a);
            singles.put(time + Math.round(late[b] + SIGMA_PS * random.nextGaussian()), b);
        }
        singles.forEach((t, c) -> text.append(c).append(' ').append(t).append('\n'));
        Path data = Lab.text(folder, "run.txt", text.toString());
        CalibrationResult result = new RecordCalibration(
                        folder.resolve("RECORDS.yaml"), Lab.describe("""
                                format: {kind: text, delimiter: blanks, fields: [{name: c, column: 1}, {name: t, column: 2, type: integer}]}
                                attributes: {element: {from: c}, time_ps: {from: t}}
                                calibration: {channel: c, time_ps: t}
                                """), Lab.system())
                .run(List.of(data), null, null, Progress.SILENT);
        assertThat(result.failures()).isEmpty();
        double shift = late[0] - offset(result, 0);
        for (int c = 0; c < 20; c++) {
            assertThat(offset(result, c) + shift)
                    .isCloseTo(late[c], within(FIVE * Math.sqrt(2) * SIGMA_PS * Math.sqrt(2) / Math.sqrt(4000)));
        }
    }

    private static double offset(CalibrationResult result, int channel) {
        Double offset = result.channels().get(channel).timeOffsetPs();
        assertThat(offset).isNotNull();
        return offset;
    }

    @Test
    void withoutASectionNothingCanBeCalibrated() {
        assertThatThrownBy(() -> new RecordCalibration(Path.of("RECORDS.yaml"), Lab.describe("""
                                format: {kind: text, fields: [{name: c, column: 1}]}
                                attributes: {element: {from: c}, time_ps: {from: c}}
                                """), Lab.system()))
                .hasMessageContaining("expected a section calibration");
    }
}
