package org.raysheaf.engine.prior;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.Random;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;
import org.raysheaf.engine.ray.Lattice;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

/** Priors against hand calculations, differences of their own values, and a twin that is written as on paper. */
final class PenaltyTest {
    private static final double TYPICAL = 3;
    private static final double MEAN_SENSITIVITY = 5;

    /** Sums of 26 terms in single precision. */
    private static final double SINGLE = 2e-6;

    /** Central differences over h = 1e-5: h² / 6 times a third derivative of at most 1/a² = 10⁴. */
    private static final double DIFFERENCES = 2e-7;

    static Stream<Prior> priors() {
        return Stream.of(
                new QuadraticPrior(0.7),
                new RelativeDifferencePrior(0.7, 2),
                new RelativeDifferencePrior(0.7, 0),
                new EdgePreservingPrior(0.7, 0.2));
    }

    @Test
    void pairsComeOutAsByHand() {
        // (4 − 1)² / (2 · 3), 3 / 3, 1/3
        check(new QuadraticPrior(1).potential(3), 1.5, 1, 1 / 3.0);
        // d = 3, D = 5 + 2 · 3 + 0.003 = 11.003: 9 / D, 3 · (4 + 3 + 6 + 0.006) / D², 2 · 2.003² / D³
        check(
                new RelativeDifferencePrior(1, 2).potential(3),
                0.8179587385,
                3 * 13.006 / (11.003 * 11.003),
                2 * 2.003 * 2.003 / (11.003 * 11.003 * 11.003));
        // δ = 4, d = 3: √(1 + 9/16) = 5/4: 16/3 · 1/4, 3 / (3 · 5/4), 1 / (3 · 125/64)
        check(new EdgePreservingPrior(1, 4 / 3.0).potential(3), 4 / 3.0, 0.8, 64 / 375.0);
    }

    private static void check(PairPotential pair, double value, double slope, double curvature) {
        assertThat(pair.value(4, 1)).isCloseTo(value, within(1e-9));
        assertThat(pair.value(1, 4)).isCloseTo(value, within(1e-9));
        assertThat(pair.slope(4, 1)).isCloseTo(slope, within(1e-9));
        assertThat(pair.curvature(4, 1)).isCloseTo(curvature, within(1e-9));
    }

    @ParameterizedTest
    @MethodSource("priors")
    void slopeAndCurvatureAreThoseOfTheValue(Prior prior) {
        PairPotential pair = prior.potential(TYPICAL);
        double h = 1e-5;
        for (double a : new double[] {0.01, 0.5, 2.9, 3, 20}) {
            for (double b : new double[] {0, 0.4, 3.1, 17}) {
                assertThat(pair.slope(a, b))
                        .isCloseTo((pair.value(a + h, b) - pair.value(a - h, b)) / (2 * h), within(DIFFERENCES));
                assertThat(pair.curvature(a, b))
                        .isCloseTo((pair.slope(a + h, b) - pair.slope(a - h, b)) / (2 * h), within(1e-5));
            }
        }
        // All kinds mean the same by their strength: curvature 1/x̄ at x̄. ε takes 1 in 2000 of it.
        assertThat(pair.curvature(TYPICAL, TYPICAL) * TYPICAL).isCloseTo(1, within(1e-3));
        assertThat(pair.slope(2, 2)).isZero();
    }

    /** Two voxels that may hold activity, 2 mm apart where the smallest pitch is 1 mm; all others do not count. */
    @Test
    void twoVoxelsAreOnePairOfHalfWeight() {
        Grid grid = new Grid(4, 3, 3, 2, 3, 1, Pose.IDENTITY);
        Lattice lattice = new Lattice(grid);
        Image support = new Image(grid);
        Image image = Image.filled(grid, 7);
        int one = grid.index(1, 1, 1);
        int two = grid.index(2, 1, 1);
        support.values()[one] = 1;
        support.values()[two] = 1;
        image.values()[one] = 4;
        image.values()[two] = 1;
        Penalty penalty =
                new Penalty(new QuadraticPrior(0.7), lattice, lattice.fromImage(support), TYPICAL, MEAN_SENSITIVITY);
        float[] x = lattice.fromImage(image);
        assertThat(penalty.value(x, 0, x.length)).isCloseTo(0.7 * 5 * 0.5 * 1.5, within(1e-9));
        float[] out = new float[x.length];
        penalty.gradient(x, 0, x.length, out);
        Image gradient = lattice.toImage(out);
        assertThat((double) gradient.values()[one]).isCloseTo(0.7 * 5 * 0.5, within(SINGLE));
        assertThat((double) gradient.values()[two]).isCloseTo(-0.7 * 5 * 0.5, within(SINGLE));
        assertThat(gradient.sum()).isCloseTo(0, within(SINGLE));
        penalty.curvature(x, 0, x.length, out);
        assertThat(lattice.toImage(out).sum()).isCloseTo(2 * 0.7 * 5 * 0.5 / 3, within(SINGLE));
    }

    @ParameterizedTest
    @MethodSource("priors")
    void agreesWithTheTwinHoweverTheVoxelsAreCut(Prior prior) {
        Grid grid = new Grid(19, 17, 23, 1, 1.5, 0.8, Pose.IDENTITY);
        Lattice lattice = new Lattice(grid);
        Random random = new Random(5);
        Image image = new Image(grid);
        Image support = new Image(grid);
        for (int j = 0; j < grid.voxels(); j++) {
            support.values()[j] = random.nextInt(4) > 0 ? 1 : 0;
            image.values()[j] = random.nextInt(5) * support.values()[j] * random.nextFloat();
        }
        Penalty penalty = new Penalty(prior, lattice, lattice.fromImage(support), TYPICAL, MEAN_SENSITIVITY);
        float[] x = lattice.fromImage(image);
        float[] slopes = new float[x.length];
        float[] curvatures = new float[x.length];
        Arrays.fill(slopes, Float.NaN);
        double value = 0;
        int[] cuts = {0, 1, 777, 778, 5000, x.length};
        for (int i = 1; i < cuts.length; i++) {
            value += penalty.value(x, cuts[i - 1], cuts[i]);
            penalty.gradient(x, cuts[i - 1], cuts[i], slopes);
            penalty.curvature(x, cuts[i - 1], cuts[i], curvatures);
        }
        Twin twin = new Twin(prior, image, support);
        assertThat(value).isCloseTo(twin.value, within(1e-7 * twin.value));
        Image gradient = lattice.toImage(slopes);
        Image curvature = lattice.toImage(curvatures);
        for (int j = 0; j < grid.voxels(); j++) {
            assertThat((double) gradient.values()[j])
                    .isCloseTo(twin.gradient[j], within(SINGLE * (10 + Math.abs(twin.gradient[j]))));
            assertThat((double) curvature.values()[j])
                    .isCloseTo(twin.curvature[j], within(SINGLE * (10 + twin.curvature[j])));
        }
    }

    /** Every ordered pair of voxels is tried. */
    private static final class Twin {
        double value;
        final double[] gradient;
        final double[] curvature;

        Twin(Prior prior, Image image, Image support) {
            Grid grid = image.grid();
            PairPotential pair = prior.potential(TYPICAL);
            gradient = new double[grid.voxels()];
            curvature = new double[grid.voxels()];
            double beta = prior.strength() * MEAN_SENSITIVITY;
            double smallest = Math.min(grid.spacingXMm(), Math.min(grid.spacingYMm(), grid.spacingZMm()));
            for (int x = 0; x < grid.nx(); x++) {
                for (int y = 0; y < grid.ny(); y++) {
                    for (int z = 0; z < grid.nz(); z++) {
                        int j = grid.index(x, y, z);
                        for (int u = Math.max(0, x - 1); u <= Math.min(grid.nx() - 1, x + 1); u++) {
                            for (int v = Math.max(0, y - 1); v <= Math.min(grid.ny() - 1, y + 1); v++) {
                                for (int w = Math.max(0, z - 1); w <= Math.min(grid.nz() - 1, z + 1); w++) {
                                    int k = grid.index(u, v, w);
                                    if (k == j || support.values()[j] * support.values()[k] == 0) {
                                        continue;
                                    }
                                    Vector3 between = grid.centre(u, v, w).minus(grid.centre(x, y, z));
                                    double weight = beta * smallest / between.norm();
                                    double a = image.values()[j];
                                    double b = image.values()[k];
                                    value += 0.5 * weight * pair.value(a, b);
                                    gradient[j] += weight * pair.slope(a, b);
                                    curvature[j] += weight * pair.curvature(a, b);
                                }
                            }
                        }
                    }
                }
            }
        }
    }

    @Test
    void saysWhatAStrengthIs() {
        assertThatThrownBy(() -> new QuadraticPrior(0)).hasMessageContaining("for no prior leave out prior");
        assertThatThrownBy(() -> new RelativeDifferencePrior(Double.NaN, -1))
                .hasMessageContaining("strength: expected a number above 0")
                .hasMessageContaining("gamma: expected a number from 0 to 1000, found -1");
        assertThatThrownBy(() -> new EdgePreservingPrior(1, 0))
                .hasMessageContaining("edge: expected the size of an edge");
    }
}
