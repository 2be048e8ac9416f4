package org.raysheaf.io.overview;

import java.util.Arrays;
import org.jspecify.annotations.Nullable;

/**
 * A histogram whose range follows from the first values: it holds 98 of 100 of them with a margin, so that a few wild ones cannot spoil it; what lies outside
 * is counted beside it. One thread.
 */
public final class Spectrum {
    private static final int FIRST = 1 << 15;
    private static final int FIRST_OF_MANY = 1 << 9;
    private static final double MARGIN = 0.25;
    private static final double TAIL = 0.01;

    private final boolean fromZero;
    private final long[] counts;
    private final double @Nullable [] given;
    private double[] first;
    private int held;
    private double low;
    private double step;
    private long below;
    private long above;
    private long total;

    /**
     * An empty histogram.
     *
     * @param bins number of bins
     * @param fromZero whether it begins at 0; else it is symmetric about 0
     */
    public Spectrum(int bins, boolean fromZero) {
        this(bins, fromZero, FIRST);
    }

    private Spectrum(int bins, boolean fromZero, int firstValues) {
        this.counts = new long[bins];
        this.fromZero = fromZero;
        this.given = null;
        this.first = new double[firstValues];
    }

    /**
     * An empty histogram from 0, one of thousands: its range follows from fewer values.
     *
     * @param bins number of bins
     * @return the histogram
     */
    public static Spectrum oneOfMany(int bins) {
        return new Spectrum(bins, true, FIRST_OF_MANY);
    }

    /**
     * An empty histogram of a range that is known.
     *
     * @param bins number of bins
     * @param low lower edge
     * @param high upper edge, greater than the lower
     */
    public Spectrum(int bins, double low, double high) {
        this.counts = new long[bins];
        this.fromZero = false;
        this.given = new double[] {low, high};
        this.first = new double[0];
        settle();
    }

    /**
     * Counts a value; NaN counts as outside.
     *
     * @param value the value
     */
    public void add(double value) {
        total++;
        if (step == 0) {
            first[held++] = value;
            if (held == first.length) {
                settle();
            }
        } else {
            place(value);
        }
    }

    private void place(double value) {
        double bin = Math.floor((value - low) / step);
        if (bin >= 0 && bin < counts.length) {
            counts[(int) bin]++;
        } else if (bin < 0) {
            below++;
        } else {
            above++;
        }
    }

    private void settle() {
        if (step != 0) {
            return;
        }
        if (given != null) {
            low = given[0];
            step = (given[1] - given[0]) / counts.length;
        } else {
            double[] sizes = Arrays.stream(first, 0, held)
                    .map(Math::abs)
                    .filter(Double::isFinite)
                    .sorted()
                    .toArray();
            double reach = sizes.length == 0
                    ? 1
                    : sizes[(int) Math.min(sizes.length - 1L, (long) ((1 - TAIL) * sizes.length))];
            reach = reach > 0 ? Math.min(reach * (1 + MARGIN), Double.MAX_VALUE / 4) : 1;
            low = fromZero ? 0 : -reach;
            step = (reach - low) / counts.length;
        }
        for (int i = 0; i < held; i++) {
            place(first[i]);
        }
        first = new double[0];
    }

    /**
     * Lower edge.
     *
     * @return the edge
     */
    public double low() {
        settle();
        return low;
    }

    /**
     * Width of a bin.
     *
     * @return the width, greater than 0
     */
    public double step() {
        settle();
        return step;
    }

    /**
     * Counts per bin.
     *
     * @return the shared array
     */
    public long[] counts() {
        settle();
        return counts;
    }

    /**
     * All values, outside ones too.
     *
     * @return their number
     */
    public long total() {
        return total;
    }

    /**
     * Values below the lower edge.
     *
     * @return their number
     */
    public long below() {
        settle();
        return below;
    }

    /**
     * Values above the upper edge.
     *
     * @return their number
     */
    public long above() {
        settle();
        return above;
    }

    /**
     * The value that half of all lie below, by interpolation in its bin.
     *
     * @return the median, or NaN without values
     */
    public double median() {
        settle();
        double half = 0.5 * total;
        double sum = below;
        for (int i = 0; i < counts.length; i++) {
            if (sum + counts[i] >= half && counts[i] > 0) {
                return low + step * (i + (half - sum) / counts[i]);
            }
            sum += counts[i];
        }
        return total == 0 ? Double.NaN : low + step * counts.length;
    }
}
