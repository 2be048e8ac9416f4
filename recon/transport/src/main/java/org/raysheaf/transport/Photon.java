package org.raysheaf.transport;

import org.apache.commons.rng.UniformRandomProvider;

/**
 * A photon on its way: a point, a unit direction, an energy, a time, and what has happened to it. Filled again for every decay; not safe
 * for use by several threads.
 */
final class Photon {
    /** Speed of light in vacuum: 0.299792458 mm/ps (exact, SI definition). */
    static final double SPEED_MM_PER_PS = 0.299792458;

    /** Comes from an annihilation in the phantom. */
    static final byte ANNIHILATION = 0;

    /** Comes from anything else. */
    static final byte OTHER = 1;

    double x;
    double y;
    double z;
    double dx;
    double dy;
    double dz;
    double energyKeV;

    /** Time since the decay (ps). */
    double agePs;

    /** Where it comes from. */
    byte source;

    int objectScatters;
    int detectorScatters;

    /** Starts a photon at a point; its direction is still to be given. */
    void emit(double[] point, double energy, byte from) {
        x = point[0];
        y = point[1];
        z = point[2];
        energyKeV = energy;
        agePs = 0;
        source = from;
        objectScatters = 0;
        detectorScatters = 0;
    }

    void copy(Photon other) {
        x = other.x;
        y = other.y;
        z = other.z;
        dx = other.dx;
        dy = other.dy;
        dz = other.dz;
        energyKeV = other.energyKeV;
        agePs = other.agePs;
        source = other.source;
        objectScatters = other.objectScatters;
        detectorScatters = other.detectorScatters;
    }

    void advance(double lengthMm) {
        x += lengthMm * dx;
        y += lengthMm * dy;
        z += lengthMm * dz;
        agePs += lengthMm / SPEED_MM_PER_PS;
    }

    void countScatter(int element) {
        if (element >= 0) {
            detectorScatters++;
        } else {
            objectScatters++;
        }
    }

    /**
     * A direction drawn from all alike: a point of the unit sphere from a point of the unit disk, without sines (Marsaglia 1972, Ann. Math.
     * Stat. 43:645).
     */
    void aimAnywhere(UniformRandomProvider random) {
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

    void aimOpposite(Photon other) {
        dx = -other.dx;
        dy = -other.dy;
        dz = -other.dz;
    }

    /** Turns the direction by an angle, given by its cosine, to any side alike. */
    void turn(double cosine, UniformRandomProvider random) {
        double a;
        double b;
        double square;
        do {
            a = 2 * random.nextDouble() - 1;
            b = 2 * random.nextDouble() - 1;
            square = a * a + b * b;
        } while (square >= 1 || square == 0);
        double sine = Math.sqrt(Math.max(0, (1 - cosine) * (1 + cosine)));
        double scale = sine / Math.sqrt(square);
        tilt(a * scale, b * scale, cosine);
    }

    /**
     * Gives the direction new components: u and v across it, w along it (u² + v² + w² = 1). The two axes across are those of Duff et al. 2017
     * (JCGT 6:1), which have no bad direction.
     */
    void tilt(double u, double v, double w) {
        double sign = Math.copySign(1, dz);
        double p = -1 / (sign + dz);
        double q = dx * dy * p;
        double ax = 1 + sign * dx * dx * p;
        double ay = sign * q;
        double az = -sign * dx;
        double bx = q;
        double by = sign + dy * dy * p;
        double bz = -dy;
        double nx = u * ax + v * bx + w * dx;
        double ny = u * ay + v * by + w * dy;
        double nz = u * az + v * bz + w * dz;
        double norm = 1 / Math.sqrt(nx * nx + ny * ny + nz * nz);
        dx = nx * norm;
        dy = ny * norm;
        dz = nz * norm;
    }
}
