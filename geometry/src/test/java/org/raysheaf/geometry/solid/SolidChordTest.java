package org.raysheaf.geometry.solid;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.simple.RandomSource;
import org.assertj.core.data.Offset;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.InvalidSettingsException;

class SolidChordTest {
    /** Closed forms, from origins up to 1e3 mm away: rounding only. */
    private static final Offset<Double> EXACT = within(1e-10);

    static List<Shape> solids() {
        return Zoo.solids();
    }

    @Test
    void sphereChordFollowsItsImpactParameter() {
        Sphere sphere = new Sphere(10);
        for (double b : new double[] {0, 1, 3.7, 9, 9.999}) {
            double expected = 2 * Math.sqrt(100 - b * b);
            assertThat(sphere.chord(new Vector3(b, 500, 0), new Vector3(0, -3, 0)))
                    .isCloseTo(expected, EXACT);
            assertThat(sphere.chord(new Vector3(0, 0, b), new Vector3(1, 2, 0))).isCloseTo(expected, EXACT);
        }
    }

    @Test
    void longCylinderChordFollowsItsAngleToTheAxis() {
        Cylinder cylinder = new Cylinder(5, 1e4);
        for (double psi : new double[] {0.1, 0.5, 1, Math.PI / 2}) {
            for (double b : new double[] {0, 2, 4.9}) {
                Vector3 direction = new Vector3(0, Math.sin(psi), Math.cos(psi));
                Vector3 point = new Vector3(b, 0, 0).plus(direction.times(-1000));
                assertThat(cylinder.chord(point, direction))
                        .isCloseTo(2 * Math.sqrt(25 - b * b) / Math.sin(psi), EXACT);
            }
        }
    }

    @Test
    void ellipseChordFollowsItsRadonTransform() {
        double a = 7;
        double b = 4;
        Ellipsoid ellipsoid = new Ellipsoid(new Vector3(a, b, 100));
        for (double phi : new double[] {0, 0.4, 1.2, 2.5}) {
            for (double s : new double[] {0, 1.5, 3.9}) {
                double m2 = Math.pow(a * Math.cos(phi), 2) + Math.pow(b * Math.sin(phi), 2);
                Vector3 point = new Vector3(s * Math.cos(phi), s * Math.sin(phi), 0);
                Vector3 direction = new Vector3(-Math.sin(phi), Math.cos(phi), 0);
                assertThat(ellipsoid.chord(point, direction)).isCloseTo(2 * a * b * Math.sqrt(m2 - s * s) / m2, EXACT);
            }
        }
    }

    @Test
    void boxChordsMatchHandCalculation() {
        Box box = new Box(new Vector3(10, 20, 30));
        assertThat(box.chord(new Vector3(-50, 1, 2), Vector3.X)).isCloseTo(10, EXACT);
        assertThat(box.chord(Vector3.ZERO, new Vector3(10, 20, 30))).isCloseTo(Math.sqrt(1400), EXACT);
        assertThat(box.chord(new Vector3(4, -10, 0), new Vector3(1, 1, 0))).isCloseTo(Math.sqrt(2), EXACT);
    }

    @Test
    void coneChordsMatchHandCalculation() {
        Cone cone = new Cone(4, 0, 8); // radius at height z is 2 − z/2
        assertThat(cone.chord(new Vector3(-9, 0, 0), Vector3.X)).isCloseTo(4, EXACT);
        assertThat(cone.chord(new Vector3(0, 0, 50), Vector3.Z)).isCloseTo(8, EXACT);
        assertThat(cone.chord(new Vector3(1, 0, 0), Vector3.Z)).isCloseTo(6, EXACT);
        // along (1, 0, 2): base at t = −2, mantle where t = 2 − t
        assertThat(cone.chord(Vector3.ZERO, new Vector3(1, 0, 2))).isCloseTo(3 * Math.sqrt(5), EXACT);
        // parallel to one side of the mantle, (−1, 0, 2): base at t = −2, the other side where t − 1 = 2 − t
        assertThat(cone.chord(new Vector3(1, 0, 0), new Vector3(-1, 0, 2))).isCloseTo(3.5 * Math.sqrt(5), EXACT);
    }

    @Test
    void spanHoldsTheParametersOfEntryAndExitWhereverTheOriginLies() {
        double[] span = new double[2];
        Sphere sphere = new Sphere(2);
        assertThat(sphere.clip(-10, 0, 0, 2, 0, 0, span)).isTrue();
        assertThat(span).containsExactly(new double[] {4, 6}, EXACT);
        assertThat(sphere.clip(0, 0, 0, 2, 0, 0, span)).isTrue();
        assertThat(span).containsExactly(new double[] {-1, 1}, EXACT);
        assertThat(sphere.clip(10, 0, 0, 2, 0, 0, span)).isTrue();
        assertThat(span).containsExactly(new double[] {-6, -4}, EXACT);
    }

    @Test
    void touchingIsMissing() {
        double[] span = new double[2];
        assertThat(new Sphere(1).clip(1, -5, 0, 0, 1, 0, span)).isFalse();
        assertThat(new Cylinder(1, 2).clip(1, 0, -5, 0, 0, 1, span)).isFalse();
        assertThat(new Cylinder(1, 2).clip(-5, 0, 1, 1, 0, 0, span)).isFalse();
        assertThat(new Box(new Vector3(2, 2, 2)).clip(1, -5, 0, 0, 1, 0, span)).isFalse();
        assertThat(new Cone(1, 0, 2).clip(0, 0, 1, 1, 0, 0, span)).isFalse();
        assertThat(new Cone(2, 0, 4).clip(2, 0, -2, -1, 0, 2, span)).isFalse();
    }

    @ParameterizedTest
    @MethodSource("solids")
    void linesAlongTheAxesAreNoSpecialCase(Shape solid) {
        double nudge = 1e-9;
        for (Vector3 along : List.of(Vector3.X, Vector3.Y, Vector3.Z)) {
            Vector3 beside = new Vector3(0.3, -0.2, 0.1);
            double exact = solid.chord(beside, along);
            double nudged = solid.chord(beside, along.plus(new Vector3(nudge, -nudge, nudge)));
            assertThat(exact).isPositive().isCloseTo(nudged, within(1e-6));
            assertThat(solid.chord(beside, along.times(-1e9))).isCloseTo(exact, EXACT);
        }
    }

    @ParameterizedTest
    @MethodSource("solids")
    void notANumberAndNoDirectionMiss(Shape solid) {
        double[] line = {0.1, 0.2, 0.3, 1, 2, 3};
        double[] span = new double[2];
        assertThat(solid.clip(line[0], line[1], line[2], line[3], line[4], line[5], span))
                .isTrue();
        assertThat(solid.clip(0.1, 0.2, 0.3, 0, 0, 0, span)).isFalse();
        for (double bad : new double[] {Double.NaN, Double.POSITIVE_INFINITY, Double.NEGATIVE_INFINITY}) {
            for (int i = 0; i < 6; i++) {
                double[] l = line.clone();
                l[i] = bad;
                assertThat(solid.clip(l[0], l[1], l[2], l[3], l[4], l[5], span))
                        .as("%s in place %d", bad, i)
                        .isFalse();
            }
        }
        assertThat(solid.contains(Double.NaN, 0, 0)).isFalse();
    }

    /** Cauchy: lines that fill space uniformly and isotropically meet a convex body in chords of mean 4 V / S. */
    @Test
    void meanChordIsFourVolumesPerSurface() {
        assertThat(meanChord(new Sphere(10), 11)).isCloseTo(13.3333, within(0.03));
        assertThat(meanChord(new Cylinder(15, 30), 22)).isCloseTo(20.0, within(0.06));
        assertThat(meanChord(new Box(new Vector3(10, 20, 30)), 19)).isCloseTo(10.9091, within(0.06));
        double slant = Math.hypot(12, 5);
        double surface = Math.PI * (64 + 9 + 11 * slant);
        Cone cone = new Cone(8, 3, 12);
        assertThat(meanChord(cone, 10.01)).isCloseTo(4 * cone.volumeMm3() / surface, within(0.05));
    }

    /** Standard error about 0.01 to 0.02 mm; the tolerances above are about three of them. */
    private static double meanChord(Solid solid, double ballRadius) {
        UniformRandomProvider random = RandomSource.XO_SHI_RO_256_PP.create(20);
        double[] point = new double[3];
        double sum = 0;
        int hits = 0;
        for (int i = 0; i < 400_000; i++) {
            Vector3 w = Zoo.direction(random);
            Vector3 u = w.cross(Math.abs(w.x()) < 0.5 ? Vector3.X : Vector3.Y).unit();
            Chance.disk(random::nextDouble, ballRadius, point);
            Vector3 origin = u.times(point[0]).plus(w.cross(u).times(point[1]));
            double chord = solid.chord(origin, w);
            sum += chord;
            hits += chord > 0 ? 1 : 0;
        }
        return sum / hits;
    }

    @Test
    void refusesSizesThatMakeNoSolid() {
        assertThatThrownBy(() -> new Sphere(Double.NaN))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessage("sphere: radius_mm: expected a number > 0, found NaN");
        assertThatThrownBy(() -> new Cylinder(0, -1))
                .hasMessage(
                        "cylinder: radius_mm: expected a number > 0, found 0; length_mm: expected a number > 0, found -1");
        assertThatThrownBy(() -> new Cone(0, 0, 1)).hasMessageContaining("a cone needs a base");
        assertThatThrownBy(() -> new Box(new Vector3(1, 0, 1))).hasMessageContaining("edges_mm[1]");
        assertThatThrownBy(() -> new Ellipsoid(new Vector3(1, 1, -1))).hasMessageContaining("semi_axes_mm[2]");
    }

    @Test
    void placingMovesTheSolidAndNotTheLine() {
        Placed rod = new Placed(
                new Cylinder(1, 10), Pose.shift(new Vector3(100, 0, 0)).after(Pose.rotation(Vector3.Y, Math.PI / 2)));
        assertThat(rod.chord(new Vector3(0, 0, 0.6), Vector3.X)).isCloseTo(10, EXACT);
        assertThat(rod.chord(new Vector3(100, 0, 0.6), Vector3.Y)).isCloseTo(1.6, EXACT);
        assertThat(rod.bounds().low())
                .isEqualTo(rod.bounds().centre().minus(rod.bounds().halfExtents()));
        assertThat(rod.bounds().high().x()).isCloseTo(105, EXACT);
        assertThat(rod.bounds().high().z()).isCloseTo(1, EXACT);
    }
}
