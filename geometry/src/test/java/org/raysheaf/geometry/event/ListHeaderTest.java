package org.raysheaf.geometry.event;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.time.Instant;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.matter.Nuclide;
import org.raysheaf.geometry.settings.InvalidSettingsException;

class ListHeaderTest {
    private static final double F18_HALF_LIFE_S = 109.77 * 60; // ENSDF
    private static final double F18_BRANCHING = 0.9673; // ENSDF
    private static final Nuclide F18 = new Nuclide("F-18", F18_HALF_LIFE_S, F18_BRANCHING);

    private static ListHeader header(double duration, double live, @Nullable Nuclide nuclide) {
        return new ListHeader("", duration, live, Instant.EPOCH, nuclide);
    }

    @Test
    void pairsFollowBranchingAndDecay() {
        // A 20-minute frame of F-18: the mean rate is the initial one over 1.0644741725.
        double expected = F18_BRANCHING * 1200 / 1.0644741725;
        assertThat(header(1200, 1200, F18).pairsPerBecquerel()).isCloseTo(expected, within(1e-6));
    }

    @Test
    void deadTimeTakesItsShare() {
        ListHeader full = header(1200, 1200, F18);
        assertThat(header(1200, 900, F18).pairsPerBecquerel()).isCloseTo(0.75 * full.pairsPerBecquerel(), within(1e-9));
    }

    @Test
    void withoutANuclideEveryLiveSecondCountsOnePair() {
        assertThat(header(1200, 900, null).pairsPerBecquerel()).isEqualTo(900);
    }

    @Test
    void refusesImpossibleTimes() {
        assertThatThrownBy(() -> header(10, 11, null))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("live_time_s: expected at most duration_s = 10.0, found 11.0");
        assertThatThrownBy(() -> header(Double.NaN, 0, null))
                .hasMessageContaining("duration_s")
                .hasMessageContaining("live_time_s");
    }
}
