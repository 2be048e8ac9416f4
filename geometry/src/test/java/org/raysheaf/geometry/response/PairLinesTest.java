package org.raysheaf.geometry.response;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;
import static org.assertj.core.api.Assertions.withinPercentage;

import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.detector.BlockKind;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.Placement;
import org.raysheaf.geometry.detector.Systems;
import org.raysheaf.geometry.frame.Vector3;

class PairLinesTest {
    /**
     * Form factors of unit squares, from reference-values G3 (Howell, A Catalog of Radiation Heat Transfer Configuration Factors): étendue = π
     * F area. Each is cut until it changes by less than 0.2 %, hence the tolerance of 0.3 %.
     */
    @Test
    void etendueOfCloseFacesTendsToTheClosedForms() {
        List<BlockKind> plates = List.of(Systems.plate("square", 1, 1, 1, 1), Systems.plate("strip", 1, 1, 0.5, 2));
        assertThat(etendue(plates, "square", 0.4)).isCloseTo(Math.PI * 0.1998248957, within(0.003 * 0.63));
        assertThat(etendue(plates, "strip", 0.2)).isCloseTo(Math.PI * 0.1652692190, within(0.003 * 0.52));
    }

    private static double etendue(List<BlockKind> plates, String plate, double viewRadius) {
        DetectorSystem system = Systems.system(
                new FieldOfView(viewRadius, 1),
                1,
                0,
                plates,
                List.of(
                        new Placement.Single(plate, new Vector3(0.5, 0, 0), new Vector3(-1, 0, 0), Vector3.Z),
                        new Placement.Single(plate, new Vector3(-0.5, 0, 0), new Vector3(1, 0, 0), Vector3.Z)));
        LineOfResponse line = new LineOfResponse();
        assertThat(new PairLines(ElementResponse.ofFaces(system)).line(0, 1, line))
                .isTrue();
        return line.etendueMm2Sr();
    }

    /**
     * Every chord of a closed convex surface is counted once: Σ G · distance over unordered pairs of faces is 2π V (design note on the étendue of
     * a pair; Cauchy's mean chord 4V/S gives the same). Pairs in one plane carry none.
     */
    @Test
    void chordsOfAClosedBoxFillItsVolume() {
        double[] edges = {30, 40, 50};
        Vector3[] axes = {Vector3.X, Vector3.Y, Vector3.Z};
        List<BlockKind> plates = new ArrayList<>();
        List<Placement> sides = new ArrayList<>();
        for (int i = 0; i < 3; i++) {
            int rows = (i + 1) % 3;
            int columns = (i + 2) % 3;
            String name = "side" + i;
            plates.add(Systems.plate(name, 8, 8, edges[columns], edges[rows]));
            for (int sign = -1; sign <= 1; sign += 2) {
                sides.add(new Placement.Single(
                        name, axes[i].times(0.5 * sign * edges[i]), axes[i].times(-sign), axes[rows]));
            }
        }
        // The field of view fits inside; lines that miss it are wanted here too, so pairs are summed whatever line()
        // says.
        DetectorSystem system = Systems.system(new FieldOfView(14, 49), 1, 0, plates, sides);
        PairLines lines = new PairLines(ElementResponse.ofFaces(system));
        LineOfResponse line = new LineOfResponse();
        double sum = 0;
        for (int a = 0; a < system.elements(); a++) {
            for (int b = 0; b < a; b++) {
                if (system.admits(a, b)) {
                    lines.lineAnywhere(a, b, line);
                    sum += line.etendueMm2Sr() * line.lengthMm();
                }
            }
        }
        assertThat(sum / (2 * Math.PI * 30 * 40 * 50)).isCloseTo(1, within(0.01));
    }

    /**
     * Fraction of pairs from a point on the axis of a cylinder R 80, L 130 that hit it on both sides: 0.630593 at the centre, 0.400819 at z = 30
     * (reference-values G4). One line per pair of 2.8 mm tiles samples a point badly, so both the lines and the closed form are averaged over a
     * Gaussian blob of 4.7 mm FWHM (that the blob is off the axis changes its coverage by about 0.1 %). All staves are alike: lines from one stave stand for all.
     */
    @Test
    void ringCoverageMatchesTheCylinder() {
        assertThat(coverage(0)).isCloseTo(0.630593, within(1e-6));
        assertThat(coverage(30)).isCloseTo(0.400819, within(1e-6));
        int around = 180;
        int rows = 46;
        double width = 2 * 80 * Math.tan(Math.PI / around);
        DetectorSystem system = Systems.system(
                new FieldOfView(40, 130),
                1,
                0,
                List.of(Systems.plate("stave", 1, rows, width, 130)),
                List.of(new Placement.Rings("stave", around, 80, 0, List.of(0.0))));
        PairLines lines = new PairLines(ElementResponse.ofFaces(system));
        double[] z = {0, 30};
        double[] rate = new double[2];
        LineOfResponse line = new LineOfResponse();
        for (int a = 0; a < rows; a++) {
            for (int b = rows; b < system.elements(); b++) {
                if (system.admits(a, b) && lines.line(a, b, line)) {
                    for (int i = 0; i < 2; i++) {
                        rate[i] += 0.5 * around * line.etendueMm2Sr() / (2 * Math.PI) * throughBlob(line, z[i]);
                    }
                }
            }
        }
        assertThat(rate[0]).isCloseTo(blobCoverage(0), withinPercentage(0.5));
        assertThat(rate[1]).isCloseTo(blobCoverage(30), withinPercentage(0.5));
    }

    private static final double SIGMA = 2;

    /** Reference-values G4, closed form for a point on the axis. */
    private static double coverage(double z) {
        double left = 65 - Math.abs(z);
        return left / Math.sqrt(left * left + 80 * 80);
    }

    private static double blobCoverage(double z) {
        double sum = 0;
        double norm = 0;
        for (double dz = -4 * SIGMA + 0.005; dz < 4 * SIGMA; dz += 0.01) {
            double weight = Math.exp(-0.5 * dz * dz / (SIGMA * SIGMA));
            sum += weight * coverage(z + dz);
            norm += weight;
        }
        return sum / norm;
    }

    /** Integral along the line of a Gaussian blob on the axis with unit content (1/mm²). */
    private static double throughBlob(LineOfResponse line, double z) {
        Vector3 a = new Vector3(line.a(0), line.a(1), line.a(2) - z);
        Vector3 b = new Vector3(line.b(0), line.b(1), line.b(2) - z);
        double off = a.cross(b.minus(a).unit()).norm();
        return Math.exp(-0.5 * off * off / (SIGMA * SIGMA)) / (2 * Math.PI * SIGMA * SIGMA);
    }

    @Test
    void exchangingTheElementsExchangesTheEnds() {
        DetectorSystem system = Systems.heron12(12, 13);
        PairLines lines = new PairLines(ElementResponse.ofFaces(system));
        LineOfResponse one = new LineOfResponse();
        LineOfResponse other = new LineOfResponse();
        assertThat(lines.line(17, 2000, one)).isEqualTo(lines.line(2000, 17, other));
        assertThat(other.etendueMm2Sr()).isEqualTo(one.etendueMm2Sr());
        for (int axis = 0; axis < 3; axis++) {
            assertThat(other.a(axis)).isEqualTo(one.b(axis));
            assertThat(other.b(axis)).isEqualTo(one.a(axis));
        }
    }
}
