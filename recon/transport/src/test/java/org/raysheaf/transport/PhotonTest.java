package org.raysheaf.transport;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.apache.commons.rng.UniformRandomProvider;
import org.junit.jupiter.api.Test;

class PhotonTest {
    private static final int DRAWS = 300_000;

    @Test
    void directionsAreIsotropic() {
        UniformRandomProvider random = RandomStreams.stream(12, 0);
        Photon photon = new Photon();
        double[] sums = new double[9];
        double stray = 0;
        for (int i = 0; i < DRAWS; i++) {
            photon.aimAnywhere(random);
            double[] d = {photon.dx, photon.dy, photon.dz};
            stray = Math.max(stray, Math.abs(d[0] * d[0] + d[1] * d[1] + d[2] * d[2] - 1));
            for (int k = 0; k < 3; k++) {
                sums[k] += d[k];
                sums[3 + k] += d[k] * d[k];
                sums[6 + k] += d[k] * d[(k + 1) % 3];
            }
        }
        assertThat(stray).isLessThan(1e-12);
        // E[d] = 0 with variance 1/3, E[d²] = 1/3 with variance 4/45, E[d e] = 0 with variance 1/15
        for (int k = 0; k < 3; k++) {
            assertThat(sums[k] / DRAWS).isCloseTo(0, within(3.5 * Math.sqrt(1.0 / 3 / DRAWS)));
            assertThat(sums[3 + k] / DRAWS).isCloseTo(1.0 / 3, within(3.5 * Math.sqrt(4.0 / 45 / DRAWS)));
            assertThat(sums[6 + k] / DRAWS).isCloseTo(0, within(3.5 * Math.sqrt(1.0 / 15 / DRAWS)));
        }
    }

    @Test
    void turningKeepsTheAngleAndForgetsTheSide() {
        UniformRandomProvider random = RandomStreams.stream(13, 0);
        Photon photon = new Photon();
        double cosine = 0.3;
        double[] sums = new double[2];
        double stray = 0;
        for (int i = 0; i < DRAWS; i++) {
            photon.dx = 0.6;
            photon.dy = 0;
            photon.dz = i % 2 == 0 ? -0.8 : 0.8; // both branches of the axes across
            double ax = photon.dx;
            double az = photon.dz;
            photon.turn(cosine, random);
            stray = Math.max(stray, Math.abs(photon.dx * ax + photon.dz * az - cosine));
            sums[0] += photon.dy;
            sums[1] += photon.dy * photon.dy;
        }
        double sine2 = 1 - cosine * cosine;
        assertThat(stray).isLessThan(1e-12);
        // y is across the first direction: mean 0, mean square sin²/2 with variance sin⁴/8
        assertThat(sums[0] / DRAWS).isCloseTo(0, within(3.5 * Math.sqrt(sine2 / 2 / DRAWS)));
        assertThat(sums[1] / DRAWS).isCloseTo(sine2 / 2, within(3.5 * sine2 * Math.sqrt(1.0 / 8 / DRAWS)));
    }
}
