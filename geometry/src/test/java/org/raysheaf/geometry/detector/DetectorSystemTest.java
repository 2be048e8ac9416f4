package org.raysheaf.geometry.detector;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.solid.Box;
import org.raysheaf.geometry.solid.Placed;

class DetectorSystemTest {
    private static final DetectorSystem HERON = Systems.heron12(12.2, 13);

    /** Two layers, unequal pitches, free poses: nothing that symmetry could hide. */
    private static DetectorSystem crooked() {
        CrystalBlock layered = new CrystalBlock(
                "layered", 3, 4, 2, new Vector3(2.1, 1.7, 5.5), new Vector3(1.9, 1.5, 5), "scintillator");
        return Systems.system(
                new FieldOfView(5, 10),
                1,
                9,
                List.of(layered),
                List.of(
                        new Placement.Single(
                                "layered", new Vector3(14, 3, 1), new Vector3(-1, -0.2, 0.1), new Vector3(0, 0.5, 1)),
                        new Placement.Single(
                                "layered", new Vector3(-15, 2, -3), new Vector3(1, 0, 0.3), new Vector3(0.3, 0, -1)),
                        new Placement.Panel(
                                "layered",
                                2,
                                1,
                                new Vector3(7, 0, 0),
                                new Vector3(0, -16, 0),
                                new Vector3(0, 1, 0),
                                Vector3.Z)));
    }

    @Test
    void numbersElementsByBlockThenLayerRowColumn() {
        assertThat(HERON.elements()).isEqualTo(3 * 12 * 121);
        // Ring 1 (z = 0), block 3 (at 90 degrees), row 0, column 0: on the ring's middle plane minus half the block,
        // and on +x, as u is −x there.
        Vector3 corner = HERON.centre((12 + 3) * 121);
        assertThat(corner.x()).isCloseTo(5 * 1.85, within(1e-12));
        assertThat(corner.y()).isCloseTo(42 + 6.5, within(1e-12));
        assertThat(corner.z()).isCloseTo(-5 * 1.85, within(1e-12));
        Vector3 step = HERON.centre((12 + 3) * 121 + 11 + 2).minus(corner);
        assertThat(step.minus(new Vector3(-2 * 1.85, 0, 1.85)).norm()).isLessThan(1e-12);
    }

    @Test
    void findsTheElementAtItsCentreAndNoneInAGap() {
        DetectorSystem system = crooked();
        for (int e = 0; e < system.elements(); e++) {
            Vector3 centre = system.centre(e);
            assertThat(system.elementAt(centre)).isEqualTo(e);
            Pose pose = system.blockOf(e).pose();
            assertThat(system.elementAt(centre.plus(pose.u().times(0.94)))).isEqualTo(e);
            assertThat(system.elementAt(centre.plus(pose.u().times(1.05)))).isEqualTo(-1);
        }
        assertThat(system.elementAt(Vector3.ZERO)).isEqualTo(-1);
    }

    /** The twin clips the ray against the box of every crystal on its own. */
    @Test
    void tracesTheSameCrystalsAsBoxesTakenOneByOne() {
        for (DetectorSystem system : List.of(crooked(), HERON)) {
            List<Placed> crystals = new ArrayList<>();
            for (int e = 0; e < system.elements(); e++) {
                Pose pose = system.blockOf(e).pose();
                crystals.add(new Placed(
                        new Box(system.size(e)), Pose.ofAxes(system.centre(e), pose.u(), pose.v(), pose.w())));
            }
            Random random = new Random(7);
            RayPath path = new RayPath();
            for (int i = 0; i < 60; i++) {
                Vector3 target = system.centre(random.nextInt(system.elements()))
                        .plus(new Vector3(random.nextDouble(), random.nextDouble(), random.nextDouble()));
                Vector3 origin =
                        new Vector3(random.nextGaussian(), random.nextGaussian(), random.nextGaussian()).times(4);
                compare(system, crystals, origin, target.minus(origin).unit(), path);
            }
            // Along a lattice axis, where a component of the direction is 0.
            Vector3 centre = system.centre(0);
            Vector3 w = system.blockOf(0).pose().w();
            compare(system, crystals, centre.minus(w.times(30)), w, path);
        }
    }

    private static void compare(DetectorSystem system, List<Placed> crystals, Vector3 o, Vector3 d, RayPath path) {
        system.trace(o.x(), o.y(), o.z(), d.x(), d.y(), d.z(), path);
        double[] traced = new double[2 * system.elements()];
        double last = 0;
        for (int i = 0; i < path.size(); i++) {
            assertThat(path.enter(i)).isGreaterThanOrEqualTo(last - 1e-9);
            last = path.enter(i);
            traced[2 * path.element(i)] = path.enter(i);
            traced[2 * path.element(i) + 1] = path.leave(i);
        }
        double[] span = new double[2];
        for (int e = 0; e < system.elements(); e++) {
            boolean hit = crystals.get(e).clip(o.x(), o.y(), o.z(), d.x(), d.y(), d.z(), span) && span[1] > 0;
            double length = hit ? span[1] - Math.max(0, span[0]) : 0;
            assertThat(traced[2 * e + 1] - traced[2 * e]).isCloseTo(length, within(1e-9));
        }
    }

    @Test
    void pairsBlocksByTheirDistanceRoundTheRing() {
        int block = 121;
        assertThat(HERON.admits(0, 1)).isFalse();
        assertThat(HERON.admits(0, 2 * block)).isFalse();
        assertThat(HERON.admits(0, 3 * block)).isTrue();
        assertThat(HERON.admits(0, 10 * block)).isFalse();
        assertThat(HERON.admits(0, (12 + 1) * block)).isFalse();
        assertThat(HERON.admits(0, (12 + 6) * block)).isTrue();
        // Blocks of one panel never pair, blocks of different placements always do.
        DetectorSystem system = crooked();
        assertThat(system.admits(2 * 24, 3 * 24)).isFalse();
        assertThat(system.admits(0, 3 * 24)).isTrue();
    }
}
