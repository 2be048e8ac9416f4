package org.raysheaf.geometry.phantom;

/**
 * A number with its uncertainty.
 *
 * @param value the number
 * @param standardError its standard error in the same unit; 0 where the value is exact
 */
public record Estimate(double value, double standardError) {
    /**
     * A number known exactly.
     *
     * @param value the number
     * @return the estimate without error
     */
    public static Estimate exactly(double value) {
        return new Estimate(value, 0);
    }

    /**
     * Whether the number is known exactly.
     *
     * @return true if the standard error is 0
     */
    public boolean exact() {
        return standardError == 0;
    }

    /**
     * A multiple.
     *
     * @param factor the factor
     * @return factor · this
     */
    public Estimate times(double factor) {
        return new Estimate(factor * value, Math.abs(factor) * standardError);
    }

    /**
     * A sum of independent estimates.
     *
     * @param other the other estimate
     * @return values added, errors added in squares
     */
    public Estimate plus(Estimate other) {
        return new Estimate(value + other.value, Math.hypot(standardError, other.standardError));
    }
}
