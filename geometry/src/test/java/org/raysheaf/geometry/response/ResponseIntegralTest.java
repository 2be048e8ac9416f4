package org.raysheaf.geometry.response;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.Placement;
import org.raysheaf.geometry.detector.RayPath;
import org.raysheaf.geometry.detector.Systems;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

class ResponseIntegralTest {
    /** Two single crystals, far apart, facing each other across the origin. */
    private static DetectorSystem lone(double attenuationLengthMm, Vector3 crystal) {
        CrystalBlock block = new CrystalBlock("block", 1, 1, 1, crystal, crystal, "scintillator");
        return Systems.system(
                new FieldOfView(5, 10),
                1,
                attenuationLengthMm,
                List.of(block),
                List.of(
                        new Placement.Single("block", new Vector3(50, 0, 0), new Vector3(-1, 0, 0), Vector3.Z),
                        new Placement.Single("block", new Vector3(-50, 0, 0), new Vector3(1, 0, 0), Vector3.Z)));
    }

    @Test
    void perfectAbsorberShowsItsProjectedFaces() {
        DetectorSystem system = lone(0, new Vector3(2, 3, 4));
        Response response = new Response();
        // Projected area of a box: sum of its visible faces times their cosines (exact).
        double su = 0.3;
        double sv = -0.2;
        double sw = Math.sqrt(1 - su * su - sv * sv);
        new ResponseIntegral(system).evaluate(0, su, sv, sw, response);
        assertThat(response.areaMm2()).isCloseTo(2 * 3 * sw + 3 * 4 * 0.3 + 2 * 4 * 0.2, within(1e-9));
        new ResponseIntegral(system).evaluate(0, 0, 0, 1, response);
        assertThat(response.areaMm2()).isCloseTo(6, within(1e-12));
        assertThat(response.w()).isCloseTo(-2, within(1e-12));
        assertThat(response.varianceMm2()).isCloseTo(0, within(1e-12));
    }

    /** Head on, the depth follows a truncated exponential law: area, mean and variance in closed form. */
    @Test
    void headOnCrystalFollowsTheExponentialLaw() {
        double depth = 13;
        double lambda = 12.2;
        DetectorSystem system = lone(lambda, new Vector3(2, 3, depth));
        Response response = new Response();
        new ResponseIntegral(system).evaluate(0, 0, 0, 1, response);
        double through = Math.exp(-depth / lambda);
        double mean = lambda - depth * through / (1 - through);
        double variance = lambda * lambda - depth * depth * through / ((1 - through) * (1 - through));
        assertThat(response.areaMm2()).isCloseTo(6 * (1 - through), within(1e-9));
        assertThat(response.w()).isCloseTo(mean - depth / 2, within(1e-9));
        assertThat(response.varianceMm2()).isCloseTo(variance, within(1e-6));
    }

    /**
     * The twin throws parallel rays at random over a disc that covers the crystal and follows each through all blocks: no faces, no cuts, no
     * quadrature. 200,000 rays make its standard error about 0.3 %; the test allows 4 of them.
     */
    @Test
    void agreesWithRaysThrownAtRandom() {
        DetectorSystem system = Systems.heron12(12.2, 13);
        int[][] crystals = {{5, 5}, {0, 5}, {10, 10}, {3, 0}};
        double[][] slopes = {{0.05, 0.02}, {0.6, -0.3}, {-0.8, 0.1}, {-0.2, 0.5}};
        Random random = new Random(11);
        Response response = new Response();
        for (int i = 0; i < crystals.length; i++) {
            for (int block : new int[] {0, 15}) {
                int element = block * 121 + 11 * crystals[i][1] + crystals[i][0];
                Vector3 local = new Vector3(slopes[i][0], slopes[i][1], 1).unit();
                new ResponseIntegral(system).evaluate(element, local.x(), local.y(), local.z(), response);
                double[] thrown = throwRays(system, element, local, 200_000, random);
                assertThat(response.areaMm2()).isCloseTo(thrown[0], within(4 * thrown[1] + 0.003 * thrown[0]));
                assertThat(response.w()).isCloseTo(thrown[2], within(0.1));
            }
        }
    }

    /** Area, its standard error, and the mean w of the interaction. */
    private static double[] throwRays(DetectorSystem system, int element, Vector3 local, int rays, Random random) {
        Pose pose = system.blockOf(element).pose();
        Vector3 s = pose.turn(local);
        Vector3 across = s.cross(pose.v()).unit();
        Vector3 other = s.cross(across);
        Vector3 centre = system.centre(element);
        double radius = 0.5 * system.size(element).norm();
        RayPath path = new RayPath();
        double sum = 0;
        double squares = 0;
        double depth = 0;
        for (int i = 0; i < rays; i++) {
            double r = radius * Math.sqrt(random.nextDouble());
            double angle = 2 * Math.PI * random.nextDouble();
            Vector3 p = centre.plus(across.times(r * Math.cos(angle))).plus(other.times(r * Math.sin(angle)));
            Vector3 o = p.minus(s.times(p.dot(s)));
            system.trace(o.x(), o.y(), o.z(), s.x(), s.y(), s.z(), path);
            double arrives = 1;
            for (int k = 0; k < path.size(); k++) {
                double x = (path.leave(k) - path.enter(k)) / path.attenuationLength(k);
                if (path.element(k) == element) {
                    double share = arrives * -Math.expm1(-x);
                    double within = path.attenuationLength(k) * (1 - x * Math.exp(-x) / -Math.expm1(-x));
                    Vector3 stop = o.plus(s.times(path.enter(k) + within)).minus(centre);
                    sum += share;
                    squares += share * share;
                    depth += share * stop.dot(pose.w());
                }
                arrives *= Math.exp(-x);
            }
        }
        double disc = Math.PI * radius * radius;
        double mean = sum / rays;
        double error = Math.sqrt((squares / rays - mean * mean) / rays);
        return new double[] {disc * mean, disc * error, depth / sum};
    }
}
