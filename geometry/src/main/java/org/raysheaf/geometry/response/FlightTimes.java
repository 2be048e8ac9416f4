package org.raysheaf.geometry.response;

import java.util.Arrays;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.detector.Readout;

/**
 * Where on its line the times of a pair put the decay. Photon b arrives Δt = t_b − t_a after photon a if the decay was nearer to a by c·Δt/2 than
 * the middle of the line. The standard deviation of that offset (mm) is
 *
 * <pre>
 * σ² = (c/2)² · (s_a² + s_b² + (r_a² + r_b²)/12) + (v_a + v_b)/4
 * </pre>
 *
 * <p>with the standard deviations s of the two single times (ps), the steps r in which they are told (ps), and the variances v of the depths at
 * which the photons interact, along the line (mm²): the line ends at the mean depths, and a photon that goes deeper arrives later. What light
 * needs to its sensor is part of s. Immutable, safe for use by several threads.
 */
public final class FlightTimes {
    /** Half the speed of light in vacuum: what a picosecond of difference is on the line (mm/ps; exact, SI definition). */
    public static final double MM_PER_PS = 0.299792458 / 2;

    private static final double FWHM_PER_SD = 2 * Math.sqrt(2 * Math.log(2));

    private final DetectorSystem system;
    private final double[] varianceMm2;

    private FlightTimes(DetectorSystem system, double[] varianceMm2) {
        this.system = system;
        this.varianceMm2 = varianceMm2;
    }

    /**
     * What the readouts of a system tell.
     *
     * @param system the system
     * @return its times of flight, or null if a readout of it does not say how wide its times are spread: time_fwhm_ps is 0
     */
    public static @Nullable FlightTimes of(DetectorSystem system) {
        double[] variance = new double[system.blocks().size()];
        for (PlacedBlock block : system.blocks()) {
            Readout readout = block.kind().readout();
            if (!(readout.timeFwhmPs() > 0)) {
                return null;
            }
            double sdPs = readout.timeFwhmPs() / FWHM_PER_SD;
            double stepPs = readout.timeStepPs();
            variance[block.index()] = MM_PER_PS * MM_PER_PS * (sdPs * sdPs + stepPs * stepPs / 12);
        }
        return new FlightTimes(system, variance);
    }

    /**
     * The offset that a time difference means.
     *
     * @param differencePs t_b − t_a (ps)
     * @return distance from the middle of the line towards a (mm)
     */
    public static double offsetMm(double differencePs) {
        return MM_PER_PS * differencePs;
    }

    /**
     * Standard deviation of the offset.
     *
     * @param a one element
     * @param b the other
     * @param line their line
     * @return the standard deviation (mm), above 0
     */
    public double sdMm(int a, int b, LineOfResponse line) {
        return Math.sqrt(
                varianceMm2[system.blockIndexOf(a)] + varianceMm2[system.blockIndexOf(b)] + 0.25 * line.depthVariance);
    }

    /**
     * Least standard deviation of the offset of any pair, depths left out.
     *
     * @return the standard deviation (mm), above 0
     */
    public double leastSdMm() {
        return Math.sqrt(2 * Arrays.stream(varianceMm2).min().orElseThrow());
    }

    /**
     * Largest standard deviation of the offset of any pair, depths left out.
     *
     * @return the standard deviation (mm), above 0
     */
    public double mostSdMm() {
        return Math.sqrt(2 * Arrays.stream(varianceMm2).max().orElseThrow());
    }

    /** Tells the line of an event where the decay was. */
    void place(int a, int b, double differencePs, LineOfResponse line) {
        line.offset = offsetMm(differencePs);
        line.offsetSd = sdMm(a, b, line);
    }
}
