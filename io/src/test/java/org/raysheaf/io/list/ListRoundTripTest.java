package org.raysheaf.io.list;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.EnumSource;
import org.junit.jupiter.params.provider.ValueSource;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.event.PairingTally;
import org.raysheaf.io.hdf5.Compression;

class ListRoundTripTest {
    @TempDir
    Path folder;

    @ParameterizedTest
    @ValueSource(ints = {0, 1, 2, ListFormat.CHUNK_LENGTH - 1, ListFormat.CHUNK_LENGTH, ListFormat.CHUNK_LENGTH + 1})
    void givesBackEveryValueOfEveryTypeAtOddSizes(int events) throws IOException {
        EventBlock written = SampleLists.block(events, 1);

        ListFile list = ListFile.open(SampleLists.write(folder.resolve("list.h5"), written));

        assertThat(list.events()).isEqualTo(events);
        assertThat(SampleLists.same(SampleLists.read(list), written)).isTrue();
        assertThat(list.warnings()).isEmpty();
    }

    @ParameterizedTest
    @EnumSource(Compression.class)
    void givesBackListsOfSeveralChunksHoweverStored(Compression compression) throws IOException {
        EventBlock written = SampleLists.block(3 * ListFormat.CHUNK_LENGTH + 17, 2);

        ListFile list = ListFile.open(SampleLists.write(folder.resolve("list.h5"), compression, written));

        assertThat(SampleLists.same(SampleLists.read(list), written)).isTrue();
    }

    @Test
    void givesBackTheHeader() throws IOException {
        ListFile list = ListFile.open(SampleLists.write(folder.resolve("list.h5"), SampleLists.block(5, 3)));

        assertThat(list.header()).isEqualTo(SampleLists.HEADER);
        assertThat(list.attributes()).isEqualTo(SampleLists.ALL);
    }

    @Test
    void keepsAnUnknownNuclideAndAnEmptyDescription() throws IOException {
        ListHeader header = new ListHeader("", 1, 1, SampleLists.HEADER.start(), null);
        Path path = folder.resolve("list.h5");
        try (ListWriter writer = ListWriter.create(SampleLists.ALL, path, false)) {
            writer.commit(header);
        }

        assertThat(ListFile.open(path).header()).isEqualTo(header);
    }

    @Test
    void keepsHowPairsWereMade() throws IOException {
        Pairing settings = new Pairing(3.5, 350, 650.0, 200.0, Pairing.Crowds.STRONGEST_TWO, 10);
        PairingTally tally = new PairingTally(1, 2, 3, 4, 5, 6, 7);
        PairingRecord record = new PairingRecord(settings, tally, List.of(3L, 0L, 5_000_000_000L));
        ListHeader old = SampleLists.HEADER;
        ListHeader header = new ListHeader(
                old.systemDescription(), old.durationS(), old.liveTimeS(), old.start(), old.nuclide(), record);
        Path path = folder.resolve("list.h5");
        try (ListWriter writer = ListWriter.create(SampleLists.ALL, path, false)) {
            writer.commit(header);
        }

        assertThat(ListFile.open(path).header()).isEqualTo(header);
        assertThat(ListFile.open(path).warnings()).isEmpty();
    }

    @Test
    void keepsOnlyTheColumnsItWasMadeWith() throws IOException {
        Set<Attribute> pair = EnumSet.of(Attribute.ELEMENT_A, Attribute.ELEMENT_B);
        EventBlock written = SampleLists.block(pair, 1000, 4);

        ListFile list = ListFile.open(SampleLists.write(folder.resolve("list.h5"), written));

        assertThat(list.attributes()).isEqualTo(pair);
        assertThat(SampleLists.same(SampleLists.read(list), written)).isTrue();
    }

    @Test
    void readsOnlyTheColumnsAskedFor() throws IOException {
        EventBlock written = SampleLists.block(1000, 5);
        ListFile list = ListFile.open(SampleLists.write(folder.resolve("list.h5"), written));
        EventBlock times = new EventBlock(EnumSet.of(Attribute.TIME), 1000);

        try (EventSource.Cursor cursor = list.open()) {
            assertThat(cursor.next(times)).isTrue();
            assertThat(times.longs(Attribute.TIME)).isEqualTo(written.longs(Attribute.TIME));
            assertThat(cursor.next(times)).isFalse();
            assertThat(times.size()).isZero();
        }
    }

    @Test
    void givesTheSameBytesHoweverTheEventsWereCutIntoBlocks() throws IOException {
        EventBlock whole = SampleLists.block(300_000, 6);
        Path once = SampleLists.write(folder.resolve("once.h5"), Compression.NONE, whole);
        Path pieces = folder.resolve("pieces.h5");
        EventBlock piece = new EventBlock(SampleLists.ALL, 777);
        try (ListWriter writer = ListWriter.create(SampleLists.ALL, pieces, false);
                EventSource.Cursor cursor = ListFile.open(once).open()) {
            while (cursor.next(piece)) {
                writer.accept(piece);
            }
            writer.commit(SampleLists.HEADER);
        }

        assertThat(Files.mismatch(once, pieces)).isEqualTo(-1);
        assertThat(ListFile.open(once).digest()).isEqualTo(ListFile.open(pieces).digest());
    }

    @Test
    void hasAnotherDigestWhenOneValueDiffers() throws IOException {
        EventBlock block = SampleLists.block(100, 7);
        String before = digest(block);
        block.ints(Attribute.ELEMENT_A)[50]++;

        assertThat(digest(block)).isNotEqualTo(before);
    }

    private String digest(EventBlock block) throws IOException {
        return ListFile.open(SampleLists.write(folder.resolve("list.h5"), block))
                .digest()
                .orElseThrow();
    }

    @Test
    void keepsSinglesAndTheTruthApart() throws IOException {
        Set<Attribute> columns = ListKind.SINGLES.measured();
        columns.addAll(ListKind.SINGLES.truth());
        EventBlock written = SampleLists.block(columns, 1000, 11);

        ListFile list = ListFile.open(SampleLists.write(folder.resolve("singles.h5"), written));

        assertThat(list.kind()).isEqualTo(ListKind.SINGLES);
        assertThat(list.attributes()).isEqualTo(ListKind.SINGLES.measured());
        assertThat(list.truth()).isEqualTo(ListKind.SINGLES.truth());
        assertThat(list.warnings()).isEmpty();
        EventBlock decays = new EventBlock(EnumSet.of(Attribute.DECAY), 1000);
        try (EventSource.Cursor cursor = list.open()) {
            cursor.next(decays);
        }
        assertThat(decays.longs(Attribute.DECAY)).isEqualTo(written.longs(Attribute.DECAY));
    }

    @Test
    void hasTheSameDigestWithAndWithoutTruth() throws IOException {
        Set<Attribute> columns = ListKind.PAIRS.measured();
        columns.addAll(ListKind.PAIRS.truth());
        EventBlock withTruth = SampleLists.block(columns, 100, 12);
        EventBlock without = new EventBlock(ListKind.PAIRS.measured(), 100);
        without.resize(100);
        for (Attribute attribute : without.attributes()) {
            System.arraycopy(withTruth.column(attribute), 0, without.column(attribute), 0, 100);
        }

        assertThat(digest(withTruth)).isEqualTo(digest(without));
    }

    @Test
    void refusesColumnsOfAnotherKindOfList() {
        assertThatThrownBy(() -> ListWriter.create(
                        EnumSet.of(Attribute.ELEMENT, Attribute.TIME, Attribute.DELAYED),
                        folder.resolve("list.h5"),
                        false))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessage("a list of singles has no delayed");
    }

    @Test
    void leavesNothingBehindWithoutCommit() throws IOException {
        try (ListWriter writer = ListWriter.create(SampleLists.ALL, folder.resolve("list.h5"), false)) {
            writer.accept(SampleLists.block(10, 8));
        }

        try (Stream<Path> left = Files.list(folder)) {
            assertThat(left).isEmpty();
        }
    }

    @Test
    void overwritesOnlyWhenToldTo() throws IOException {
        Path path = SampleLists.write(folder.resolve("list.h5"), SampleLists.block(10, 9));

        assertThatThrownBy(() -> ListWriter.create(SampleLists.ALL, path, false))
                .isInstanceOf(FileAlreadyExistsException.class)
                .hasMessageContaining("list.h5")
                .hasMessageContaining("exists already");
        assertThat(ListFile.open(SampleLists.write(path, SampleLists.block(20, 9)))
                        .events())
                .isEqualTo(20);
    }

    @Test
    void refusesToWriteValuesThatCannotBe() throws IOException {
        EventBlock block = SampleLists.block(10, 10);
        block.floats(Attribute.ENERGY_B)[7] = Float.NaN;

        try (ListWriter writer = ListWriter.create(SampleLists.ALL, folder.resolve("list.h5"), false)) {
            assertThatThrownBy(() -> writer.accept(block))
                    .isInstanceOf(IllegalArgumentException.class)
                    .hasMessage("energy_b_keV, event 7: expected a finite number of at least 0, found NaN");
        }
    }
}
