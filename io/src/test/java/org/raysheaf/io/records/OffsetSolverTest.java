package org.raysheaf.io.records;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;

class OffsetSolverTest {
    /** Rounding of sums of numbers of a thousand, with room. */
    private static final double ROUNDING = 1e-6;

    @Test
    void offsetsWithoutNoiseComeBackExactly() {
        int channels = 500;
        SplittableRandom random = new SplittableRandom(3);
        double[] late = random.doubles(channels, -1000, 1000).toArray();
        PairSums pairs = new PairSums();
        for (int i = 0; i < 30_000; i++) { // more pairs than the table has room for at first
            int a = random.nextInt(channels - 3);
            int b = random.nextInt(channels - 3);
            if (a != b) {
                pairs.add(a, b, late[b] - late[a]);
            }
        }
        // Two channels know only each other, one knows nobody.
        pairs.add(channels - 2, channels - 1, 5);
        double[] offsets = new OffsetSolver(pairs, channels).solve();
        double shift = late[0] - offsets[0];
        double mean = 0;
        for (int c = 0; c < channels - 3; c++) {
            assertThat(offsets[c] + shift).isCloseTo(late[c], within(ROUNDING));
            mean += offsets[c];
        }
        assertThat(mean / channels).isCloseTo(0, within(ROUNDING));
        assertThat(offsets[channels - 3]).isNaN();
        assertThat(offsets[channels - 2]).isNaN();
        assertThat(offsets[channels - 1]).isNaN();
    }

    /** Three channels by hand: m01 = 1 (three times), m12 = 1, m02 = 5 (once each); the normal equations give o1 − o0 = 1.4286, o2 − o0 = 3.7143. */
    @Test
    void contradictionsAreSettledByTheirWeights() {
        PairSums pairs = new PairSums();
        pairs.add(0, 1, 1);
        pairs.add(1, 0, -1);
        pairs.add(0, 1, 1);
        pairs.add(1, 2, 1);
        pairs.add(0, 2, 5);
        double[] offsets = new OffsetSolver(pairs, 3).solve();
        assertThat(offsets[1] - offsets[0]).isCloseTo(10.0 / 7, within(ROUNDING));
        assertThat(offsets[2] - offsets[0]).isCloseTo(26.0 / 7, within(ROUNDING));
    }
}
