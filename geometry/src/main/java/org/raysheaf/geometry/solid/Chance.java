package org.raysheaf.geometry.solid;

import java.util.function.DoubleSupplier;

/** Uniform points in the two shapes that the others are made of. */
final class Chance {
    private Chance() {}

    /** A point in a disk about the origin, into x and y. */
    static void disk(DoubleSupplier uniform, double radius, double[] point) {
        double r = radius * Math.sqrt(uniform.getAsDouble()); // area grows with r²
        double phi = 2 * Math.PI * uniform.getAsDouble();
        point[0] = r * Math.cos(phi);
        point[1] = r * Math.sin(phi);
    }

    /** A point in the unit ball about the origin. */
    static void unitBall(DoubleSupplier uniform, double[] point) {
        double r = Math.cbrt(uniform.getAsDouble()); // volume grows with r³
        double cosine = 2 * uniform.getAsDouble() - 1; // equal heights of a sphere have equal areas (Archimedes)
        double sine = Math.sqrt(1 - cosine * cosine);
        double phi = 2 * Math.PI * uniform.getAsDouble();
        point[0] = r * sine * Math.cos(phi);
        point[1] = r * sine * Math.sin(phi);
        point[2] = r * cosine;
    }
}
