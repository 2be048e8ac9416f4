package org.raysheaf.transport;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.matter.Nuclide;

class DecayTimesTest {
    private static final double PS_PER_S = 1e12;

    @Test
    void numbersOfDecaysArePoisson() {
        // 500 slices of mean 60,000: the mean's standard error is √(60000/500) = 11, the variance's 60000·√(2/500) =
        // 3800
        DecayTimes times = new DecayTimes(500 * 60_000.0, 0, 1, null);
        long slices = times.slices();
        double mean = 500 * 60_000.0 / slices;
        double sum = 0;
        double squares = 0;
        for (long slice = 0; slice < slices; slice++) {
            double off = times.draw(1, slice, RandomStreams.stream(5, slice)).length - mean;
            sum += off;
            squares += off * off;
        }
        assertThat(sum / slices).isCloseTo(0, within(3 * Math.sqrt(mean / slices)));
        assertThat(squares / slices).isCloseTo(mean, within(3 * mean * Math.sqrt(2.0 / slices)));
    }

    @Test
    void gapsOfASteadySourceAreExponential() {
        DecayTimes times = new DecayTimes(60_000, 0, 60, null);
        long[] drawn = times.draw(1, 0, RandomStreams.stream(6, 0));
        int count = drawn.length;
        double squares = 0;
        int long2 = 0;
        for (int i = 1; i < count; i++) {
            double gap = (drawn[i] - drawn[i - 1]) / (60 * PS_PER_S) * (count + 1);
            assertThat(gap).isNotNegative();
            squares += gap * gap;
            long2 += gap > 2 ? 1 : 0;
        }
        // of an exponential with mean 1: E[g²] = 2 with variance 20, P(g > 2) = e^−2
        assertThat(squares / count).isCloseTo(2, within(3 * Math.sqrt(20.0 / count)));
        double p = Math.exp(-2);
        assertThat((double) long2 / count).isCloseTo(p, within(3 * Math.sqrt(p * (1 - p) / count)));
    }

    @Test
    void timesAreOrderStatisticsOfUniformNumbers() {
        // E[t_(k)] = k/(N + 1), Var = k (N − k + 1)/((N + 1)² (N + 2)): the share of the middle decay, over 400 streams
        DecayTimes times = new DecayTimes(200, 0, 1, null);
        double sum = 0;
        double squares = 0;
        int draws = 400;
        for (int i = 0; i < draws; i++) {
            long[] drawn = times.draw(1, 0, RandomStreams.stream(7, i));
            int n = drawn.length;
            int k = n / 2;
            double spread = Math.sqrt((double) k * (n - k + 1) / (n + 2)) / (n + 1);
            double pull = (drawn[k - 1] / PS_PER_S - (double) k / (n + 1)) / spread;
            sum += pull;
            squares += pull * pull;
        }
        assertThat(sum / draws).isCloseTo(0, within(3 / Math.sqrt(draws)));
        assertThat(squares / draws).isCloseTo(1, within(3 * Math.sqrt(2.0 / draws)));
    }

    @Test
    void halfOfTwoHalfLivesIsNotHalfTheDecays() {
        // counts in [0, T½] to counts in [T½, 2 T½] are 2 : 1
        double halfLife = 109.77 * 60;
        DecayTimes times = new DecayTimes(50_000, 0, 2 * halfLife, new Nuclide("F-18", halfLife, 1));
        long[] drawn = times.draw(1, 0, RandomStreams.stream(8, 0));
        long early =
                Arrays.stream(drawn).filter(time -> time < halfLife * PS_PER_S).count();
        double error = Math.sqrt(2.0 / 9 / drawn.length);
        assertThat((double) early / drawn.length).isCloseTo(2.0 / 3, within(3 * error));
        assertThat(times.timePs(0)).isZero();
        assertThat((double) times.timePs(2.0 / 3)).isCloseTo(halfLife * PS_PER_S, within(1e3));
        assertThat((double) times.timePs(1)).isCloseTo(2 * halfLife * PS_PER_S, within(1e3));
    }

    @Test
    void slicesFollowEachOtherInTime() {
        DecayTimes times = new DecayTimes(200_000, 0, 100, new Nuclide("short", 20, 1));
        assertThat(times.slices()).isEqualTo(4);
        long last = 0;
        for (long slice = 0; slice < 4; slice++) {
            long[] drawn = times.draw(1, slice, RandomStreams.stream(1, slice));
            assertThat(drawn).isSorted();
            assertThat(drawn[0]).isGreaterThanOrEqualTo(last).isGreaterThanOrEqualTo(times.startPs(slice));
            last = drawn[drawn.length - 1];
            assertThat(last).isLessThanOrEqualTo(times.startPs(slice + 1));
        }
        assertThat(last).isLessThanOrEqualTo((long) (100 * PS_PER_S));
    }

    @Test
    void steadyAndNearlySteadySourcesAgree() {
        DecayTimes steady = new DecayTimes(10, 0, 1000, null);
        DecayTimes nearly = new DecayTimes(10, 0, 1000, new Nuclide("long", 1e15, 1));
        assertThat((double) nearly.timePs(0.3)).isCloseTo((double) steady.timePs(0.3), within(1e3));
    }

    @Test
    void steadyDecaysDoNotFollowTheNuclide() {
        // 1000 per second throughout, beside a nuclide that is gone after the first of ten slices of equal numbers
        DecayTimes times = new DecayTimes(60_000, 600_000, 100, new Nuclide("short", 5, 1));
        double early = 0;
        double all = 0;
        for (long slice = 0; slice < times.slices(); slice++) {
            for (long time : times.drawSteady(1000, slice, RandomStreams.stream(9, slice))) {
                all++;
                early += time < 50 * PS_PER_S ? 1 : 0;
            }
        }
        assertThat(all).isCloseTo(100_000, within(3 * Math.sqrt(100_000)));
        assertThat(early / all).isCloseTo(0.5, within(3 * 0.5 / Math.sqrt(all)));
    }
}
