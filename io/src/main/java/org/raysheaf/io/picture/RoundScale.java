package org.raysheaf.io.picture;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;

/** Round numbers for bars and ticks: 1, 2 or 5 times a power of ten. */
final class RoundScale {
    private static final String SUPERSCRIPTS = "⁰¹²³⁴⁵⁶⁷⁸⁹";

    private RoundScale() {}

    /** The largest round number that is at most as large as a positive one. */
    static double atMost(double limit) {
        double power = Math.pow(10, Math.floor(Math.log10(limit)));
        for (double factor : new double[] {10, 5, 2}) {
            if (factor * power <= limit * (1 + 1e-9)) {
                return factor * power;
            }
        }
        return power;
    }

    /** Round positions within a range, about as many as wanted. */
    static List<Double> ticks(double low, double high, int wanted) {
        double step = atMost((high - low) / wanted);
        List<Double> ticks = new ArrayList<>();
        double slack = 1e-9 * (high - low);
        for (double i = Math.ceil((low - slack) / step); i * step <= high + slack; i++) {
            ticks.add(i * step + 0.0); // + 0 against −0
        }
        return ticks;
    }

    /** A number in few signs, exact to about four digits. */
    static String text(double value) {
        double size = Math.abs(value);
        if (size == 0) {
            return "0";
        }
        int exponent = (int) Math.floor(Math.log10(size) + 1e-12);
        if (exponent < -3 || exponent > 5) {
            double mantissa = value / Math.pow(10, exponent);
            return trimmed(mantissa, 3) + "×10" + superscript(exponent);
        }
        return trimmed(value, Math.max(0, 3 - exponent));
    }

    private static String trimmed(double value, int decimals) {
        String text = String.format(Locale.ROOT, "%." + decimals + "f", value);
        if (text.contains(".")) {
            text = text.replaceAll("0+$", "").replaceAll("\\.$", "");
        }
        return text.equals("-0") ? "0" : text.replace('-', '−');
    }

    private static String superscript(int exponent) {
        StringBuilder text = new StringBuilder(exponent < 0 ? "⁻" : "");
        String.valueOf(Math.abs(exponent)).chars().forEach(c -> text.append(SUPERSCRIPTS.charAt(c - '0')));
        return text.toString();
    }
}
