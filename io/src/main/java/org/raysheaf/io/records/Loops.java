package org.raysheaf.io.records;

import java.util.Arrays;
import java.util.function.DoubleUnaryOperator;

/** The loops that formulas are made of, one per operation and type. Results of records already set aside are not defined. */
final class Loops {
    private Loops() {}

    /** Comparisons, longer signs first so that they are recognised. */
    enum Comparison {
        EQUAL("=="),
        UNEQUAL("!="),
        AT_MOST("<="),
        AT_LEAST(">="),
        LESS("<"),
        MORE(">");

        private final String sign;

        Comparison(String sign) {
            this.sign = sign;
        }

        String sign() {
            return sign;
        }
    }

    static Column constant(Formula.Program program, long value) {
        Column column = program.temporary(true);
        Arrays.fill(column.longs(), value);
        return column;
    }

    static Column constant(Formula.Program program, double value) {
        Column column = program.temporary(false);
        Arrays.fill(column.doubles(), value);
        return column;
    }

    /** The same values as real numbers. */
    static Column real(Formula.Program program, Column of) {
        if (!of.whole()) {
            return of;
        }
        Column result = program.temporary(false);
        long[] from = of.longs();
        double[] to = result.doubles();
        program.add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                to[i] = from[i];
            }
        });
        return result;
    }

    static Column arithmetic(Formula.Program program, Column left, Column right, char operator) {
        return left.whole() && right.whole()
                ? wholeArithmetic(program, left, right, operator)
                : realArithmetic(program, real(program, left), real(program, right), operator);
    }

    private static Column realArithmetic(Formula.Program program, Column left, Column right, char operator) {
        Column result = program.temporary(false);
        double[] a = left.doubles();
        double[] b = right.doubles();
        double[] to = result.doubles();
        program.add(
                switch (operator) {
                    case '+' ->
                        (size, fates) -> {
                            for (int i = 0; i < size; i++) {
                                to[i] = a[i] + b[i];
                            }
                        };
                    case '-' ->
                        (size, fates) -> {
                            for (int i = 0; i < size; i++) {
                                to[i] = a[i] - b[i];
                            }
                        };
                    case '*' ->
                        (size, fates) -> {
                            for (int i = 0; i < size; i++) {
                                to[i] = a[i] * b[i];
                            }
                        };
                    default ->
                        (size, fates) -> {
                            for (int i = 0; i < size; i++) {
                                to[i] = a[i] / b[i];
                            }
                        };
                });
        return result;
    }

    private static Column wholeArithmetic(Formula.Program program, Column left, Column right, char operator) {
        Column result = program.temporary(true);
        long[] a = left.longs();
        long[] b = right.longs();
        long[] to = result.longs();
        int overflow = program.reason("whole numbers too large in a formula");
        program.add(
                switch (operator) {
                    case '+' ->
                        (size, fates) -> {
                            for (int i = 0; i < size; i++) {
                                to[i] = a[i] + b[i];
                                // An overflow has happened if both terms have the sign that the sum has not.
                                if (((a[i] ^ to[i]) & (b[i] ^ to[i])) < 0 && fates[i] == 0) {
                                    fates[i] = overflow;
                                }
                            }
                        };
                    case '-' ->
                        (size, fates) -> {
                            for (int i = 0; i < size; i++) {
                                to[i] = a[i] - b[i];
                                if (((a[i] ^ b[i]) & (a[i] ^ to[i])) < 0 && fates[i] == 0) {
                                    fates[i] = overflow;
                                }
                            }
                        };
                    default ->
                        (size, fates) -> {
                            for (int i = 0; i < size; i++) {
                                to[i] = a[i] * b[i];
                                // The high half of the product must be nothing but the sign of the low half.
                                if (Math.multiplyHigh(a[i], b[i]) != to[i] >> 63 && fates[i] == 0) {
                                    fates[i] = overflow;
                                }
                            }
                        };
                });
        return result;
    }

    static Column floorDivision(Formula.Program program, Column left, Column right) {
        if (!left.whole() || !right.whole()) {
            Column quotient = arithmetic(program, real(program, left), real(program, right), '/');
            return function(program, quotient, Math::floor);
        }
        Column result = program.temporary(true);
        long[] a = left.longs();
        long[] b = right.longs();
        long[] to = result.longs();
        int zero = program.reason("division by 0 in a formula");
        int overflow = program.reason("whole numbers too large in a formula");
        program.add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                if (b[i] == 0 || (a[i] == Long.MIN_VALUE && b[i] == -1)) {
                    fates[i] = fates[i] != 0 ? fates[i] : b[i] == 0 ? zero : overflow;
                } else {
                    to[i] = Math.floorDiv(a[i], b[i]);
                }
            }
        });
        return result;
    }

    static Column modulo(Formula.Program program, Column left, Column right) {
        if (left.whole() && right.whole()) {
            Column result = program.temporary(true);
            long[] a = left.longs();
            long[] b = right.longs();
            long[] to = result.longs();
            int zero = program.reason("division by 0 in a formula");
            program.add((size, fates) -> {
                for (int i = 0; i < size; i++) {
                    if (b[i] == 0) {
                        fates[i] = fates[i] != 0 ? fates[i] : zero;
                    } else {
                        to[i] = Math.floorMod(a[i], b[i]);
                    }
                }
            });
            return result;
        }
        double[] a = real(program, left).doubles();
        double[] b = real(program, right).doubles();
        Column result = program.temporary(false);
        double[] to = result.doubles();
        program.add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                to[i] = a[i] - b[i] * Math.floor(a[i] / b[i]);
            }
        });
        return result;
    }

    static Column function(Formula.Program program, Column of, DoubleUnaryOperator function) {
        double[] from = real(program, of).doubles();
        Column result = program.temporary(false);
        double[] to = result.doubles();
        program.add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                to[i] = function.applyAsDouble(from[i]);
            }
        });
        return result;
    }

    /** Whole numbers from real ones by a way of rounding. */
    static Column toWhole(Formula.Program program, Column of, DoubleUnaryOperator rounding) {
        if (of.whole()) {
            return of;
        }
        double[] from = of.doubles();
        Column result = program.temporary(true);
        long[] to = result.longs();
        int impossible = program.reason("no whole number of 64 bits in a formula");
        program.add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                double rounded = rounding.applyAsDouble(from[i]);
                if (!(Math.abs(rounded) < 0x1p63) && fates[i] == 0) { // also if it is NaN
                    fates[i] = impossible;
                }
                to[i] = (long) rounded;
            }
        });
        return result;
    }

    /** The larger (or smaller) of two values. */
    static Column largest(Formula.Program program, Column left, Column right, boolean larger) {
        boolean whole = left.whole() && right.whole();
        Column result = program.temporary(whole);
        if (whole) {
            long[] a = left.longs();
            long[] b = right.longs();
            long[] to = result.longs();
            program.add((size, fates) -> {
                for (int i = 0; i < size; i++) {
                    to[i] = larger ? Math.max(a[i], b[i]) : Math.min(a[i], b[i]);
                }
            });
            return result;
        }
        double[] a = real(program, left).doubles();
        double[] b = real(program, right).doubles();
        double[] to = result.doubles();
        program.add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                to[i] = larger ? Math.max(a[i], b[i]) : Math.min(a[i], b[i]);
            }
        });
        return result;
    }

    static Column choose(Formula.Program program, Column condition, Column then, Column otherwise) {
        long[] chosen = truth(program, condition).longs();
        boolean whole = then.whole() && otherwise.whole();
        Column result = program.temporary(whole);
        if (whole) {
            long[] a = then.longs();
            long[] b = otherwise.longs();
            long[] to = result.longs();
            program.add((size, fates) -> {
                for (int i = 0; i < size; i++) {
                    to[i] = chosen[i] != 0 ? a[i] : b[i];
                }
            });
            return result;
        }
        double[] a = real(program, then).doubles();
        double[] b = real(program, otherwise).doubles();
        double[] to = result.doubles();
        program.add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                to[i] = chosen[i] != 0 ? a[i] : b[i];
            }
        });
        return result;
    }

    static Column bits(Formula.Program program, Column of, int low, int count) {
        Column result = program.temporary(true);
        long[] from = of.longs();
        long[] to = result.longs();
        long mask = count == 64 ? -1 : (1L << count) - 1;
        program.add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                to[i] = (from[i] >>> low) & mask;
            }
        });
        return result;
    }

    static Column compare(Formula.Program program, Column left, Column right, Comparison comparison) {
        Column result = program.temporary(true);
        long[] to = result.longs();
        if (left.whole() && right.whole()) {
            long[] a = left.longs();
            long[] b = right.longs();
            program.add((size, fates) -> {
                for (int i = 0; i < size; i++) {
                    to[i] = holds(Long.compare(a[i], b[i]), comparison) ? 1 : 0;
                }
            });
            return result;
        }
        double[] a = real(program, left).doubles();
        double[] b = real(program, right).doubles();
        program.add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                boolean ordered = a[i] < b[i] || a[i] > b[i] || a[i] == b[i];
                int order = a[i] < b[i] ? -1 : a[i] > b[i] ? 1 : 0; // unlike Double.compare: −0 is 0
                to[i] = (ordered ? holds(order, comparison) : comparison == Comparison.UNEQUAL) ? 1 : 0;
            }
        });
        return result;
    }

    private static boolean holds(int order, Comparison comparison) {
        return switch (comparison) {
            case EQUAL -> order == 0;
            case UNEQUAL -> order != 0;
            case AT_MOST -> order <= 0;
            case AT_LEAST -> order >= 0;
            case LESS -> order < 0;
            case MORE -> order > 0;
        };
    }

    static Column logic(Formula.Program program, Column left, Column right, boolean both) {
        long[] a = truth(program, left).longs();
        long[] b = truth(program, right).longs();
        Column result = program.temporary(true);
        long[] to = result.longs();
        program.add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                to[i] = (both ? a[i] != 0 && b[i] != 0 : a[i] != 0 || b[i] != 0) ? 1 : 0;
            }
        });
        return result;
    }

    /** Whole numbers that are not 0 where the value is not 0. */
    static Column truth(Formula.Program program, Column of) {
        return of.whole() ? of : compare(program, of, constant(program, 0.0), Comparison.UNEQUAL);
    }
}
