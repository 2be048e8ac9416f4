package org.raysheaf.io.records;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.HexFormat;
import java.util.Map;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** Several types of records in one stream, marks and damage. */
class BinaryRecordsTest {
    /** Eight bytes: type in the top four bits; events have channel (16), amplitude (12), tick (32); marks have the board in the channel's place. */
    private static final String STREAM = """
            format:
              kind: binary
              byte_order: big
              records:
                - name: event
                  bytes: 8
                  when: [{bit: 60, bits: 4, equals: "0x1"}]
                  fields:
                    - {name: board, bit: 56, bits: 4}
                    - {name: channel, bit: 44, bits: 12}
                    - {name: amplitude, bit: 32, bits: 12}
                    - {name: tick, bit: 0, bits: 32}
                - name: overflow
                  bytes: 8
                  role: mark
                  per: board
                  when: [{bit: 60, bits: 4, equals: "2"}]
                  fields:
                    - {name: board, bit: 56, bits: 4}
                - name: gate
                  bytes: 4
                  role: mark
                  when: [{bit: 28, bits: 4, equals: "3"}]
                  fields:
                    - {name: open, bit: 0, bits: 1}
            compute:
              time: {kind: formula, is: "(overflow.count * 0x100000000 + tick) * 10"}
            attributes:
              element: {from: channel}
              time_ps: {from: time}
              energy_keV: {from: amplitude}
            """;

    @TempDir
    Path folder;

    private static long event(int board, int channel, int amplitude, long tick) {
        return 1L << 60 | (long) board << 56 | (long) channel << 44 | (long) amplitude << 32 | tick;
    }

    private static long overflow(int board) {
        return 2L << 60 | (long) board << 56;
    }

    private Path write(ByteBuffer bytes) throws IOException {
        byte[] content = new byte[bytes.position()];
        bytes.flip().get(content);
        return Files.write(folder.resolve("run.bin"), content);
    }

    @Test
    void everyBoardHasItsOwnOverflowsAndGatesAreCounted() throws IOException {
        ByteBuffer bytes = ByteBuffer.allocate(1000)
                .putLong(event(0, 5, 511, 100))
                .putLong(overflow(0))
                .putLong(event(0, 6, 400, 1))
                .putLong(event(1, 7, 300, 200))
                .putInt(0x30000001)
                .putLong(event(1, 8, 200, 201));
        Lab.Imported got = Lab.run(
                folder,
                STREAM + "set_aside: [{reason: gate shut, when: \"gate.count > 0 and gate.open == 0\"}]\n",
                write(bytes));
        assertThat(Lab.elements(got)).containsExactly(5, 6, 7, 8);
        assertThat(Lab.times(got)).containsExactly(1000, 10 * ((1L << 32) + 1), 2000, 2010);
        assertThat(Lab.energies(got)).containsExactly(511, 400, 300, 200);
        assertThat(got.result().marks()).isEqualTo(Map.of("overflow", 1L, "gate", 1L));
        assertThat(got.result().records()).isEqualTo(4);
        assertThat(got.result().bytes()).isEqualTo(5 * 8 + 4);
        assertThat(got.result().unmapped()).isEmpty();
    }

    /** Marks carry the coarse time, events only the fine one. */
    @Test
    void timeMarksGiveTheCoarseTime() throws IOException {
        String yaml = """
                format:
                  kind: binary
                  records:
                    - name: time
                      bytes: 8
                      role: mark
                      when: [{bit: 63, bits: 1, equals: "1"}]
                      fields: [{name: coarse, bit: 0, bits: 40}]
                    - name: event
                      bytes: 8
                      fields: [{name: channel, bit: 0, bits: 9}, {name: fine, bit: 16, bits: 24}]
                set_aside: [{reason: before the first mark, when: time.count == 0}]
                attributes:
                  element: {from: channel}
                  time_ps: {from: time.coarse * 1000000 + fine}
                """;
        ByteBuffer bytes = ByteBuffer.allocate(100)
                .order(ByteOrder.LITTLE_ENDIAN)
                .putLong(7L << 16 | 1)
                .putLong(1L << 63 | 5)
                .putLong(8L << 16 | 2)
                .putLong(1L << 63 | 6)
                .putLong(9L << 16 | 3)
                .putLong(10L << 16 | 4);
        Lab.Imported got = Lab.run(folder, yaml, write(bytes));
        assertThat(Lab.elements(got)).containsExactly(2, 3, 4);
        assertThat(Lab.times(got)).containsExactly(5_000_008, 6_000_009, 6_000_010);
        assertThat(got.result().setAside()).isEqualTo(Map.of("before the first mark", 1L));
        assertThat(got.result().marks()).isEqualTo(Map.of("time", 2L));
    }

    @Test
    void thousandsOfMarksBetweenTwoEventsAreNoTrouble() throws IOException {
        ByteBuffer bytes = ByteBuffer.allocate(8 * 50_003);
        for (int i = 0; i < 50_000; i++) {
            bytes.putLong(overflow(3));
        }
        bytes.putLong(event(3, 1, 1, 7)).putLong(overflow(3)).putLong(event(3, 2, 1, 8));
        Lab.Imported got = Lab.run(folder, STREAM, write(bytes));
        assertThat(Lab.times(got)).containsExactly(10 * (50_000L * (1L << 32) + 7), 10 * (50_001L * (1L << 32) + 8));
    }

    @Test
    void anUnknownRecordStopsTheImportAndIsShown() throws IOException {
        ByteBuffer bytes =
                ByteBuffer.allocate(100).putLong(event(0, 5, 511, 100)).putLong(0x7000000000000001L);
        Path path = write(bytes);
        assertThatThrownBy(() -> Lab.run(folder, STREAM, path))
                .isInstanceOf(RecordException.class)
                .hasMessageContaining(
                        "run.bin, byte 8: expected a record of one of the types event, overflow, gate, found bits that fit none;"
                                + " the record: 70 00 00 00 00 00 00 01; to go on past such records, set damage");
    }

    @Test
    void skippingCountsWhatItPasses() throws IOException {
        ByteBuffer bytes = ByteBuffer.allocate(100)
                .putLong(event(0, 5, 511, 100))
                .putInt(0x70000000)
                .putLong(event(0, 6, 511, 100))
                .putShort((short) 0x1111);
        Lab.Imported got = Lab.run(folder, STREAM + "damage: {policy: skip}\n", write(bytes));
        assertThat(Lab.elements(got)).containsExactly(5, 6);
        assertThat(got.result().unreadable())
                .isEqualTo(Map.of("no known type of record", 1L, "file ends within a record", 1L));
        assertThat(got.result().bytesPassedOver()).isEqualTo(6);
        assertThat(got.result().addsUp()).isTrue();
    }

    @Test
    void moreDamageThanTheLimitEndsTheImport() throws IOException {
        ByteBuffer bytes =
                ByteBuffer.allocate(100).putInt(0x70000000).putInt(0x70000000).putInt(0x70000000);
        Path path = write(bytes);
        assertThatThrownBy(() -> Lab.run(folder, STREAM + "damage: {policy: skip, limit: 2}\n", path))
                .hasMessageContaining("byte 8")
                .hasMessageContaining("unreadable record 3, more than damage.limit");
    }

    private static final String MARKED = """
            format:
              kind: binary
              records:
                - name: event
                  bytes: 8
                  fields:
                    - {name: channel, at_byte: 2, bytes: 2}
                    - {name: tick, at_byte: 4, bytes: 4}
            attributes:
              element: {from: channel}
              time_ps: {from: tick, unit: ns}
            damage: {policy: resynchronise, marker: "a5 5a"}
            """;

    @Test
    void afterDamageReadingGoesOnAtTheNextMarker() throws IOException {
        ByteBuffer bytes = ByteBuffer.allocate(2_000_000).order(ByteOrder.LITTLE_ENDIAN);
        int good = 0;
        long lost = 0;
        SplittableRandom random = new SplittableRandom(3);
        while (bytes.remaining() > 2000) {
            if (random.nextInt(50) == 0) {
                int junk = 1 + random.nextInt(random.nextInt(20) == 0 ? 1500 : 20);
                for (int i = 0; i < junk; i++) {
                    bytes.put((byte) random.nextInt(0x80)); // never the first byte of a marker
                }
                lost += junk;
            }
            bytes.put((byte) 0xa5)
                    .put((byte) 0x5a)
                    .putShort((short) (good % 512))
                    .putInt(good);
            good++;
        }
        Lab.Imported got = Lab.run(folder, MARKED.replace("marker:", "limit: 100000, marker:"), write(bytes));
        assertThat(got.result().written()).isEqualTo(good);
        assertThat(got.result().bytesPassedOver()).isEqualTo(lost);
        long[] times = Lab.times(got);
        for (int i = 0; i < good; i++) {
            assertThat(times[i]).isEqualTo(1000L * i);
        }
    }

    @Test
    void junkWithoutAnyMarkerToTheEndOfALongFileIsPassedOver() throws IOException {
        byte[] junk = new byte[1_000_003];
        Arrays.fill(junk, (byte) 0xa5);
        Path path = Files.write(folder.resolve("junk.bin"), junk);
        Lab.Imported got = Lab.run(folder, MARKED, path);
        assertThat(got.result().records()).isZero();
        assertThat(got.result().bytesPassedOver()).isEqualTo(junk.length);
        assertThat(got.result().unreadableRecords()).isEqualTo(1);
    }

    @Test
    void onlyTheFirstRecordsAreReadForALook() throws IOException {
        ByteBuffer bytes = ByteBuffer.allocate(8 * 5000);
        for (int i = 0; i < 5000; i++) {
            bytes.putLong(event(0, i % 512, 1, i));
        }
        Lab.Imported got = Lab.run(folder, STREAM, 3000, write(bytes));
        assertThat(got.result().records()).isEqualTo(3000);
        assertThat(got.result().written()).isEqualTo(3000);
    }

    @Test
    void twoTypesOfEventsShareTheirColumns() throws IOException {
        String yaml = """
                format:
                  kind: binary
                  records:
                    - name: short
                      bytes: 4
                      when: [{bit: 31, bits: 1, equals: "0"}]
                      fields: [{name: channel, bit: 0, bits: 9}, {name: tick, bit: 9, bits: 20}]
                    - name: long
                      bytes: 8
                      fields: [{name: tick, at_byte: 4, bytes: 4}, {name: channel, bit: 0, bits: 9}]
                attributes: {element: {from: channel}, time_ps: {from: tick}}
                """;
        ByteBuffer bytes = ByteBuffer.allocate(100)
                .order(ByteOrder.LITTLE_ENDIAN)
                .putInt(100 << 9 | 3)
                .putInt(0x80000000 | 4)
                .putInt(200)
                .putInt(300 << 9 | 5);
        Lab.Imported got = Lab.run(folder, yaml, write(bytes));
        assertThat(Lab.elements(got)).containsExactly(3, 4, 5);
        assertThat(Lab.times(got)).containsExactly(100, 200, 300);
    }

    @Test
    void layoutsThatCannotBeAreRefusedTogether() {
        assertThatThrownBy(() -> Lab.describe("""
                        format:
                          kind: binary
                          records:
                            - name: event
                              bytes: 4
                              fields:
                                - {name: a, bit: 30, bits: 4}
                                - {name: b, at_byte: 2, bytes: 4}
                                - {name: c, bit: 3}
                                - {name: d, type: float, bit: 0, bits: 16}
                                - {name: a, bit: 0, bits: 1}
                        attributes: {element: {from: a}, time_ps: {from: b}}
                        """))
                .hasMessageContaining("fields[0]: expected bits inside the 32 bits of the word, found bits 30 to 33")
                .hasMessageContaining("fields[1]: expected a word inside the record of 4 bytes, found bytes 2 to 5")
                .hasMessageContaining("fields[2]: expected at_byte and bytes together, and bit and bits together")
                .hasMessageContaining("fields[3].type: expected 32 or 64 bits for a float, found 16")
                .hasMessageContaining("fields[4].name: expected another name, found a a second time");
    }

    @Test
    void theMarkerIsSpelledInHexadecimal() {
        assertThat(new DamagePolicy(DamagePolicy.Policy.RESYNCHRONISE, 1, "a5 5A").markerBytes())
                .isEqualTo(HexFormat.of().parseHex("a55a"));
    }
}
