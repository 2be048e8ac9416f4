package org.raysheaf.io.records;

import java.nio.charset.StandardCharsets;

/**
 * Reads numbers from bytes of text, correctly rounded. A decimal number of up to 2⁵³ with a power of ten of at most 22 is exact as a product or quotient of two
 * exact doubles (Clinger 1990, PLDI, doi 10.1145/93542.93557, the fast case); all others go to the Java library. One thread.
 */
final class NumberText {
    private static final double[] POWERS = new double[23];

    static {
        double power = 1;
        for (int i = 0; i < POWERS.length; i++) {
            POWERS[i] = power;
            power *= 10; // exact up to 10²²
        }
    }

    private static final int MOST_DIGITS = 18;

    private final byte point;
    private long whole;
    private double value;

    /**
     * A reader of numbers.
     *
     * @param point the decimal point
     */
    NumberText(char point) {
        this.point = (byte) point;
    }

    /** The whole number that was read last. */
    long whole() {
        return whole;
    }

    /** The real number that was read last. */
    double value() {
        return value;
    }

    /** Reads a whole number with an optional sign; false if it is none or has more than 64 bits. */
    boolean integer(byte[] text, int start, int stop) {
        int i = start;
        boolean negative = i < stop && text[i] == '-';
        if (i < stop && (text[i] == '-' || text[i] == '+')) {
            i++;
        }
        if (i == stop) {
            return false;
        }
        long sum = 0; // negative, since −2⁶³ has no positive twin
        for (; i < stop; i++) {
            int digit = text[i] - '0';
            if (digit < 0 || digit > 9 || sum < Long.MIN_VALUE / 10) {
                return false;
            }
            sum *= 10;
            if (sum < Long.MIN_VALUE + digit) {
                return false;
            }
            sum -= digit;
        }
        if (!negative && sum == Long.MIN_VALUE) {
            return false;
        }
        whole = negative ? sum : -sum;
        return true;
    }

    /** Reads up to 16 hexadecimal digits. */
    boolean hex(byte[] text, int start, int stop) {
        int i = start;
        if (stop - i > 2 && text[i] == '0' && (text[i + 1] | 0x20) == 'x') {
            i += 2;
        }
        if (i == stop || stop - i > 16) {
            return false;
        }
        long sum = 0;
        for (; i < stop; i++) {
            int digit = text[i] < 0 ? -1 : Character.digit(text[i], 16);
            if (digit < 0) {
                return false;
            }
            sum = (sum << 4) | digit;
        }
        whole = sum;
        return true;
    }

    /** Reads a real number; {@code nan} and {@code inf} too, which the checks of later steps then see. */
    boolean real(byte[] text, int start, int stop) {
        int i = start;
        boolean negative = i < stop && text[i] == '-';
        if (i < stop && (text[i] == '-' || text[i] == '+')) {
            i++;
        }
        long digits = 0;
        int count = 0;
        int power = 0;
        boolean any = false;
        boolean exact = true;
        boolean fraction = false;
        for (; i < stop; i++) {
            int digit = text[i] - '0';
            if (digit < 0 || digit > 9) {
                if (text[i] != point || fraction) {
                    break;
                }
                fraction = true;
                continue;
            }
            any = true;
            if (count < MOST_DIGITS) {
                digits = 10 * digits + digit;
                count += digits == 0 ? 0 : 1;
                power -= fraction ? 1 : 0;
            } else {
                exact &= digit == 0;
                power += fraction ? 0 : 1;
            }
        }
        if (!any) {
            return word(text, i, stop, negative);
        }
        if (i < stop && (text[i] | 0x20) == 'e') {
            i++;
            boolean minus = i < stop && text[i] == '-';
            if (i < stop && (text[i] == '-' || text[i] == '+')) {
                i++;
            }
            int exponent = 0;
            int from = i;
            for (; i < stop && text[i] >= '0' && text[i] <= '9'; i++) {
                exponent = Math.min(100_000, 10 * exponent + text[i] - '0');
            }
            if (i == from) {
                return false;
            }
            power += minus ? -exponent : exponent;
        }
        if (i != stop) {
            return false;
        }
        if (exact && digits <= 1L << 53 && power >= -22 && power <= 22) {
            double size = power < 0 ? digits / POWERS[-power] : digits * POWERS[power];
            value = negative ? -size : size;
        } else {
            String plain = new String(text, start, stop - start, StandardCharsets.ISO_8859_1);
            value = Double.parseDouble(point == '.' ? plain : plain.replace((char) point, '.'));
        }
        return true;
    }

    private boolean word(byte[] text, int start, int stop, boolean negative) {
        if (stop - start > 8) {
            return false;
        }
        String word = new String(text, start, stop - start, StandardCharsets.ISO_8859_1);
        if (word.equalsIgnoreCase("nan")) {
            value = Double.NaN;
            return true;
        }
        if (word.equalsIgnoreCase("inf") || word.equalsIgnoreCase("infinity")) {
            value = negative ? Double.NEGATIVE_INFINITY : Double.POSITIVE_INFINITY;
            return true;
        }
        return false;
    }
}
