package org.raysheaf.io.records;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Map;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** What may stand between a field and a column of the list. */
class StepsTest {
    @TempDir
    Path folder;

    private static final String FIELDS = """
            format: {kind: text, fields: [{name: c, column: 1, type: integer}, {name: t, column: 2, type: integer}, {name: x, column: 3}]}
            """;

    @Test
    void tablesCalibrationsMasksAndMarkersApplyInOrder() throws IOException {
        Lab.text(
                folder,
                "channels.csv",
                "# by hand\nchannel,element,gain_keV,offset_keV,quadratic_keV,late_ps\n3,30,2,1,0.5,100\n4,40,1,0,0,-50\n5,50,,0,0,0\n7,70,1,0,0,0\n");
        Lab.text(folder, "bad.csv", "channel\n7\n");
        Path file = Lab.text(folder, "run.txt", "3,1000,10\n4,2000,511\n5,3000,1\n6,4000,1\n7,5000,1\n3,6000,65535\n");
        Lab.Imported got = Lab.run(folder, FIELDS + """
                        compute:
                          e: {kind: table, file: channels.csv, key: c, column: element}
                          energy: {kind: energy, file: channels.csv, key: c, of: x}
                          late: {kind: table, file: channels.csv, key: c, column: late_ps}
                        set_aside:
                          - {reason: saturated, value: x, in: [65535]}
                          - {reason: bad channel, value: c, file: bad.csv}
                        attributes:
                          element: {from: e}
                          time_ps: {from: t - late}
                          energy_keV: {from: energy}
                        """, file);
        assertThat(Lab.elements(got)).containsExactly(30, 40);
        assertThat(Lab.times(got)).containsExactly(900, 2050);
        assertThat(Lab.energies(got)).containsExactly(1 + 2 * 10 + 0.5f * 100, 511);
        assertThat(got.result().setAside())
                .isEqualTo(Map.of(
                        "saturated", 1L,
                        "bad channel", 1L,
                        "compute.e: no entry in channels.csv", 1L,
                        "compute.energy: no calibration in channels.csv", 1L));
    }

    @Test
    void lightSharingPositionsFindTheirCrystal() throws IOException {
        Lab.text(folder, "map.txt", "0 1 2\n3 -1 5\n");
        Path file =
                Lab.text(folder, "run.txt", "0,1,0.1\n0,2,0.5\n0,3,0.99\n1,4,0\n1,5,0.5\n1,6,1\n1,7,-0.1\n1,8,nan\n");
        Lab.Imported got = Lab.run(folder, FIELDS + """
                        compute: {crystal: {kind: map, file: map.txt, x: x, y: "0.25 + 0.5 * c"}}
                        attributes: {element: {from: crystal}, time_ps: {from: t}}
                        """, file);
        assertThat(Lab.elements(got)).containsExactly(0, 1, 2, 3);
        assertThat(got.result().setAside()).isEqualTo(Map.of("compute.crystal: position in no crystal", 4L));
    }

    @Test
    void aWrappingClockIsUnwrappedPerBoard() throws IOException {
        Path file = Lab.text(
                folder, "run.txt", "0,65000,0\n1,10,0\n0,500,0\n0,65530,0\n0,40000,0\n1,20,0\n0,3000,0\n0,65536,0\n");
        Lab.Imported got = Lab.run(folder, FIELDS + """
                        compute: {time: {kind: clock, of: t, tick_ps: 15.625, bits: 16, per: c}}
                        attributes: {element: {from: c}, time_ps: {from: time}}
                        """, file);
        // board 0: 65000, 65536 + 500, back to 65530, 40000 (a step back of less than half), then on to 65536 + 3000
        assertThat(Lab.times(got)).containsExactly(1015625, 156, 1031813, 1023906, 625000, 313, 1070875);
        assertThat(got.result().clocks().get("time")).isEqualTo(new ImportResult.Clock(2, 2));
        assertThat(got.result().setAside()).isEqualTo(Map.of("compute.time: count beyond the range of the clock", 1L));
    }

    @Test
    void ticksBecomePicosecondsExactlyForHours() throws IOException {
        // Ten hours in ticks of 15.625 ps: as a double the time would be rounded to 4 ps.
        long tick = 36_000_000_000_000_000L / 125 * 8 + 3;
        Path file = Lab.text(folder, "run.txt", "0," + tick + ",0\n");
        Lab.Imported got = Lab.run(folder, FIELDS + """
                        compute: {time: {kind: clock, of: t, tick_ps: 15.625}}
                        attributes: {element: {from: c}, time_ps: {from: time}}
                        """, file);
        assertThat(Lab.times(got)).containsExactly(36_000_000_000_000_047L);
    }

    @Test
    void positionsOfATableBecomeElements() throws IOException {
        var system = Lab.system();
        StringBuilder table = new StringBuilder("channel,x_mm,y_mm,z_mm\n");
        for (int e = 0; e < Lab.ELEMENTS; e++) {
            var centre = system.centre(e);
            table.append(1000 - e)
                    .append(',')
                    .append(centre.x() + 0.3)
                    .append(',')
                    .append(centre.y())
                    .append(',')
                    .append(centre.z() - 0.2)
                    .append('\n');
        }
        Lab.text(folder, "positions.csv", table.toString());
        Path file = Lab.text(folder, "run.txt", "1000,1,0\n900,2,0\n489,3,0\n");
        String yaml = FIELDS + """
                compute: {e: {kind: nearest_element, file: positions.csv, key: c, within_mm: 1}}
                attributes: {element: {from: e}, time_ps: {from: t}}
                """;
        assertThat(Lab.elements(Lab.run(folder, yaml, file))).containsExactly(0, 100, 511);
        Lab.text(folder, "positions.csv", "channel,x_mm,y_mm,z_mm\n1000,0.5,3,0\n");
        assertThatThrownBy(() -> Lab.run(folder, yaml, file))
                .hasMessageContaining(
                        "expected an element within 1.0 mm of (0.5, 3.0, 0.0) mm, channel 1000 of positions.csv")
                .hasMessageContaining("check axes and units");
    }

    @Test
    void boardsAreMergedByTimeAndTimesMayBeginAtTheFirstEvent() throws IOException {
        StringBuilder[] boards = {new StringBuilder(), new StringBuilder(), new StringBuilder()};
        for (int i = 0; i < 20_000; i++) {
            boards[(i * 7 + i / 13) % 3]
                    .append(i % 512)
                    .append(',')
                    .append(5000 + 10L * i)
                    .append(",0\n");
        }
        Path[] files = new Path[3];
        for (int b = 0; b < 3; b++) {
            files[b] = Lab.text(folder, "board" + b + ".txt", boards[b].toString());
        }
        Lab.Imported got = Lab.run(folder, FIELDS + """
                        files: boards
                        acquisition: {zero: first_event}
                        attributes: {element: {from: c}, time_ps: {from: t}}
                        """, files);
        long[] times = Lab.times(got);
        assertThat(times).hasSize(20_000);
        for (int i = 0; i < times.length; i++) {
            assertThat(times[i]).isEqualTo(10L * i);
        }
    }

    @Test
    void smallDisorderIsPutInOrder() throws IOException {
        int n = 300_000;
        SplittableRandom random = new SplittableRandom(4);
        StringBuilder text = new StringBuilder();
        for (int i = 0; i < n; i++) {
            text.append(i % 512)
                    .append(',')
                    .append(1_000_000 + 100L * i + random.nextInt(50_000))
                    .append(",0\n");
        }
        Path file = Lab.text(folder, "run.txt", text.toString());
        String yaml = FIELDS + "attributes: {element: {from: c}, time_ps: {from: t}}\norder_ns: 50\n";
        Lab.Imported got = Lab.run(folder, yaml, file);
        assertThat(Lab.times(got)).hasSize(n).isSorted();
        assertThat(got.result().addsUp()).isTrue();
    }

    @Test
    void fieldsThatServeNothingAreNamed() throws IOException {
        Path file = Lab.text(folder, "run.txt", "1,2,3\n");
        Lab.Imported got = Lab.run(folder, FIELDS + "attributes: {element: {from: c}, time_ps: {from: t}}\n", file);
        assertThat(got.result().unmapped()).containsExactly("x");
    }

    @Test
    void mistakesInTablesAndMapsNameTheFileAndTheLine() throws IOException {
        Path file = Lab.text(folder, "run.txt", "1,2,3\n");
        String yaml = FIELDS + """
                compute: {e: {kind: table, file: channels.csv, key: c, column: element}}
                attributes: {element: {from: e}, time_ps: {from: t}}
                """;
        assertThatThrownBy(() -> Lab.run(folder, yaml, file))
                .hasMessageContaining("compute.e")
                .hasMessageContaining("no such file");
        Lab.text(folder, "channels.csv", "channel,elem\n1,2\n");
        assertThatThrownBy(() -> Lab.run(folder, yaml, file))
                .hasMessageContaining("expected a column element, found channel, elem");
        Lab.text(folder, "channels.csv", "channel,element\n1,2\n1,3\n");
        assertThatThrownBy(() -> Lab.run(folder, yaml, file))
                .hasMessageContaining("line 3, channel: expected every key once, found 1 also in line 2");
        Lab.text(folder, "channels.csv", "channel,element\n1,two\n");
        assertThatThrownBy(() -> Lab.run(folder, yaml, file))
                .hasMessageContaining("line 2, element: expected a number, found two");
        Files.write(folder.resolve("channels.csv"), new byte[] {(byte) 0xff, 0, 1});
        assertThatThrownBy(() -> Lab.run(folder, yaml, file)).hasMessageContaining("expected a table as text");
    }

    @Test
    void pointsFindTheElementThatTheyLieIn() throws IOException {
        var centre = Lab.system().centre(77);
        Path file = Lab.text(
                folder, "run.txt", "0,1," + (centre.x() + 0.3) + "\n0,2," + (centre.x() + 500) + "\n0,3,nan\n");
        Lab.Imported got = Lab.run(
                folder,
                FIELDS + "compute: {e: {kind: element_at, x_mm: x, y_mm: \"" + centre.y() + "\", z_mm: \"0 + "
                        + centre.z() + " - 0.2\"}}\n" + "attributes: {element: {from: e}, time_ps: {from: t}}\n",
                file);
        assertThat(Lab.elements(got)).containsExactly(77);
        assertThat(got.result().setAside()).isEqualTo(Map.of("compute.e: point in no element", 2L));
    }

    @Test
    void aDescriptionIsCheckedWithoutData() throws IOException {
        for (String format : new String[] {
            "{kind: hdf5, dataset: d, fields: [{name: c}, {name: t}]}",
            "{kind: npy, fields: [{name: c}, {name: t}]}",
            "{kind: text, fields: [{name: c, column: 1}, {name: t, column: 2}]}"
        }) {
            String good = "format: " + format + "\nattributes: {element: {from: c}, time_ps: {from: t}}\n";
            new RecordImport(folder.resolve("RECORDS.yaml"), Lab.describe(good), Lab.system()).verify();
            RecordImport bad = new RecordImport(
                    folder.resolve("RECORDS.yaml"), Lab.describe(good.replace("from: c", "from: c + d")), Lab.system());
            assertThatThrownBy(bad::verify)
                    .hasMessageContaining(
                            "RECORDS.yaml, attributes.element: formula \"c + d\", character 5: expected one of the values");
        }
    }

    @Test
    void descriptionsThatCannotBeAreRefused() {
        assertThatThrownBy(() -> Lab.describe(FIELDS + """
                        attributes: {element: {from: c}, energie_keV: {from: c}, energy_a_keV: {from: c}, time_ps: {from: t, unit: keV}}
                        set_aside: [{reason: none}]
                        """))
                .hasMessageContaining("set_aside[0].when: expected either when or value, found neither");
        assertThatThrownBy(
                        () -> Lab.describe(
                                FIELDS
                                        + "attributes: {element: {from: c}, energie_keV: {from: c}, energy_a_keV: {from: c}, energy_keV: {from: t, unit: ps}}\n"))
                .hasMessageContaining("found no such column")
                .hasMessageContaining("expected time_ps, without which it is not a list of singles")
                .hasMessageContaining("found one of the other kind")
                .hasMessageContaining("expected a unit of the same quantity as keV, found ps");
    }
}
