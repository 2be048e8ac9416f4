package org.raysheaf.geometry.matter;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import org.apache.commons.math3.analysis.UnivariateFunction;
import org.apache.commons.math3.analysis.interpolation.SplineInterpolator;

/**
 * A cross section as a function of energy: a cubic spline of its logarithm over the logarithm of energy, between absorption edges. An edge
 * is two nodes less than {@value #EDGE_KEV} keV apart; no spline runs across it. Immutable.
 */
final class EnergyCurve {
    private static final double EDGE_KEV = 0.001;

    private final double thresholdKeV;
    private final double[] starts;
    private final List<UnivariateFunction> splines;

    private EnergyCurve(double thresholdKeV, double[] starts, List<UnivariateFunction> splines) {
        this.thresholdKeV = thresholdKeV;
        this.starts = starts;
        this.splines = splines;
    }

    static EnergyCurve of(double[] energies, double[] values) {
        List<Double> starts = new ArrayList<>();
        List<UnivariateFunction> splines = new ArrayList<>();
        int from = 0;
        for (int i = 1; i <= energies.length; i++) {
            if (i == energies.length || energies[i] - energies[i - 1] < EDGE_KEV) {
                starts.add(energies[from]);
                splines.add(spline(Arrays.copyOfRange(energies, from, i), Arrays.copyOfRange(values, from, i), 0));
                from = i;
            }
        }
        return new EnergyCurve(
                0, starts.stream().mapToDouble(Double::doubleValue).toArray(), splines);
    }

    /**
     * Pair production, which is 0 below its threshold 2m_ec²: the same in the variable 1 − threshold/E, in which it begins like a power and
     * can be continued below its first node.
     */
    static EnergyCurve ofPairProduction(double[] energies, double[] values) {
        double threshold = 2 * KleinNishina.ELECTRON_KEV;
        int from = 0;
        while (from < values.length && !(values[from] > 0)) {
            from++;
        }
        UnivariateFunction spline = spline(
                Arrays.copyOfRange(energies, from, energies.length),
                Arrays.copyOfRange(values, from, values.length),
                threshold);
        return new EnergyCurve(threshold, new double[] {threshold}, List.of(spline));
    }

    private static UnivariateFunction spline(double[] energies, double[] values, double threshold) {
        double[] x = Arrays.stream(energies).map(e -> variable(e, threshold)).toArray();
        double[] y = Arrays.stream(values).map(Math::log).toArray();
        double slope = x.length > 1 ? (y[1] - y[0]) / (x[1] - x[0]) : 0;
        UnivariateFunction inside =
                x.length > 2 ? new SplineInterpolator().interpolate(x, y) : at -> y[0] + slope * (at - x[0]);
        double last = x[x.length - 1];
        return at -> at < x[0] ? y[0] + slope * (at - x[0]) : inside.value(Math.min(at, last));
    }

    private static double variable(double energyKeV, double threshold) {
        return threshold > 0 ? Math.log(1 - threshold / energyKeV) : Math.log(energyKeV);
    }

    double at(double energyKeV) {
        if (energyKeV <= thresholdKeV) {
            return 0;
        }
        int piece = 0;
        while (piece + 1 < starts.length && energyKeV >= starts[piece + 1]) {
            piece++;
        }
        return Math.exp(splines.get(piece).value(variable(energyKeV, thresholdKeV)));
    }
}
