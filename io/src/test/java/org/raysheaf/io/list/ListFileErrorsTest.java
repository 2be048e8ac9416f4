package org.raysheaf.io.list;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.nio.file.attribute.FileTime;
import java.util.Arrays;
import java.util.EnumSet;
import java.util.Set;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.hdf5.GroupWriter;
import org.raysheaf.io.hdf5.Hdf5Writer;
import org.raysheaf.io.list.ListFileException.Kind;

/** Every kind of trouble is told apart, and its message says where, what was expected and what was found. */
class ListFileErrorsTest {
    @TempDir
    Path folder;

    private Path path;

    @BeforeEach
    void choosePath() {
        path = folder.resolve("list.h5");
    }

    /** Adds to, or spoils, a list that would be sound. */
    private interface Change {
        void apply(GroupWriter root) throws IOException;
    }

    private void writePlain(Change change) throws IOException {
        try (Hdf5Writer file = Hdf5Writer.create(path, true)) {
            GroupWriter root = file.root();
            root.attribute("raysheaf", "list/1");
            root.attribute("live_time_s", 600.0);
            root.attribute("start", "2026-03-01T09:30:00+01:00");
            root.attribute("system", "raysheaf: system/1\n");
            change.apply(root);
            file.commit();
        }
    }

    private static void elements(GroupWriter root) throws IOException {
        root.array("element_a", new int[] {0, 1, 2}, 3);
        root.array("element_b", new int[] {7, 8, 9}, 3);
    }

    private void refuses(Kind kind, String... parts) {
        assertThatThrownBy(() -> ListFile.open(path).verify())
                .isInstanceOfSatisfying(
                        ListFileException.class, e -> assertThat(e.kind()).isEqualTo(kind))
                .hasMessageContaining("list.h5")
                .hasMessageContainingAll(parts);
    }

    @Test
    void aFileThatDoesNotExistIsSaidSo() {
        assertThatThrownBy(() -> ListFile.open(path)).isInstanceOf(NoSuchFileException.class);
    }

    @Test
    void somethingElseIsNotHdf5() throws IOException {
        Files.writeString(path, "element_a,element_b\n1,2\n");
        refuses(Kind.NOT_HDF5, "expected an HDF5 file, found other bytes at its start");
        Files.write(path, new byte[0]);
        refuses(Kind.NOT_HDF5, "is this the right file?");
    }

    @Test
    void anotherHdf5FileIsNotAList() throws IOException {
        writePlain(root -> root.attribute("raysheaf", "volume/1"));
        refuses(Kind.NOT_A_LIST, "found \"volume/1\"", "raysheaf = \"list/1\"");
        try (Hdf5Writer file = Hdf5Writer.create(path, true)) {
            file.commit();
        }
        refuses(Kind.NOT_A_LIST, "found another HDF5 file");
    }

    @Test
    void aListOfALaterVersionIsTooNew() throws IOException {
        writePlain(root -> root.attribute("raysheaf", "list/2"));
        refuses(Kind.TOO_NEW, "expected list format 1 to 1, found 2", "use a newer version");
    }

    @Test
    void aShortenedFileIsTruncated() throws IOException {
        SampleLists.write(path, SampleLists.block(1000, 1));
        byte[] bytes = Files.readAllBytes(path);
        for (int length : new int[] {bytes.length - 1, bytes.length / 2, 100, 47, 8}) {
            Files.write(path, Arrays.copyOf(bytes, length));
            refuses(Kind.TRUNCATED, "bytes, found only " + length, "cut short");
        }
    }

    @Test
    void aChangedByteIsDamage() throws IOException {
        SampleLists.write(path, Compression.NONE, 1 << 18, SampleLists.block(1000, 1));
        byte[] bytes = Files.readAllBytes(path);
        bytes[bytes.length / 2] ^= 1;
        Files.write(path, bytes);
        refuses(Kind.DAMAGED, "expected CRC-32C", "at index 0", "take another copy");
    }

    @Test
    void aChangedSystemDescriptionIsDamage() throws IOException {
        writePlain(root -> {
            elements(root);
            root.text("system", "raysheaf: system/1\n").attribute("sha256", ListFormat.sha256("another"));
        });
        refuses(Kind.DAMAGED, "system: expected SHA-256 ");
    }

    @Test
    void missingPartsAreNamed() throws IOException {
        writePlain(root -> root.array("element_a", new int[3], 3));
        refuses(Kind.MISSING, "element_b: expected a column of whole numbers", "[element_a]");
        writePlain(root -> {
            elements(root);
            root.attribute("nuclide", "F-18");
        });
        refuses(Kind.MISSING, "half_life_s: expected a root attribute");
    }

    @Test
    void wrongTypesShapesAndUnitsAreNamed() throws IOException {
        writePlain(root -> root.array("element_a", new float[3], 3));
        refuses(Kind.WRONG_TYPE, "element_a: expected whole numbers, found float32");
        writePlain(root -> root.array("element_a", new int[6], 3, 2));
        refuses(Kind.WRONG_TYPE, "element_a: expected one dimension, found shape [3, 2]");
        writePlain(root -> root.attribute("live_time_s", "600 s"));
        refuses(Kind.WRONG_TYPE, "live_time_s: expected the attribute to be a number");
        writePlain(root -> {
            elements(root);
            root.array("time_ps", new long[3], 3).attribute("unit", "ns");
        });
        refuses(Kind.WRONG_TYPE, "time_ps: expected the unit ps, found ns");
    }

    @Test
    void columnsOfDifferentLengthsAreNamed() throws IOException {
        writePlain(root -> {
            elements(root);
            root.array("time_ps", new long[2], 2);
        });
        refuses(Kind.INCONSISTENT_LENGTHS, "time_ps: expected 3 values as in element_b, found 2");
        writePlain(root -> {
            elements(root);
            root.attribute("events", 4L);
        });
        refuses(Kind.INCONSISTENT_LENGTHS, "element_a: expected 4 values as in attribute events, found 3");
    }

    @Test
    void anElementBeyondTheSystemIsNamedWithItsEvent() throws IOException {
        SampleLists.write(path, SampleLists.block(5000, 2));
        ListFile list = ListFile.open(path);
        list.withElements(SampleLists.ELEMENTS).verify();
        EventBlock events = SampleLists.read(list);
        int first = 0;
        while (events.ints(Attribute.ELEMENT_A)[first] < 4300 && events.ints(Attribute.ELEMENT_B)[first] < 4300) {
            first++;
        }
        String place = ", event " + first + ": expected an element of the system, 0 to 4299, found ";

        assertThatThrownBy(() -> SampleLists.read(list.withElements(4300)))
                .isInstanceOfSatisfying(
                        ListFileException.class, e -> assertThat(e.kind()).isEqualTo(Kind.ELEMENT_OUT_OF_RANGE))
                .hasMessageContaining(place);
    }

    @Test
    void valuesThatCannotBeAreNamedWithTheirEvent() throws IOException {
        writePlain(root -> {
            elements(root);
            root.array("energy_a_keV", new float[] {511, Float.NaN, 1}, 3);
        });
        refuses(Kind.IMPOSSIBLE_VALUE, "energy_a_keV, event 1: expected a finite number of at least 0, found NaN");
        writePlain(root -> {
            elements(root);
            root.array("time_difference_ps", new float[] {-5, 5, Float.POSITIVE_INFINITY}, 3);
        });
        refuses(Kind.IMPOSSIBLE_VALUE, "time_difference_ps, event 2: expected a finite number, found Infinity");
        writePlain(root -> {
            elements(root);
            root.array("time_ps", new long[] {0, 1, -1}, 3);
        });
        refuses(Kind.IMPOSSIBLE_VALUE, "time_ps, event 2: expected a time of at least 0 ps, found -1");
        writePlain(root -> {
            elements(root);
            root.array("delayed", new int[] {0, 2, 0}, 3);
        });
        refuses(Kind.IMPOSSIBLE_VALUE, "delayed, event 1: expected 0 or 1, found 2");
        writePlain(root -> {
            root.array("element_a", new long[] {0, 1, 2}, 3);
            root.array("element_b", new long[] {0, 1L << 40, 2}, 3);
        });
        refuses(Kind.IMPOSSIBLE_VALUE, "element_b: expected at index 1 a whole number", "found 1099511627776");
        writePlain(root -> {
            root.array("element_a", new int[] {0, 1, 2}, 3);
            root.array("element_b", new int[] {0, 1, -2}, 3);
        });
        refuses(Kind.ELEMENT_OUT_OF_RANGE, "element_b, event 2: expected an element number", "found 4294967294");
    }

    @Test
    void timesThatCannotBeAreNamed() throws IOException {
        writePlain(root -> {
            elements(root);
            root.attribute("live_time_s", Double.NaN);
        });
        refuses(Kind.IMPOSSIBLE_VALUE, "live_time_s: expected a number > 0, found NaN");
        writePlain(root -> {
            elements(root);
            root.attribute("start", "yesterday");
        });
        refuses(Kind.IMPOSSIBLE_VALUE, "start: expected a time like", "found \"yesterday\"");
        writePlain(root -> {
            elements(root);
            root.attribute("nuclide", "F-18");
            root.attribute("half_life_s", -1.0);
            root.attribute("positron_branching", 2.0);
        });
        refuses(Kind.IMPOSSIBLE_VALUE, "half_life_s: expected a number > 0", "positron_branching: expected at most 1");
    }

    @Test
    void membersThatAreNoColumnsAreRemarkedUpon() throws IOException {
        writePlain(root -> {
            elements(root);
            root.array("energy_keV", new float[3], 3);
        });

        assertThat(ListFile.open(path).warnings())
                .anyMatch(w -> w.startsWith("member energy_keV is not part of the format and was passed over"));
    }

    @Test
    void aFileChangedAfterOpeningIsRefused() throws IOException {
        SampleLists.write(path, SampleLists.block(10, 1));
        ListFile list = ListFile.open(path);
        Files.setLastModifiedTime(path, FileTime.fromMillis(0));

        assertThatThrownBy(list::open)
                .isInstanceOfSatisfying(
                        ListFileException.class, e -> assertThat(e.kind()).isEqualTo(Kind.CHANGED));
    }

    @Test
    void aFailedCursorGivesNothingMore() throws IOException {
        SampleLists.write(path, Compression.NONE, 100, SampleLists.block(1000, 1));
        byte[] bytes = Files.readAllBytes(path);
        bytes[bytes.length / 3] ^= 1;
        Files.write(path, bytes);
        EventBlock block = new EventBlock(SampleLists.ALL, 1000);

        try (EventSource.Cursor cursor = ListFile.open(path).open()) {
            for (int attempt = 0; attempt < 2; attempt++) {
                assertThatThrownBy(() -> cursor.next(block)).isInstanceOf(ListFileException.class);
                assertThat(block.size()).isZero();
            }
        }
    }

    @Test
    void blocksThatDoNotSuitTheListAreRefused() throws IOException {
        Set<Attribute> pair = EnumSet.of(Attribute.ELEMENT_A, Attribute.ELEMENT_B);
        SampleLists.write(path, SampleLists.block(pair, 10, 1));

        try (EventSource.Cursor cursor = ListFile.open(path).open()) {
            EventBlock first = new EventBlock(EnumSet.of(Attribute.ELEMENT_A), 5);
            EventBlock second = new EventBlock(pair, 5);
            EventBlock third = new EventBlock(EnumSet.of(Attribute.TIME), 5);
            assertThat(cursor.next(first)).isTrue();
            assertThatThrownBy(() -> cursor.next(second)).hasMessageContaining("must have the same columns");
            assertThatThrownBy(() -> cursor.next(third)).hasMessageContaining("the list has no time_ps");
        }
    }
}
