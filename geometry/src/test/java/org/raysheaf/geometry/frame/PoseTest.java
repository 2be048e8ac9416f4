package org.raysheaf.geometry.frame;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.simple.RandomSource;
import org.junit.jupiter.api.Test;

class PoseTest {
    /** Rounding in a handful of products of numbers up to 50. */
    private static final double ROUNDING = 1e-12;

    private final UniformRandomProvider random = RandomSource.XO_SHI_RO_256_PP.create(3);

    private Vector3 vector() {
        return new Vector3(random.nextDouble(-50, 50), random.nextDouble(-50, 50), random.nextDouble(-50, 50));
    }

    private Pose pose() {
        return Pose.shift(vector()).after(Pose.rotation(vector(), random.nextDouble(-4, 4)));
    }

    private static void assertSame(Vector3 actual, Vector3 expected) {
        assertThat(actual.minus(expected).norm())
                .as("%s and %s", actual, expected)
                .isLessThan(50 * ROUNDING);
    }

    @Test
    void quarterTurnsFollowTheRightHand() {
        double quarter = Math.PI / 2;
        assertSame(Pose.rotation(Vector3.Z, quarter).apply(Vector3.X), Vector3.Y);
        assertSame(Pose.rotation(Vector3.X, quarter).apply(Vector3.Y), Vector3.Z);
        assertSame(Pose.rotation(Vector3.Y.times(7), quarter).apply(Vector3.Z), Vector3.X);
    }

    @Test
    void afterAppliesTheInnerPoseFirst() {
        for (int i = 0; i < 50; i++) {
            Pose outer = pose();
            Pose inner = pose();
            Vector3 p = vector();
            assertSame(outer.after(inner).apply(p), outer.apply(inner.apply(p)));
            assertSame(outer.after(inner).turn(p), outer.turn(inner.turn(p)));
        }
    }

    @Test
    void inverseUndoesThePose() {
        for (int i = 0; i < 50; i++) {
            Pose pose = pose();
            Vector3 p = vector();
            assertSame(pose.inverse().apply(pose.apply(p)), p);
            assertSame(pose.apply(pose.inverse().apply(p)), p);
        }
    }

    @Test
    void turningKeepsLengthsAndIgnoresTheOrigin() {
        for (int i = 0; i < 50; i++) {
            Pose pose = pose();
            Vector3 p = vector();
            assertThat(pose.turn(p).norm()).isCloseTo(p.norm(), within(50 * ROUNDING));
            assertSame(pose.turn(p), pose.apply(p).minus(pose.origin()));
        }
    }

    @Test
    void axesAreTheLocalAxesSeenFromTheWorld() {
        Pose pose = pose();
        assertSame(pose.u(), pose.turn(Vector3.X));
        assertSame(pose.v(), pose.turn(Vector3.Y));
        assertSame(pose.w(), pose.turn(Vector3.Z));
        assertSame(pose.u().cross(pose.v()), pose.w());
        assertThat(Pose.ofAxes(pose.origin(), pose.u(), pose.v(), pose.w())).isEqualTo(pose);
    }

    @Test
    void refusesAxesThatAreNoFrame() {
        assertThatThrownBy(() -> Pose.ofAxes(Vector3.ZERO, Vector3.X, Vector3.Y, Vector3.Z.times(-1)))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("right-handed");
        assertThatThrownBy(() -> Pose.ofAxes(Vector3.ZERO, Vector3.X.times(2), Vector3.Y, Vector3.Z.times(2)))
                .isInstanceOf(IllegalArgumentException.class);
        assertThatThrownBy(() -> Pose.rotation(Vector3.ZERO, 1)).hasMessageContaining("length > 0");
        assertThatThrownBy(() -> Pose.rotation(new Vector3(Double.NaN, 0, 1), 1))
                .isInstanceOf(IllegalArgumentException.class);
    }
}
