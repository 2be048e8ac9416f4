package org.raysheaf.io.volume;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

class QuaternionTest {
    /** Rounding of double precision. */
    private static final double ROUNDING = 1e-14;

    @ParameterizedTest
    @CsvSource({"1,0,0,3.1", "0,1,0,3.1", "0,0,1,-3.1", "1,2,3,0.4", "1,0,0,3.141592653589793", "-1,2,-2,2.9", "0,0,1,0"
    })
    void givesTheRotationBack(double x, double y, double z, double angle) {
        Pose pose = Pose.rotation(new Vector3(x, y, z), angle);

        Quaternion q = Quaternion.of(pose);

        assertThat(q.a()).isNotNegative();
        assertThat(q.u().minus(pose.u()).norm()).isCloseTo(0, within(ROUNDING));
        assertThat(q.v().minus(pose.v()).norm()).isCloseTo(0, within(ROUNDING));
        assertThat(q.w().minus(pose.w()).norm()).isCloseTo(0, within(ROUNDING));
    }
}
