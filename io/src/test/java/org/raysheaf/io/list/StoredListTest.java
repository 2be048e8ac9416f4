package org.raysheaf.io.list;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.EnumSet;
import java.util.Objects;
import java.util.Set;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;

/** A list written when a format version was new must be readable for ever. The stored files are never written again. */
class StoredListTest {
    private static final int EVENTS = 100;
    private static final Set<Attribute> COLUMNS = EnumSet.of(
            Attribute.ELEMENT_A,
            Attribute.ELEMENT_B,
            Attribute.TIME,
            Attribute.TIME_DIFFERENCE,
            Attribute.ENERGY_A,
            Attribute.ENERGY_B,
            Attribute.DELAYED);

    @TempDir
    Path folder;

    @Test
    void readsVersion1() throws IOException {
        Path path = folder.resolve("list-1.h5");
        try (InputStream stored = StoredListTest.class.getResourceAsStream("list-1.h5")) {
            Files.write(path, Objects.requireNonNull(stored).readAllBytes());
        }

        ListFile list = ListFile.open(path);

        assertThat(list.header()).isEqualTo(SampleLists.HEADER);
        assertThat(list.attributes()).isEqualTo(COLUMNS);
        assertThat(list.warnings()).isEmpty();
        assertThat(list.digest()).hasValue("83c4ffd24c41f393096f7f42a085533465bbd00f338be2d242a222e20547b070");
        assertThat(SampleLists.same(SampleLists.read(list), events())).isTrue();
    }

    /** The events in that file: event i has values that follow from i. */
    static EventBlock events() {
        EventBlock block = new EventBlock(COLUMNS, EVENTS);
        for (int i = 0; i < EVENTS; i++) {
            block.ints(Attribute.ELEMENT_A)[i] = i;
            block.ints(Attribute.ELEMENT_B)[i] = 4355 - i;
            block.longs(Attribute.TIME)[i] = 5_000_000_000_000L * i;
            block.floats(Attribute.TIME_DIFFERENCE)[i] = i - 50.5f;
            block.floats(Attribute.ENERGY_A)[i] = 450 + i;
            block.floats(Attribute.ENERGY_B)[i] = 550 - 0.25f * i;
            block.bytes(Attribute.DELAYED)[i] = (byte) (i % 10 == 0 ? 1 : 0);
        }
        block.resize(EVENTS);
        return block;
    }
}
