package org.raysheaf.transport;

import org.apache.commons.rng.UniformRandomProvider;

/**
 * A photon on its way: a point, a unit direction, an energy. Filled again for every decay; not safe for use by several
 * threads.
 */
final class Photon {
    /** Speed of light in vacuum: 0.299792458 mm/ps (exact, SI definition). */
    static final double SPEED_MM_PER_PS = 0.299792458;

    /** Energy of an annihilation photon, the electron's rest energy: 510.99895 keV (CODATA 2018). */
    static final double ANNIHILATION_KEV = 510.99895;

    double x;
    double y;
    double z;
    double dx;
    double dy;
    double dz;
    double energyKeV;

    /** Starts an annihilation photon at a point, in a direction drawn from all alike. */
    void emit(double[] point, UniformRandomProvider random) {
        x = point[0];
        y = point[1];
        z = point[2];
        energyKeV = ANNIHILATION_KEV;
        aimAnywhere(random);
    }

    /** Makes this the other photon of an annihilation: same place, opposite direction. */
    void emitOpposite(Photon other) {
        x = other.x;
        y = other.y;
        z = other.z;
        dx = -other.dx;
        dy = -other.dy;
        dz = -other.dz;
        energyKeV = ANNIHILATION_KEV;
    }

    /**
     * A point of the unit sphere from a point of the unit disk, without sines (Marsaglia 1972, Ann. Math. Stat.
     * 43:645).
     */
    private void aimAnywhere(UniformRandomProvider random) {
        double a;
        double b;
        double square;
        do {
            a = 2 * random.nextDouble() - 1;
            b = 2 * random.nextDouble() - 1;
            square = a * a + b * b;
        } while (square >= 1);
        double scale = 2 * Math.sqrt(1 - square);
        dx = a * scale;
        dy = b * scale;
        dz = 1 - 2 * square;
    }
}
