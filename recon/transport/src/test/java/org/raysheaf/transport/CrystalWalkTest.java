package org.raysheaf.transport;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.apache.commons.rng.UniformRandomProvider;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.frame.Vector3;

class CrystalWalkTest {
    private final UniformRandomProvider random = RandomStreams.stream(14, 0);

    private static Photon photon(double x, double y, double z, Vector3 direction) {
        Vector3 unit = direction.unit();
        Photon photon = new Photon();
        photon.x = x;
        photon.y = y;
        photon.z = z;
        photon.dx = unit.x();
        photon.dy = unit.y();
        photon.dz = unit.z();
        photon.energyKeV = Photon.ANNIHILATION_KEV;
        return photon;
    }

    @Test
    void depthsFollowTheExponentialLaw() {
        double length = 12;
        double thickness = 20;
        CrystalWalk walk = new CrystalWalk(Trials.slabs(100, thickness, length), random);
        Photon slanted = photon(0, 0, 0, new Vector3(1, 2, 0));
        double toFront = 50 * Math.sqrt(5) / 2;
        double chord = thickness * Math.sqrt(5) / 2;
        int photons = 200_000;
        int stopped = 0;
        int early = 0;
        double sum = 0;
        for (int i = 0; i < photons; i++) {
            if (walk.follow(slanted)) {
                double depth = walk.distanceMm() - toFront;
                assertThat(depth).isBetween(0.0, chord);
                stopped++;
                sum += depth;
                early += depth < length ? 1 : 0;
            }
        }
        double through = Math.exp(-chord / length);
        double error = Math.sqrt(through * (1 - through) / photons);
        assertThat((double) stopped / photons).isCloseTo(1 - through, within(3 * error));
        assertThat((double) early / photons).isCloseTo(1 - Math.exp(-1), within(3 * Math.sqrt(0.2325 / photons)));
        // mean of an exponential cut off at the far side; its spread is below the attenuation length
        double mean = length - chord * through / (1 - through);
        assertThat(sum / stopped).isCloseTo(mean, within(3 * length / Math.sqrt(stopped)));
    }

    @Test
    void perfectAbsorberStopsEveryPhotonAtItsFirstSurface() {
        CrystalWalk walk = new CrystalWalk(Trials.slabs(100, 20, 0), random);
        assertThat(walk.follow(photon(0, 10, 0, Vector3.Y))).isTrue();
        assertThat(walk.distanceMm()).isCloseTo(40, within(1e-12));
        assertThat(walk.element()).isZero();
        assertThat(walk.depositedKeV()).isEqualTo(Photon.ANNIHILATION_KEV);
        assertThat(walk.follow(photon(0, 10, 0, Vector3.Z))).isFalse();
    }

    @Test
    void gapsStopNothingEvenBetweenPerfectAbsorbers() {
        DetectorSystem system = Trials.facing(
                new CrystalBlock("two", 2, 1, 1, new Vector3(4, 4, 4), new Vector3(3, 4, 4), "crystal"), 100, 0);
        CrystalWalk walk = new CrystalWalk(system, random);
        assertThat(walk.follow(photon(0.4, 0, 0, Vector3.Y))).isFalse();
        assertThat(walk.follow(photon(0.6, 0, 0, Vector3.Y))).isTrue();
        int beyondTheGap = walk.element();
        assertThat(walk.follow(photon(-0.6, 0, 0, Vector3.Y))).isTrue();
        assertThat(walk.element()).isNotEqualTo(beyondTheGap).isIn(0, 1);
        // into the gap at a slant: the far crystal's side is hit below the front
        assertThat(walk.follow(photon(0, 50, 0, new Vector3(1, 1, 0)))).isTrue();
        assertThat(walk.element()).isEqualTo(beyondTheGap);
        assertThat(walk.distanceMm()).isCloseTo(0.5 * Math.sqrt(2), within(1e-12));
    }

    @Test
    void photonsThatPassOneLayerMayStopInTheNext() {
        double length = 10;
        DetectorSystem system = Trials.facing(
                new CrystalBlock("layers", 1, 1, 2, new Vector3(50, 50, 9), new Vector3(50, 50, 5), "crystal"),
                100,
                length);
        CrystalWalk walk = new CrystalWalk(system, random);
        int photons = 200_000;
        int[] stopped = new int[system.elements()];
        for (int i = 0; i < photons; i++) {
            if (walk.follow(photon(0, 0, 0, Vector3.Y))) {
                stopped[walk.element()]++;
            }
        }
        double first = 1 - Math.exp(-0.5);
        double second = Math.exp(-0.5) * first; // 4 mm of gap count for nothing
        assertThat((double) stopped[0] / photons).isCloseTo(first, within(3 * Math.sqrt(0.24 / photons)));
        assertThat((double) stopped[1] / photons).isCloseTo(second, within(3 * Math.sqrt(0.19 / photons)));
    }
}
