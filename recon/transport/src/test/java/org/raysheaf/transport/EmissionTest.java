package org.raysheaf.transport;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.List;
import org.apache.commons.rng.UniformRandomProvider;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.DecayScheme;
import org.raysheaf.geometry.matter.PositronRange;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.geometry.phantom.PhantomPart;
import org.raysheaf.geometry.phantom.Source;
import org.raysheaf.geometry.solid.Sphere;

class EmissionTest {
    private static final DetectorSystem SLABS = Trials.slabs(1000, 20, 0);

    private final UniformRandomProvider random = RandomStreams.stream(31, 0);
    private final Deposits deposits = new Deposits();

    private static Phantom ball(String material) {
        return new Phantom(new PhantomDescription(
                "ball", List.of(new PhantomPart("ball", new Sphere(30), Vector3.ZERO, Vector3.ZERO, material, 1))));
    }

    @Test
    void acollinearityIsGaussianInEachComponent() {
        World world = new World(SLABS, Trials.sources(new Source.Point("p", Vector3.ZERO, 1)), Physics.STRAIGHT);
        Physics physics = new Physics(false, 0.5, false, false, "vacuum");
        Emission emission = new Emission(world, new Emission.Plan(null, physics), random);
        Flight flight = new Flight(world, deposits, random);
        double squares = 0;
        int pairs = 0;
        int narrow = 0;
        double sd = Math.toRadians(0.5) / 2.354820045;
        for (int i = 0; i < 400_000; i++) {
            deposits.clear();
            emission.decay(new double[3], flight);
            if (deposits.size() == 2) {
                // the crossing point of the two photons on their slabs, seen from the origin; z is one transverse
                // component
                double a = Math.atan2(deposits.z[0], Math.hypot(deposits.x[0], deposits.y[0]));
                double b = Math.atan2(deposits.z[1], Math.hypot(deposits.x[1], deposits.y[1]));
                double off = a + b;
                squares += off * off;
                pairs++;
                narrow += Math.abs(off) < sd ? 1 : 0;
            }
        }
        // z is a transverse component exactly for photons in the x-y plane; the elevation of the others keeps the same
        // deviation
        assertThat(Math.sqrt(squares / pairs)).isCloseTo(sd, within(3 * sd / Math.sqrt(2.0 * pairs)));
        assertThat((double) narrow / pairs).isCloseTo(0.682689, within(3 * Math.sqrt(0.2166 / pairs)));
    }

    @Test
    void rangeIsThatOfWaterOverDensity() {
        double[] mean = new double[2];
        String[] materials = {"water", "cortical-bone"};
        for (int m = 0; m < 2; m++) {
            World world = new World(SLABS, ball(materials[m]), Physics.FULL);
            Emission emission = new Emission(
                    world, new Emission.Plan(DecayScheme.find("O-15").orElseThrow(), Physics.FULL), random);
            Flight flight = new Flight(world, deposits, random);
            int positrons = 0;
            for (int i = 0; i < 20_000; i++) {
                double[] point = new double[3];
                deposits.clear();
                if (emission.decay(point, flight)) {
                    positrons++;
                    mean[m] += Math.sqrt(point[0] * point[0] + point[1] * point[1] + point[2] * point[2]);
                }
            }
            mean[m] /= positrons;
            assertThat((double) positrons / 20_000).isCloseTo(0.999, within(3 * Math.sqrt(0.001 / 20_000)));
        }
        PositronRange water = PositronRange.of(1732);
        double drawn = 0;
        for (int i = 0; i < 20_000; i++) {
            drawn += water.drawMm(random);
        }
        // one spread of a distance is about 0.75 of its mean; two samples of 20,000
        double error = 3 * 0.75 * Math.sqrt(2.0 / 20_000);
        assertThat(mean[0] / (drawn / 20_000)).isCloseTo(1, within(error));
        assertThat(mean[0] / mean[1]).isCloseTo(1.92, within(1.92 * error));
    }

    @Test
    void positronsCrossIntoOtherMatterAtItsDensity() {
        // a small ball of lung in bone: what leaves it goes on 1.83 times slower
        Phantom phantom = new Phantom(new PhantomDescription(
                "shells",
                List.of(
                        new PhantomPart("bone", new Sphere(30), Vector3.ZERO, Vector3.ZERO, "cortical-bone", 0),
                        new PhantomPart("water", new Sphere(1), Vector3.ZERO, Vector3.ZERO, "water", 1))));
        World world = new World(SLABS, phantom, Physics.FULL);
        Emission emission =
                new Emission(world, new Emission.Plan(DecayScheme.find("O-15").orElseThrow(), Physics.FULL), random);
        Flight flight = new Flight(world, deposits, random);
        PositronRange range = PositronRange.of(1732);
        int draws = 30_000;
        double[] found = new double[draws];
        double[] expected = new double[draws];
        for (int i = 0; i < draws; i++) {
            double[] point = new double[3];
            emission.decay(point, flight);
            found[i] = Math.sqrt(point[0] * point[0] + point[1] * point[1] + point[2] * point[2]);
            double water = range.drawMm(random);
            expected[i] = water <= 1 ? water : 1 + (water - 1) / 1.92;
        }
        Arrays.sort(found);
        Arrays.sort(expected);
        for (double share : new double[] {0.1, 0.3, 0.5, 0.7, 0.9, 0.99}) {
            int at = (int) (share * draws);
            // one step of 0.02 mm, and the scatter of a quantile of the samples (at most 0.02 mm up to 90 %)
            assertThat(found[at]).as("quantile %s", share).isCloseTo(expected[at], within(share < 0.95 ? 0.07 : 0.2));
        }
    }

    @Test
    void gammasComeAsOftenAsTheSchemeSays() {
        // Na-22 at the centre between black slabs, straight photons: 1274.5 keV per decay 0.9994, a third of directions
        // meet a slab
        World world = new World(SLABS, Trials.sources(new Source.Point("p", Vector3.ZERO, 1)), Physics.STRAIGHT);
        Physics physics = new Physics(false, 0, true, false, "vacuum");
        Emission emission =
                new Emission(world, new Emission.Plan(DecayScheme.find("Na-22").orElseThrow(), physics), random);
        Flight flight = new Flight(world, deposits, random);
        int decays = 100_000;
        int gammas = 0;
        int annihilation = 0;
        for (int i = 0; i < decays; i++) {
            deposits.clear();
            emission.decay(new double[3], flight);
            for (int k = 0; k < deposits.size(); k++) {
                gammas += deposits.energyKeV[k] > 1000 ? 1 : 0;
                annihilation += deposits.energyKeV[k] < 1000 ? 1 : 0;
            }
        }
        // the two faces of a slab pair 1000 mm apart and 1000 mm wide: a third of all directions
        double third = 0.9994 / 3;
        assertThat((double) gammas / decays).isCloseTo(third, within(3 * Math.sqrt(third * (1 - third) / decays)));
        double two = 2 * 0.89955 / 3;
        assertThat((double) annihilation / decays).isCloseTo(two, within(3 * Math.sqrt(4 * 0.3 * 0.7 / decays)));
    }

    @Test
    void aLineThatFollowsSomeBranchesComesOnceAndWithItsPositrons() {
        // reference-values D, I-124: the branches of 1534.9 and 812.1 keV, 11.99 % of decays, pass through the level of
        // 602.7 keV, which sends out 62.9 photons per 100 decays
        World world = new World(SLABS, Trials.sources(new Source.Point("p", Vector3.ZERO, 1)), Physics.STRAIGHT);
        Physics physics = new Physics(false, 0, true, false, "vacuum");
        Emission emission =
                new Emission(world, new Emission.Plan(DecayScheme.find("I-124").orElseThrow(), physics), random);
        Flight flight = new Flight(world, deposits, random);
        int decays = 300_000;
        int seen = 0;
        int withPair = 0;
        for (int i = 0; i < decays; i++) {
            deposits.clear();
            emission.decay(new double[3], flight);
            int lines = 0;
            int annihilation = 0;
            for (int k = 0; k < deposits.size(); k++) {
                lines += Math.abs(deposits.energyKeV[k] - 602.73) < 1 ? 1 : 0;
                annihilation += Math.abs(deposits.energyKeV[k] - 511) < 1 ? 1 : 0;
            }
            assertThat(lines).isLessThanOrEqualTo(1);
            seen += lines;
            withPair += lines > 0 && annihilation > 0 ? 1 : 0;
        }
        // a third of all directions meets a slab, and so does a third of all opposite pairs
        double single = 0.629 / 3;
        double joint = 0.1199 / 9;
        assertThat((double) seen / decays).isCloseTo(single, within(3 * Math.sqrt(single * (1 - single) / decays)));
        assertThat((double) withPair / decays).isCloseTo(joint, within(3 * Math.sqrt(joint * (1 - joint) / decays)));
    }

    @Test
    void betaRaysOfLutetiumHaveTheirMean() {
        // reference-values C: mean 182 keV, largest 593 keV; the allowed shape used here may differ from the true one
        // by 5 %
        double sum = 0;
        double most = 0;
        for (int i = 0; i < 200_000; i++) {
            double keV = Lutetium.drawBetaKeV(random);
            sum += keV;
            most = Math.max(most, keV);
        }
        assertThat(sum / 200_000).isCloseTo(182, within(0.05 * 182));
        assertThat(most).isBetween(560.0, 593.0);
    }
}
