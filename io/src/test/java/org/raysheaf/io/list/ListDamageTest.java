package org.raysheaf.io.list;

import static org.assertj.core.api.Assertions.assertThat;
import static org.junit.jupiter.api.Assertions.assertTimeoutPreemptively;

import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.Arrays;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import java.util.SplittableRandom;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.list.ListFileException.Kind;

/**
 * Lists with bytes changed, blanked or cut off. A list of ours then either gives exactly the original events and header, or one of the
 * named errors; whatever else escapes, or takes longer than a moment, fails the test. A list from elsewhere has no checksums, so it may
 * give other values, but nothing worse.
 */
class ListDamageTest {
    private static final Duration MOMENT = Duration.ofSeconds(10); // far above the milliseconds that it takes
    private static final long SEED = Long.getLong("test.seed", 20260301);

    @TempDir
    Path folder;

    @Test
    void noticesDamageInAFewLists() throws IOException {
        noticesDamage(200);
    }

    @Test
    @Tag("proof")
    void noticesDamageInManyLists() throws IOException {
        noticesDamage(1000);
    }

    private void noticesDamage(int lists) throws IOException {
        EventBlock events = SampleLists.block(700, SEED);
        List<byte[]> originals = List.of(
                Files.readAllBytes(SampleLists.write(folder.resolve("a.h5"), Compression.DEFLATE, 1 << 18, events)),
                Files.readAllBytes(SampleLists.write(folder.resolve("b.h5"), Compression.NONE, 100, events)),
                Files.readAllBytes(SampleLists.write(folder.resolve("c.h5"), Compression.DEFLATE, 5, events)));
        Map<Kind, Integer> outcomes = new EnumMap<>(Kind.class);

        for (int i = 0; i < lists; i++) {
            String name = "seed " + SEED + ", list " + i;
            Path damaged = damaged(originals.get(i % originals.size()), i);
            Kind outcome = assertTimeoutPreemptively(MOMENT, () -> readExactly(damaged, events, name), name);
            if (outcome != null) {
                outcomes.merge(outcome, 1, Integer::sum);
            }
        }

        // The test would prove nothing if the damage did not show in most lists, and in more than one way.
        assertThat(outcomes.values().stream().mapToInt(Integer::intValue).sum()).isGreaterThan(lists / 2);
        assertThat(outcomes).containsKeys(Kind.DAMAGED, Kind.TRUNCATED, Kind.NOT_HDF5);
    }

    @Test
    void survivesDamageInAFewListsFromElsewhere() throws IOException {
        survivesDamage(200);
    }

    @Test
    @Tag("proof")
    void survivesDamageInManyListsFromElsewhere() throws IOException {
        survivesDamage(5000);
    }

    private void survivesDamage(int lists) throws IOException {
        byte[] original;
        try (InputStream stored = ListDamageTest.class.getResourceAsStream("plain.h5")) {
            original = Objects.requireNonNull(stored).readAllBytes();
        }
        for (int i = 0; i < lists; i++) {
            String name = "seed " + SEED + ", plain list " + i;
            Path damaged = damaged(original, i);
            assertTimeoutPreemptively(MOMENT, () -> readSomehow(damaged, name), name);
        }
    }

    private Path damaged(byte[] original, int number) throws IOException {
        SplittableRandom random = new SplittableRandom(SEED + number);
        byte[] bytes = original.clone();
        switch (random.nextInt(8)) {
            case 0 -> bytes = Arrays.copyOf(bytes, random.nextInt(bytes.length)); // cut short
            case 1 -> { // a lost sector
                int from = random.nextInt(bytes.length);
                Arrays.fill(bytes, from, Math.min(bytes.length, from + 512), (byte) 0);
            }
            case 2 -> bytes[random.nextInt(64)] ^= (byte) (1 << random.nextInt(8)); // one bit near the start
            default -> {
                int flips = 1 + random.nextInt(8);
                for (int flip = 0; flip < flips; flip++) {
                    bytes[random.nextInt(bytes.length)] ^= (byte) (1 + random.nextInt(255));
                }
            }
        }
        return Files.write(folder.resolve("damaged.h5"), bytes);
    }

    private static @Nullable Kind readExactly(Path path, EventBlock expected, String name) throws IOException {
        try {
            ListFile list = ListFile.open(path).withElements(SampleLists.ELEMENTS);
            EventBlock events = SampleLists.read(list);
            assertThat(list.header()).as(name).isEqualTo(SampleLists.HEADER);
            assertThat(list.warnings()).as(name).isEmpty();
            assertThat(SampleLists.same(events, expected)).as(name).isTrue();
            return null;
        } catch (ListFileException e) {
            assertThat(e).as(name).hasMessageContaining("damaged.h5");
            return e.kind();
        }
    }

    private static void readSomehow(Path path, String name) throws IOException {
        try {
            ListFile.open(path).verify();
        } catch (ListFileException e) {
            assertThat(e).as(name).hasMessageContaining("damaged.h5");
        }
    }
}
