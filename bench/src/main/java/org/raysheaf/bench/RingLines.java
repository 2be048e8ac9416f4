package org.raysheaf.bench;

import java.io.BufferedOutputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.SplittableRandom;

/**
 * Lines of response of an ideal ring: decays uniform in a cylinder on the axis, isotropic, recorded where the line meets the ring if
 * both ends do. The cylinder fills a part of the ring's radius, six tenths unless said otherwise, and all of its length.
 */
final class RingLines {
    private static final double FILLED = 0.6;

    private final double radiusMm;
    private final double lengthMm;
    private final double filled;

    /** A ring of the given inner radius and axial length (mm). */
    RingLines(double radiusMm, double lengthMm) {
        this(radiusMm, lengthMm, FILLED);
    }

    /** The same, the cylinder filling some part of the ring's radius. */
    RingLines(double radiusMm, double lengthMm, double filled) {
        if (!(radiusMm > 0 && lengthMm > 0)) {
            throw new IllegalArgumentException(
                    "expected a ring of radius and length > 0 mm, found " + radiusMm + " and " + lengthMm);
        }
        this.radiusMm = radiusMm;
        this.lengthMm = lengthMm;
        this.filled = filled;
    }

    /** Writes lines, six little-endian floats each; the same seed gives the same file. */
    void write(Path file, int lines, long seed) throws IOException {
        SplittableRandom random = new SplittableRandom(seed);
        try (DataOutputStream out = new DataOutputStream(new BufferedOutputStream(Files.newOutputStream(file)))) {
            float[] line = new float[6];
            for (int made = 0; made < lines; made++) {
                line(random, line);
                put(line, out);
            }
        }
    }

    /** Draws a line: two end points, six numbers (mm). */
    void line(SplittableRandom random, float[] line) {
        while (!draw(random, line)) {
            // This one escapes at an open end of the ring.
        }
    }

    private static void put(float[] line, DataOutputStream out) throws IOException {
        for (float coordinate : line) {
            out.writeInt(Integer.reverseBytes(Float.floatToIntBits(coordinate)));
        }
    }

    private boolean draw(SplittableRandom random, float[] line) {
        double r = filled * radiusMm * Math.sqrt(random.nextDouble());
        double z = lengthMm * (random.nextDouble() - 0.5);
        double angle = 2 * Math.PI * random.nextDouble();
        double cosine = 2 * random.nextDouble() - 1;
        // The decay lies at (r, 0, z) before the whole is turned about the axis; the line leaves at this angle to the
        // radius.
        double along = r * Math.cos(angle);
        double half = Math.sqrt(radiusMm * radiusMm - r * r + along * along);
        double slope = cosine / Math.sqrt(1 - cosine * cosine);
        double turn = 2 * Math.PI * random.nextDouble();
        return end(-along - half, slope, r, z, angle, turn, line, 0)
                && end(half - along, slope, r, z, angle, turn, line, 3);
    }

    private boolean end(
            double reach, double slope, double r, double z, double angle, double turn, float[] line, int at) {
        double x = r + reach * Math.cos(angle);
        double y = reach * Math.sin(angle);
        line[at] = (float) (x * Math.cos(turn) - y * Math.sin(turn));
        line[at + 1] = (float) (x * Math.sin(turn) + y * Math.cos(turn));
        line[at + 2] = (float) (z + reach * slope);
        return Math.abs(z + reach * slope) < 0.5 * lengthMm;
    }
}
