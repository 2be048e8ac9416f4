package org.raysheaf.geometry.motion;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.motion.MotionDescription.Between;
import org.raysheaf.geometry.motion.MotionDescription.Mover;
import org.raysheaf.geometry.motion.MotionDescription.TimedPose;
import org.raysheaf.geometry.settings.InvalidSettingsException;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafCatalogue;
import org.raysheaf.geometry.sheaf.SheafMaker;

final class MotionTest {
    private static final long S = 1_000_000_000_000L;

    private static TimedPose pose(double timeS, double turnZDeg, double shiftXMm) {
        return new TimedPose(timeS, new Vector3(0, 0, turnZDeg), new Vector3(shiftXMm, 0, 0));
    }

    private static Motion motion(Mover of, Between between, TimedPose... poses) {
        return Motion.of(new MotionDescription(of, between, List.of(poses)), 50);
    }

    private static Vector3 at(Motion motion, double timeS, Vector3 point) {
        return motion.pose(motion.stayAt((long) (timeS * S))).apply(point);
    }

    private static void assertNear(Vector3 found, double x, double y, double mm) {
        assertThat(found.minus(new Vector3(x, y, 0)).norm()).isLessThanOrEqualTo(mm);
    }

    @Test
    void heldPosesHoldUntilTheNext() {
        Motion motion = motion(Mover.DETECTOR, Between.HOLD, pose(0, 0, 0), pose(2, 90, 0), pose(4, 90, 7));
        for (double t : new double[] {-1, 0, 1.99}) {
            assertNear(at(motion, t, Vector3.X), 1, 0, 1e-12);
        }
        assertNear(at(motion, 2, Vector3.X), 0, 1, 1e-12);
        assertNear(at(motion, 3.999, Vector3.X), 0, 1, 1e-12);
        // First turned, then shifted.
        assertNear(at(motion, 4, Vector3.X), 7, 1, 1e-12);
        assertNear(at(motion, 1e5, Vector3.X), 7, 1, 1e-12);
    }

    /** A full turn: every point within reach is where it should be, within the tolerance. */
    @Test
    void evenMotionGoesRound() {
        Motion motion = motion(Mover.DETECTOR, Between.EVEN, pose(0, 0, 0), pose(10, 360, 5));
        for (double t = 0; t <= 10; t += 0.0917) {
            double angle = 2 * Math.PI * t / 10;
            assertNear(
                    at(motion, t, new Vector3(50, 0, 0)),
                    50 * Math.cos(angle) + 0.5 * t,
                    50 * Math.sin(angle),
                    Motion.TOLERANCE_MM + 1e-9);
        }
    }

    /** A subject that moves one way is a detector that moves the other way. */
    @Test
    void movingSubjectsMoveRaysBack() {
        Motion motion = motion(Mover.SUBJECT, Between.HOLD, pose(0, 90, 7));
        // The subject's point (0, 1) was carried to x = 7 - 1, y = 0; a ray there belongs to (0, 1).
        assertNear(at(motion, 1, new Vector3(6, 0, 0)), 0, 1, 1e-12);
    }

    @Test
    void posesOfASpanSumToItsTime() {
        Motion few = motion(Mover.DETECTOR, Between.HOLD, pose(0, 0, 0), pose(2, 90, 0), pose(4, 90, 7));
        List<Motion.Weighted> all = few.over(1, 11, 64);
        assertThat(all).extracting(Motion.Weighted::share).containsExactly(0.1, 0.2, 0.7);
        Motion many = motion(Mover.DETECTOR, Between.EVEN, pose(0, 0, 0), pose(10, 360, 0));
        List<Motion.Weighted> some = many.over(0, 10, 36);
        assertThat(some).hasSize(36);
        assertThat(some.stream().mapToDouble(Motion.Weighted::share).sum()).isCloseTo(1, within(1e-12));
        assertNear(some.get(0).pose().apply(Vector3.X), Math.cos(Math.toRadians(5)), Math.sin(Math.toRadians(5)), 1e-3);
    }

    @Test
    void raysOfEventsAndCatalogueGoAlong() {
        Motion motion = motion(Mover.DETECTOR, Between.HOLD, pose(0, 0, 0), pose(2, 90, 0), pose(4, 0, 7));
        EventBlock events = new EventBlock(EnumSet.of(Attribute.TIME, Attribute.ELEMENT_A), 5);
        long[] times = {0, S, 2 * S, 3 * S, 5 * S};
        System.arraycopy(times, 0, events.longs(Attribute.TIME), 0, 5);
        int[] usable = {1, 0, 1, 1, 1}; // the second is set aside
        System.arraycopy(usable, 0, events.ints(Attribute.ELEMENT_A), 0, 5);
        events.resize(5);
        SheafBundle bundle = new SheafBundle(1, 5);
        EventTally tally = new EventTally();
        new MovingSheaves(new AlongX(), motion).make(events, bundle, tally);
        assertThat(bundle.size()).isEqualTo(4);
        assertThat(tally.used()).isEqualTo(4);
        assertThat(tally.setAsideFor(EventTally.Reason.BLOCKS_TOO_CLOSE)).isEqualTo(1);
        assertThat(ends(bundle))
                .isDeepEqualTo(new double[][] {{-9, 0, 9, 0}, {0, -9, 0, 9}, {0, -9, 0, 9}, {-2, 0, 16, 0}});

        SheafBundle parts = new SheafBundle(1, 4);
        MovingCatalogue catalogue = new MovingCatalogue(new AlongX(), motion.over(0, 10, 8));
        assertThat(catalogue.parts()).isEqualTo(3);
        for (int part = 0; part < 3; part++) {
            catalogue.fill(part, parts);
        }
        assertThat(ends(parts)).isDeepEqualTo(new double[][] {{-9, 0, 9, 0}, {0, -9, 0, 9}, {-2, 0, 16, 0}});
        assertThat(parts.weights()).startsWith(0.2f * 3, 0.2f * 3, 0.6f * 3);
    }

    private static double[][] ends(SheafBundle bundle) {
        double[][] ends = new double[bundle.size()][];
        for (int i = 0; i < ends.length; i++) {
            float[] r = bundle.rays();
            ends[i] = new double[] {round(r[6 * i]), round(r[6 * i + 1]), round(r[6 * i + 3]), round(r[6 * i + 4])};
        }
        return ends;
    }

    private static double round(float value) {
        return Math.rint(value * 1000) / 1000 + 0.0; // + 0.0 makes −0 to 0
    }

    @Test
    void refusesWhatCannotBe() {
        assertThatThrownBy(() -> motion(Mover.DETECTOR, Between.HOLD, pose(1, 0, 0), pose(1, 0, 0)))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("expected a time after that of the pose before, 1.0, found 1.0");
        assertThatThrownBy(() -> motion(Mover.DETECTOR, Between.HOLD))
                .hasMessageContaining("expected at least one pose");
        assertThatThrownBy(() -> motion(Mover.DETECTOR, Between.EVEN, pose(0, 0, 0), pose(1, 1e9, 0)))
                .hasMessageContaining("takes more than 1000000 steps");
    }

    /** Every event, and the only entry of the catalogue, is the ray along x. */
    private static final class AlongX implements SheafMaker, SheafCatalogue {
        @Override
        public Set<Attribute> attributes() {
            return EnumSet.of(Attribute.ELEMENT_A);
        }

        @Override
        public int raysPerSheaf() {
            return 1;
        }

        @Override
        public void make(EventBlock events, SheafBundle out, EventTally tally) {
            for (int i = 0; i < events.size(); i++) {
                if (events.ints(Attribute.ELEMENT_A)[i] == 1) {
                    out.set(out.append(), -9, 0, 0, 9, 0, 0, 1);
                    tally.use();
                } else {
                    tally.setAside(EventTally.Reason.BLOCKS_TOO_CLOSE);
                }
            }
        }

        @Override
        public int parts() {
            return 1;
        }

        @Override
        public int capacity(int part) {
            return 1;
        }

        @Override
        public void fill(int part, SheafBundle out) {
            out.set(out.append(), -9, 0, 0, 9, 0, 0, 3);
        }
    }
}
