package org.raysheaf.geometry.settings;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import org.junit.jupiter.api.Test;

class NearestTest {
    @Test
    void countsInsertionsDeletionsAndReplacements() {
        // The textbook example: replace k by s, e by i, insert g.
        assertThat(Nearest.distance("kitten", "sitting")).isEqualTo(3);
        assertThat(Nearest.distance("", "abc")).isEqualTo(3);
        assertThat(Nearest.distance("abc", "abc")).isZero();
    }

    @Test
    void picksTheFirstAmongEquals() {
        assertThat(Nearest.to("radius_cm", List.of("pitch_mm", "radius_mm", "radius_im")))
                .isEqualTo("radius_mm");
    }
}
