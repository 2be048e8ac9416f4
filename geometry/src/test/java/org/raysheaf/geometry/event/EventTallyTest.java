package org.raysheaf.geometry.event;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.event.EventTally.Reason;

class EventTallyTest {
    @Test
    void usedAndSetAsideAddUpToRead() {
        EventTally tally = new EventTally();
        assertThat(tally.read()).isZero();
        for (int i = 0; i < 5; i++) {
            tally.use();
        }
        tally.setAside(Reason.DELAYED);
        tally.setAside(Reason.DELAYED);
        tally.setAside(Reason.BLOCKS_TOO_CLOSE);
        assertThat(tally.used()).isEqualTo(5);
        assertThat(tally.setAsideFor(Reason.DELAYED)).isEqualTo(2);
        assertThat(tally.setAsideFor(Reason.OUTSIDE_IMAGE)).isZero();
        assertThat(tally.read()).isEqualTo(8);
    }

    @Test
    void withdrawingMovesEventsAndLosesNone() {
        EventTally tally = new EventTally();
        tally.use();
        tally.use();
        tally.withdraw(Reason.OUTSIDE_IMAGE, 2);
        assertThat(tally.used()).isZero();
        assertThat(tally.setAsideFor(Reason.OUTSIDE_IMAGE)).isEqualTo(2);
        assertThat(tally.read()).isEqualTo(2);
        assertThatThrownBy(() -> tally.withdraw(Reason.OUTSIDE_IMAGE, 1))
                .hasMessageContaining("only 0 events were used");
    }
}
