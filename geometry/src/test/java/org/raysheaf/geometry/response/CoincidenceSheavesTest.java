package org.raysheaf.geometry.response;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import java.util.concurrent.ForkJoinPool;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.MonolithicBlock;
import org.raysheaf.geometry.detector.PairRule;
import org.raysheaf.geometry.detector.Placement;
import org.raysheaf.geometry.detector.Readout;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.detector.Systems;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.sheaf.SheafBundle;

class CoincidenceSheavesTest {
    private static final DetectorSystem HERON = Systems.heron12(12.2, 13);
    private static final CoincidenceSheaves SHEAVES = new CoincidenceSheaves(ElementResponse.ofFaces(HERON));

    private static EventBlock events(Set<Attribute> attributes, int... elements) {
        EventBlock block = new EventBlock(attributes, elements.length / 2);
        for (int i = 0; i < elements.length / 2; i++) {
            block.ints(Attribute.ELEMENT_A)[i] = elements[2 * i];
            block.ints(Attribute.ELEMENT_B)[i] = elements[2 * i + 1];
        }
        block.resize(elements.length / 2);
        return block;
    }

    @Test
    void accountsForEveryEvent() {
        Set<Attribute> columns = EnumSet.of(Attribute.ELEMENT_A, Attribute.ELEMENT_B, Attribute.DELAYED);
        int opposite = 6 * 121 + 60;
        EventBlock block = events(columns, 60, opposite, 60, 121, 60, opposite, 0, 3 * 121 + 120);
        block.bytes(Attribute.DELAYED)[2] = 1;
        SheafBundle out = new SheafBundle(1, 4);
        EventTally tally = new EventTally();
        SHEAVES.make(block, out, tally);
        assertThat(tally.read()).isEqualTo(4);
        assertThat(tally.setAsideFor(EventTally.Reason.BLOCKS_TOO_CLOSE)).isEqualTo(1);
        assertThat(tally.setAsideFor(EventTally.Reason.DELAYED)).isEqualTo(1);
        assertThat(tally.used() + tally.setAsideFor(EventTally.Reason.OUTSIDE_FIELD_OF_VIEW))
                .isEqualTo(2);
        assertThat(out.size()).isEqualTo((int) tally.used());
        assertThat(out.weights()[0]).isEqualTo(1);
        // Block 0 looks along x: crystal 60 is its middle one, and the face is at x = 42.
        assertThat(out.rays()[0]).isCloseTo(42, within(1e-5f));
        assertThat(out.rays()[3]).isCloseTo(-42, within(1e-5f));
    }

    @Test
    void raysEndAtMeasuredPointsInBlocksOfOnePieceOnly() {
        MonolithicBlock slab = new MonolithicBlock(
                "slab", new Vector3(30, 30, 12), new Vector3(10, 10, 6), "lyso", new Vector3(1, 1, 1), Readout.IDEAL);
        CrystalBlock tile = new CrystalBlock("tile", 3, 3, 1, new Vector3(10, 10, 12), new Vector3(9, 9, 12), "lyso");
        DetectorSystem system = new DetectorSystem(new SystemDescription(
                "mixed",
                new FieldOfView(20, 20),
                new PairRule(1),
                List.of(),
                List.of(slab, tile),
                List.of(
                        new Placement.Single("slab", new Vector3(30, 0, 0), new Vector3(-1, 0, 0), Vector3.Z),
                        new Placement.Single("tile", new Vector3(-30, 0, 0), Vector3.X, Vector3.Z))));
        CoincidenceSheaves sheaves =
                new CoincidenceSheaves(ElementResponse.tabulate(system, ForkJoinPool.commonPool(), Progress.SILENT));
        Set<Attribute> columns = EnumSet.of(
                Attribute.ELEMENT_A,
                Attribute.ELEMENT_B,
                Attribute.POSITION_A_X,
                Attribute.POSITION_A_Y,
                Attribute.POSITION_A_Z,
                Attribute.POSITION_B_X,
                Attribute.POSITION_B_Y,
                Attribute.POSITION_B_Z);
        EventBlock block = events(columns, 4, 18 + 4); // the middle cell in front, the middle crystal
        block.floats(Attribute.POSITION_A_X)[0] = 34;
        block.floats(Attribute.POSITION_A_Y)[0] = 1;
        block.floats(Attribute.POSITION_A_Z)[0] = -2;
        SheafBundle out = new SheafBundle(1, 1);
        sheaves.make(block, out, new EventTally());
        assertThat(out.rays()[0]).isEqualTo(34);
        assertThat(out.rays()[1]).isEqualTo(1);
        assertThat(out.rays()[2]).isEqualTo(-2);
        // the crystal's end is its mean interaction point, whatever the columns say
        assertThat(out.rays()[3]).isBetween(-42f, -30f);
    }

    @Test
    void refusesElementsThatTheSystemDoesNotHave() {
        EventBlock block = events(EnumSet.of(Attribute.ELEMENT_A, Attribute.ELEMENT_B), 0, 4356);
        assertThatThrownBy(() -> SHEAVES.make(block, new SheafBundle(1, 1), new EventTally()))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessage("expected an element from 0 to 4355, found 4356");
    }

    /** A pair is in the catalogue exactly if its event is used, and both have the same ray. */
    @Test
    void catalogueAndEventsAgree() {
        // The first part is the first pair of blocks that may pair: 3 and 0.
        assertThat(SHEAVES.parts()).isEqualTo(36 * 21 / 2);
        SheafBundle catalogue = new SheafBundle(1, SHEAVES.capacity(0));
        SHEAVES.fill(0, catalogue);
        int[] elements = pairsOf(3, 0);
        EventTally tally = new EventTally();
        SheafBundle made = new SheafBundle(1, 121 * 121);
        SHEAVES.make(events(EnumSet.of(Attribute.ELEMENT_A, Attribute.ELEMENT_B), elements), made, tally);
        assertThat(made.size()).isEqualTo(catalogue.size());
        assertThat(made.rays()).isEqualTo(catalogue.rays());
    }

    private static int[] pairsOf(int blockA, int blockB) {
        int[] elements = new int[2 * 121 * 121];
        for (int i = 0; i < 121 * 121; i++) {
            elements[2 * i] = blockA * 121 + i / 121;
            elements[2 * i + 1] = blockB * 121 + i % 121;
        }
        return elements;
    }
}
