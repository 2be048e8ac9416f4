package org.raysheaf.transport;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.event.PairingTally;
import org.raysheaf.geometry.settings.InvalidSettingsException;

class PairerTest {
    private static final DetectorSystem RINGS = Trials.rings(12);

    /** Elements in blocks 0, 6 and 5 of the first ring, and in block 1, too close to block 0. */
    private static final int A = 3;

    private static final int B = 6 * 121 + 5;
    private static final int C = 5 * 121 + 7;
    private static final int NEXT_TO_A = 121 + 2;

    private record Single(int element, long timePs, double energyKeV) {}

    private static Pairing pairing(Pairing.Crowds crowds, @Nullable Double delayNs) {
        return new Pairing(5, 400, 600.0, delayNs, crowds, 0);
    }

    private record Outcome(List<String> pairs, PairingTally tally) {}

    /** Pairs singles, cut into blocks of a given size; one line per pair. */
    private static Outcome pair(Pairing pairing, int blockSize, Single... singles) throws IOException {
        Set<Attribute> attributes = EnumSet.of(Attribute.ELEMENT, Attribute.TIME, Attribute.ENERGY);
        Collected found = new Collected();
        Pairer pairer = new Pairer(RINGS, pairing, attributes, found);
        EventBlock block = new EventBlock(attributes, blockSize);
        for (Single single : singles) {
            int i = block.size();
            block.resize(i + 1);
            block.ints(Attribute.ELEMENT)[i] = single.element;
            block.longs(Attribute.TIME)[i] = single.timePs;
            block.floats(Attribute.ENERGY)[i] = (float) single.energyKeV;
            if (block.size() == blockSize) {
                pairer.accept(block);
                block.resize(0);
            }
        }
        pairer.accept(block);
        pairer.finish();
        List<String> pairs = new ArrayList<>();
        for (int i = 0; i < found.size(); i++) {
            String late = pairing.delayNs() != null && found.value(i, Attribute.DELAYED) == 1 ? " delayed" : "";
            pairs.add(found.elementA(i) + "-" + found.elementB(i) + " @" + found.timePs(i) + " "
                    + (long) found.timeDifferencePs(i) + late);
        }
        return new Outcome(pairs, pairer.tally());
    }

    @Test
    void twoInAWindowPairWhicheverCameFirst() throws IOException {
        for (int blockSize = 1; blockSize <= 7; blockSize++) {
            Outcome outcome = pair(
                    pairing(Pairing.Crowds.DISCARD, null),
                    blockSize,
                    new Single(A, 1000, 511),
                    new Single(B, 6000, 500), // exactly at the end of the window
                    new Single(B, 100_000, 511),
                    new Single(A, 101_000, 511),
                    new Single(A, 200_000, 511),
                    new Single(B, 205_001, 511)); // just outside
            assertThat(outcome.pairs()).containsExactly(A + "-" + B + " @1000 5000", A + "-" + B + " @100000 -1000");
            assertThat(outcome.tally()).isEqualTo(new PairingTally(0, 2, 0, 0, 4, 2, 0));
            assertThat(outcome.tally().singles()).isEqualTo(6);
        }
    }

    @Test
    void energiesOutsideTheWindowDoNotTakePart() throws IOException {
        Outcome outcome = pair(
                pairing(Pairing.Crowds.DISCARD, null),
                3,
                new Single(A, 0, 511),
                new Single(C, 1000, 300),
                new Single(B, 2000, 400),
                new Single(C, 3000, 600.5));
        assertThat(outcome.pairs()).containsExactly(A + "-" + B + " @0 2000");
        assertThat(outcome.tally().outsideEnergies()).isEqualTo(2);
    }

    @Test
    void closeBlocksDoNotPair() throws IOException {
        Outcome outcome =
                pair(pairing(Pairing.Crowds.DISCARD, null), 3, new Single(A, 0, 511), new Single(NEXT_TO_A, 1000, 511));
        assertThat(outcome.pairs()).isEmpty();
        assertThat(outcome.tally().tooClose()).isEqualTo(2);
    }

    @Test
    void crowdsAreTreatedAsAskedFor() throws IOException {
        Single[] three = {new Single(A, 0, 450), new Single(B, 1000, 511), new Single(C, 2000, 520)};
        String ab = A + "-" + B + " @0 1000";
        String ac = A + "-" + C + " @0 2000";
        assertThat(pair(pairing(Pairing.Crowds.DISCARD, null), 3, three).pairs())
                .isEmpty();
        assertThat(pair(pairing(Pairing.Crowds.DISCARD, null), 3, three).tally().crowded())
                .isEqualTo(3);
        // B and C are neighbours
        assertThat(pair(pairing(Pairing.Crowds.EVERY_PAIR, null), 3, three).pairs())
                .containsExactly(ab, ac);
        assertThat(pair(pairing(Pairing.Crowds.FIRST_TWO, null), 3, three).pairs())
                .containsExactly(ab);
        Single[] strongA = {new Single(A, 0, 550), new Single(B, 1000, 511), new Single(C, 2000, 520)};
        assertThat(pair(pairing(Pairing.Crowds.STRONGEST_TWO, null), 3, strongA).pairs())
                .containsExactly(ac);
    }

    @Test
    void delayedPairsComeFromTheLaterWindow() throws IOException {
        for (int blockSize = 1; blockSize <= 4; blockSize++) {
            Outcome outcome = pair(
                    pairing(Pairing.Crowds.DISCARD, 100.0),
                    blockSize,
                    new Single(A, 0, 511),
                    new Single(B, 103_000, 511), // 3 ns after the window of A opened
                    new Single(A, 300_000, 511),
                    new Single(B, 405_001, 511)); // just outside
            assertThat(outcome.pairs()).containsExactly(A + "-" + B + " @0 3000 delayed");
            assertThat(outcome.tally().delayed()).isEqualTo(1);
            assertThat(outcome.tally().alone()).isEqualTo(4);
        }
    }

    @Test
    void disorderWithinTheToleranceIsPutInOrder() throws IOException {
        Set<Attribute> attributes = EnumSet.of(Attribute.ELEMENT, Attribute.TIME);
        Collected found = new Collected();
        TimeOrder order = new TimeOrder(attributes, 1000, found);
        long[] times = {500, 200, 1500, 700, 1700, 1700, 800, 5000, 4100};
        EventBlock block = new EventBlock(attributes, times.length);
        block.resize(times.length);
        for (int i = 0; i < times.length; i++) {
            block.longs(Attribute.TIME)[i] = times[i];
            block.ints(Attribute.ELEMENT)[i] = i;
        }
        order.accept(block);
        order.finish();
        assertThat(found.column(Attribute.TIME)).isSorted().hasSize(times.length);
        assertThat(found.column(Attribute.ELEMENT))
                .containsExactly(1, 0, 3, 6, 2, 4, 5, 8, 7); // equal times keep their sequence
    }

    @Test
    void disorderBeyondTheToleranceIsRefusedWithItsPlace() throws IOException {
        Set<Attribute> attributes = EnumSet.of(Attribute.ELEMENT, Attribute.TIME);
        TimeOrder order = new TimeOrder(attributes, 1000, block -> {});
        EventBlock block = new EventBlock(attributes, 2);
        block.resize(2);
        block.longs(Attribute.TIME)[0] = 10_000;
        block.longs(Attribute.TIME)[1] = 12_000;
        order.accept(block);
        block.longs(Attribute.TIME)[0] = 5_000;
        assertThatThrownBy(() -> order.accept(block))
                .isInstanceOf(IOException.class)
                .hasMessageStartingWith(
                        "event 2: expected times in order within 1.0 ns, found 5000 ps after 12000 ps, 7.0 ns back");
    }

    @Test
    void refusesSettingsThatCannotBe() {
        assertThatThrownBy(() -> new Pairing(5, 600, 500.0, 4.0, Pairing.Crowds.DISCARD, 0))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("highest_keV: expected a number > 600, found 500")
                .hasMessageContaining("delay_ns: expected a number > 5, found 4");
    }
}
