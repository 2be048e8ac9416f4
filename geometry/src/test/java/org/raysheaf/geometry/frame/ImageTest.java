package org.raysheaf.geometry.frame;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import org.junit.jupiter.api.Test;

class ImageTest {
    private static final Grid GRID = Grid.centred(2, 3, 4, 1);

    @Test
    void sharesItsArrayAndCopiesOnlyWhenAsked() {
        float[] values = new float[24];
        Image image = new Image(GRID, values);
        Image copy = image.copy();
        values[GRID.index(1, 2, 3)] = 5;
        assertThat(image.at(1, 2, 3)).isEqualTo(5);
        assertThat(image.values()).isSameAs(values);
        assertThat(copy.at(1, 2, 3)).isZero();
    }

    @Test
    void sumsInDoublePrecision() {
        Image image = Image.filled(GRID, 1);
        image.values()[0] = 1 << 24; // 2^24 + 1 is no float
        assertThat(image.sum()).isEqualTo((1 << 24) + 23);
    }

    @Test
    void refusesAnArrayOfTheWrongLength() {
        assertThatThrownBy(() -> new Image(GRID, new float[23])).hasMessageContaining("expected 24, found 23");
    }
}
