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
            photon.emit(new double[3], random);
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
    void theOtherPhotonLeavesTheSamePointTheOtherWay() {
        Photon a = new Photon();
        Photon b = new Photon();
        a.emit(new double[] {1, 2, 3}, RandomStreams.stream(13, 0));
        b.emitOpposite(a);
        assertThat(new double[] {b.x, b.y, b.z}).containsExactly(1, 2, 3);
        assertThat(new double[] {b.dx, b.dy, b.dz}).containsExactly(-a.dx, -a.dy, -a.dz);
        assertThat(b.energyKeV).isEqualTo(a.energyKeV);
    }
}
