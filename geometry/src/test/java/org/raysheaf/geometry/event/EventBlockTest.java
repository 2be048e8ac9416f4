package org.raysheaf.geometry.event;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.EnumSet;
import java.util.Set;
import org.junit.jupiter.api.Test;

class EventBlockTest {
    @Test
    void everyAttributeHasAColumnOfItsType() {
        EventBlock block = new EventBlock(EnumSet.allOf(Attribute.class), 3);
        assertThat(block.ints(Attribute.ELEMENT_A)).hasSize(3);
        assertThat(block.longs(Attribute.TIME)).hasSize(3);
        assertThat(block.floats(Attribute.ENERGY_B)).hasSize(3);
        assertThat(block.bytes(Attribute.DELAYED)).hasSize(3);
        assertThat(block.attributes()).containsExactly(Attribute.values());
        block.ints(Attribute.ELEMENT_A)[2] = 9;
        assertThat(block.column(Attribute.ELEMENT_A)).isEqualTo(new int[] {0, 0, 9});
    }

    @Test
    void sizeStaysWithinCapacity() {
        EventBlock block = new EventBlock(Set.of(Attribute.TIME), 3);
        assertThat(block.size()).isZero();
        block.resize(3);
        assertThat(block.size()).isEqualTo(3);
        assertThatThrownBy(() -> block.resize(4)).hasMessageContaining("capacity=3: size=4");
        assertThatThrownBy(() -> block.resize(-1)).isInstanceOf(IllegalArgumentException.class);
        assertThatThrownBy(() -> new EventBlock(Set.of(), 0)).hasMessageContaining("capacity=0");
    }

    @Test
    void askingForAMissingColumnNamesIt() {
        EventBlock block = new EventBlock(Set.of(Attribute.TIME), 1);
        assertThat(block.has(Attribute.TIME)).isTrue();
        assertThat(block.has(Attribute.ENERGY_A)).isFalse();
        assertThatThrownBy(() -> block.floats(Attribute.ENERGY_A))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("energy_a_keV");
    }

    @Test
    void attributesAreFoundByTheirColumnNames() {
        for (Attribute attribute : Attribute.values()) {
            assertThat(Attribute.named(attribute.columnName())).contains(attribute);
        }
        assertThat(Attribute.named("element_c")).isEmpty();
    }
}
