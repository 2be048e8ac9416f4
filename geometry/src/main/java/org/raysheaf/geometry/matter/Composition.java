package org.raysheaf.geometry.matter;

import java.util.Collections;
import java.util.Map;
import java.util.TreeMap;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/** Which elements a material consists of, as mass fractions that add up to 1. */
final class Composition {
    private static final Pattern FORMULA = Pattern.compile("(?:[A-Z][a-z]?(?:[0-9]+(?:\\.[0-9]+)?)?)+");
    private static final Pattern TERM = Pattern.compile("([A-Z][a-z]?)([0-9]+(?:\\.[0-9]+)?)?");

    /** Departure of a sum of fractions from 1 that is taken for rounding. */
    private static final double ROUNDING = 2e-3;

    private Composition() {}

    /**
     * From a chemical formula: symbols with counts, which may be broken, without brackets.
     *
     * @throws IllegalArgumentException that says what is wrong with it
     */
    static Map<String, Double> ofFormula(String formula) {
        if (!FORMULA.matcher(formula).matches()) {
            throw new IllegalArgumentException(
                    "expected a formula like Lu1.8Y0.2SiO5, without brackets, found " + formula);
        }
        Map<String, Double> masses = new TreeMap<>();
        for (Matcher term = TERM.matcher(formula); term.find(); ) {
            String symbol = known(term.group(1));
            double count = term.group(2) == null ? 1 : Double.parseDouble(term.group(2));
            masses.merge(symbol, count * CrossSections.atomicWeight(symbol), Double::sum);
        }
        return normalised(masses);
    }

    /**
     * From mass fractions that add up to 1 within rounding.
     *
     * @throws IllegalArgumentException that says what is wrong with them
     */
    static Map<String, Double> ofFractions(Map<String, Double> fractions) {
        Map<String, Double> masses = new TreeMap<>();
        double sum = 0;
        for (Map.Entry<String, Double> entry : fractions.entrySet()) {
            double fraction = entry.getValue();
            if (!(fraction >= 0 && fraction <= 1)) {
                throw new IllegalArgumentException(
                        "expected fractions from 0 to 1, found " + fraction + " of " + entry.getKey());
            }
            masses.put(known(entry.getKey()), fraction);
            sum += fraction;
        }
        if (!(Math.abs(sum - 1) <= ROUNDING)) {
            throw new IllegalArgumentException("expected fractions that add up to 1, found a sum of " + sum);
        }
        return normalised(masses);
    }

    private static String known(String symbol) {
        if (!CrossSections.symbols().contains(symbol)) {
            throw new IllegalArgumentException("expected elements with known cross sections ("
                    + String.join(" ", CrossSections.symbols()) + "), found " + symbol);
        }
        return symbol;
    }

    private static Map<String, Double> normalised(Map<String, Double> masses) {
        double sum = masses.values().stream().mapToDouble(Double::doubleValue).sum();
        if (!(sum > 0)) {
            throw new IllegalArgumentException("expected at least one element, found none");
        }
        masses.replaceAll((symbol, mass) -> mass / sum);
        return Collections.unmodifiableMap(masses);
    }
}
