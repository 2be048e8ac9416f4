package org.raysheaf.transport;

import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.sampling.distribution.ZigguratSampler;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.RayPath;

/**
 * Follows a photon along its straight line through the crystals to its first interaction. The optical depth of that
 * point (path over attenuation length, added up) is exponentially distributed with mean 1; gaps add nothing to it, so a
 * photon may slip between crystals, or through them, into the block behind. Holds the photon's fate until the next one;
 * not safe for use by several threads.
 */
final class CrystalWalk {
    private final DetectorSystem system;
    private final ZigguratSampler.Exponential exponential;
    private final RayPath path = new RayPath();
    private int element;
    private double distanceMm;
    private double depositedKeV;

    CrystalWalk(DetectorSystem system, UniformRandomProvider random) {
        this.system = system;
        this.exponential = ZigguratSampler.Exponential.of(random);
    }

    /**
     * Follows a photon.
     *
     * @param photon where it starts and where it goes
     * @return whether it interacts in a crystal
     */
    boolean follow(Photon photon) {
        system.trace(photon.x, photon.y, photon.z, photon.dx, photon.dy, photon.dz, path);
        if (path.size() == 0) {
            return false;
        }
        double depth = exponential.sample();
        for (int i = 0; i < path.size(); i++) {
            double attenuationLength = path.attenuationLength(i);
            double free = depth * attenuationLength; // 0 in a perfect absorber: stopped at its surface
            double length = path.leave(i) - path.enter(i);
            if (free < length) {
                element = path.element(i);
                distanceMm = path.enter(i) + free;
                depositedKeV = photon.energyKeV;
                return true;
            }
            depth -= length / attenuationLength;
        }
        return false;
    }

    /** The crystal of the interaction. */
    int element() {
        return element;
    }

    /** How far the photon flew to its interaction (mm). */
    double distanceMm() {
        return distanceMm;
    }

    /** What the photon left there (keV): all it had. */
    double depositedKeV() {
        return depositedKeV;
    }
}
