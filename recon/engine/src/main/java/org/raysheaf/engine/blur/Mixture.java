package org.raysheaf.engine.blur;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.function.DoubleUnaryOperator;
import org.apache.commons.math3.analysis.MultivariateFunction;
import org.apache.commons.math3.optim.InitialGuess;
import org.apache.commons.math3.optim.MaxEval;
import org.apache.commons.math3.optim.nonlinear.scalar.GoalType;
import org.apache.commons.math3.optim.nonlinear.scalar.ObjectiveFunction;
import org.apache.commons.math3.optim.nonlinear.scalar.noderiv.NelderMeadSimplex;
import org.apache.commons.math3.optim.nonlinear.scalar.noderiv.SimplexOptimizer;
import org.raysheaf.geometry.matter.DecayScheme;
import org.raysheaf.geometry.matter.PositronRange;
import org.raysheaf.geometry.settings.Problems;

/**
 * An isotropic kernel in space as a sum of Gaussians with weights that add up to 1. Seen along one axis it is the same sum of one-dimensional
 * Gaussians, so a fit of the profile along an axis is a fit in space. Immutable.
 *
 * @param parts the Gaussians, at least one
 */
public record Mixture(List<Part> parts) {
    /** Nothing is spread. */
    public static final Mixture POINT = new Mixture(List.of(new Part(1, 0)));

    /** FWHM / σ of a Gaussian: 2 √(2 ln 2). */
    static final double FWHM_PER_SIGMA = 2 * Math.sqrt(2 * Math.log(2));

    /** Gaussians of a positron range. With five, all widths of the laws of Levin and Hoffman come out within 1 %, rms exactly. */
    private static final int RANGE_PARTS = 5;

    private static final double WEIGHT_ROUNDING = 1e-6;
    private static final int FIT_POINTS = 400;
    private static final int FIT_ROUNDS = 3000;
    private static final int MOST_TRIALS = 20_000;
    /** What a width that is off by its own size costs, in units of the mean log-likelihood. */
    private static final double WIDTHS_COUNT = 0.3;

    /** The profile is sampled from the bound times this; all but 10⁻³ of the narrowest cusp lies farther out. */
    private static final double FIT_NEAREST = 1e-5;

    /**
     * One Gaussian.
     *
     * @param weight its share of the whole, at least 0
     * @param sigmaMm standard deviation along each axis (mm), at least 0
     */
    public record Part(double weight, double sigmaMm) {
        /**
         * A Gaussian of some width.
         *
         * @param weight its share of the whole, at least 0
         * @param fwhmMm full width at half maximum (mm), at least 0
         * @return the part
         */
        public static Part ofFwhm(double weight, double fwhmMm) {
            return new Part(weight, fwhmMm / FWHM_PER_SIGMA);
        }

        /**
         * Its full width at half maximum.
         *
         * @return FWHM (mm)
         */
        public double fwhmMm() {
            return FWHM_PER_SIGMA * sigmaMm;
        }
    }

    /**
     * Checks the parts.
     *
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if weights are negative or do not add up to 1, or widths are negative
     */
    public Mixture {
        parts = List.copyOf(parts);
        Problems problems = new Problems("kernel");
        double sum = 0;
        for (int k = 0; k < parts.size(); k++) {
            problems.within("[" + k + "].weight", parts.get(k).weight(), 0, 1)
                    .within("[" + k + "].sigma_mm", parts.get(k).sigmaMm(), 0, 1e3);
            sum += parts.get(k).weight();
        }
        problems.rule(
                        Math.abs(sum - 1) <= WEIGHT_ROUNDING,
                        "weight",
                        "expected weights that add up to 1, found a sum of " + sum)
                .orThrow();
    }

    /**
     * Where the positrons of a nuclide annihilate in water, by the law that simulations draw from ({@link PositronRange}), all branches
     * together.
     *
     * @param scheme a nuclide with positrons
     * @return five Gaussians with the same rms distance; widths as {@link #widthMm} tells
     * @throws IllegalArgumentException if the nuclide has no positrons
     */
    public static Mixture ofRange(DecayScheme scheme) {
        double bound = 0;
        for (DecayScheme.PositronBranch branch : scheme.positrons()) {
            bound = Math.max(bound, PositronRange.of(branch.endpointKeV()).boundMm());
        }
        if (!(bound > 0)) {
            throw new IllegalArgumentException(scheme.nuclide().name() + " has no positrons");
        }
        return fit(rangeProfile(scheme), bound, RANGE_PARTS);
    }

    /**
     * The law itself, seen along one axis.
     *
     * @param scheme a nuclide with positrons
     * @return share per mm at a distance (mm) on either side
     */
    public static DoubleUnaryOperator rangeProfile(DecayScheme scheme) {
        List<PositronRange> ranges = new ArrayList<>();
        scheme.positrons().forEach(branch -> ranges.add(PositronRange.of(branch.endpointKeV())));
        return x -> {
            double sum = 0;
            for (int b = 0; b < ranges.size(); b++) {
                sum += scheme.positrons().get(b).share() * ranges.get(b).profile(x);
            }
            return sum;
        };
    }

    /**
     * The sum of Gaussians that is most likely for a symmetric profile, by expectation and maximisation over weights and variances (Dempster,
     * Laird &amp; Rubin 1977, J. R. Stat. Soc. B 39:1). Weights stay above 0, and each round leaves Σ w σ² equal to the mean square of the
     * profile, so the rms is exact. Then the widths are made to fit.
     */
    static Mixture fit(DoubleUnaryOperator profile, double boundMm, int count) {
        double[] squares = new double[FIT_POINTS];
        double[] mass = new double[FIT_POINTS];
        double step = -Math.log(FIT_NEAREST) / FIT_POINTS;
        double total = 0;
        double meanSquare = 0;
        for (int i = 0; i < FIT_POINTS; i++) {
            double x = boundMm * FIT_NEAREST * Math.exp((i + 0.5) * step);
            squares[i] = x * x;
            mass[i] = profile.applyAsDouble(x) * x;
            total += mass[i];
            meanSquare += mass[i] * squares[i];
        }
        meanSquare /= total;
        double[] weights = new double[count];
        double[] variances = new double[count];
        for (int k = 0; k < count; k++) {
            weights[k] = 1.0 / count;
            variances[k] = 4 * meanSquare * Math.pow(0.04, 2.0 * (count - 1 - k) / Math.max(1, count - 1));
        }
        double[] share = new double[count];
        for (int round = 0; round < FIT_ROUNDS; round++) {
            double[] zeroth = new double[count];
            double[] second = new double[count];
            for (int i = 0; i < FIT_POINTS; i++) {
                double sum = 0;
                for (int k = 0; k < count; k++) {
                    share[k] = weights[k] / Math.sqrt(variances[k]) * Math.exp(-0.5 * squares[i] / variances[k]);
                    sum += share[k];
                }
                for (int k = 0; k < count && sum > 0; k++) {
                    double part = mass[i] / total * share[k] / sum;
                    zeroth[k] += part;
                    second[k] += part * squares[i];
                }
            }
            for (int k = 0; k < count; k++) {
                weights[k] = zeroth[k];
                variances[k] = second[k] / zeroth[k];
            }
        }
        return withWidths(profile, boundMm, new Target(squares, mass, total, meanSquare), weights, variances);
    }

    /** A profile by points: squared distances and what lies there; the sum of that, and the mean square. */
    @SuppressWarnings("ArrayRecordComponent") // nobody compares them
    private record Target(double[] squares, double[] mass, double total, double meanSquare) {
        /** Parts from logarithms of weights and of widths, in any scale; the rms is made that of the profile. */
        Mixture parts(double[] logs) {
            int count = logs.length / 2;
            double sum = 0;
            double square = 0;
            for (int k = 0; k < count; k++) {
                double weight = Math.exp(logs[k]);
                sum += weight;
                square += weight * Math.exp(2 * logs[count + k]);
            }
            double scale = Math.sqrt(meanSquare * sum / square);
            List<Part> parts = new ArrayList<>();
            for (int k = 0; k < count; k++) {
                parts.add(new Part(Math.exp(logs[k]) / sum, scale * Math.exp(logs[count + k])));
            }
            return new Mixture(parts);
        }

        double meanLog(Mixture mixture) {
            double sum = 0;
            for (int i = 0; i < squares.length; i++) {
                sum += mass[i] / total * Math.log(mixture.profile(Math.sqrt(squares[i])));
            }
            return sum;
        }
    }

    /**
     * Bends the most likely sum until its widths at half and at a tenth of the maximum are those of the profile too: a cusp holds little, so
     * likelihood alone would round it off.
     */
    private static Mixture withWidths(
            DoubleUnaryOperator profile, double boundMm, Target target, double[] weights, double[] variances) {
        double half = 0.5 * width(profile, 0.5, boundMm);
        double tenth = 0.5 * width(profile, 0.1, boundMm);
        int count = weights.length;
        double[] logs = new double[2 * count];
        double[] steps = new double[2 * count];
        for (int k = 0; k < count; k++) {
            logs[k] = Math.log(weights[k]);
            logs[count + k] = 0.5 * Math.log(variances[k]);
        }
        Arrays.fill(steps, 0.3);
        MultivariateFunction cost = point -> {
            Mixture mixture = target.parts(point);
            double top = mixture.profile(0);
            double atHalf = mixture.profile(half) / top / 0.5 - 1;
            double atTenth = mixture.profile(tenth) / top / 0.1 - 1;
            return WIDTHS_COUNT * (atHalf * atHalf + atTenth * atTenth) - target.meanLog(mixture);
        };
        double[] best = new SimplexOptimizer(1e-9, 1e-9)
                .optimize(
                        new ObjectiveFunction(cost),
                        GoalType.MINIMIZE,
                        new InitialGuess(logs),
                        new NelderMeadSimplex(steps),
                        new MaxEval(MOST_TRIALS))
                .getPoint();
        return target.parts(best);
    }

    /**
     * Both kernels, one after the other.
     *
     * @param other the other kernel
     * @return a Gaussian for each pair of parts
     */
    public Mixture then(Mixture other) {
        List<Part> products = new ArrayList<>();
        for (Part a : parts) {
            for (Part b : other.parts) {
                products.add(new Part(a.weight * b.weight, Math.hypot(a.sigmaMm, b.sigmaMm)));
            }
        }
        return new Mixture(products);
    }

    /**
     * Standard deviation along an axis.
     *
     * @return √(Σ w σ²) (mm)
     */
    public double rmsMm() {
        double sum = 0;
        for (Part part : parts) {
            sum += part.weight * part.sigmaMm * part.sigmaMm;
        }
        return Math.sqrt(sum);
    }

    /**
     * Full width of the profile along an axis.
     *
     * @param fraction of the maximum: 0.5 for FWHM, 0.1 for FWTM
     * @return the width (mm); 0 if a part has no width
     */
    public double widthMm(double fraction) {
        for (Part part : parts) {
            if (part.weight > 0 && part.sigmaMm == 0) {
                return 0;
            }
        }
        double widest = parts.stream().mapToDouble(Part::sigmaMm).max().orElseThrow();
        return width(this::profile, fraction, 10 * widest);
    }

    /** Full width of a profile that falls from 0 to a bound. */
    static double width(DoubleUnaryOperator profile, double fraction, double boundMm) {
        double level = fraction * profile.applyAsDouble(0);
        double low = 0;
        double high = boundMm;
        for (int i = 0; i < 100; i++) {
            double middle = 0.5 * (low + high);
            if (profile.applyAsDouble(middle) > level) {
                low = middle;
            } else {
                high = middle;
            }
        }
        return low + high;
    }

    private double profile(double x) {
        double sum = 0;
        for (Part part : parts) {
            double u = x / part.sigmaMm;
            sum += part.weight / part.sigmaMm * Math.exp(-0.5 * u * u);
        }
        return sum / Math.sqrt(2 * Math.PI);
    }
}
