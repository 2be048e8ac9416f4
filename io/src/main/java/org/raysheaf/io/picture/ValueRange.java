package org.raysheaf.io.picture;

import org.raysheaf.geometry.frame.Image;

/**
 * What the values of an image span, and what part of it the colours show: from 0, or the smallest value if that is negative, to the
 * largest value, or 0 if that is negative.
 *
 * @param smallest the smallest value
 * @param largest the largest value
 * @param low the value of the first colour
 * @param high the value of the last colour, greater than low
 */
record ValueRange(double smallest, double largest, double low, double high) {
    static ValueRange of(Image image) {
        double smallest = Double.POSITIVE_INFINITY;
        double largest = Double.NEGATIVE_INFINITY;
        for (float value : image.values()) {
            if (!Float.isFinite(value)) {
                throw new IllegalArgumentException("a picture needs finite values: found " + value);
            }
            smallest = Math.min(smallest, value);
            largest = Math.max(largest, value);
        }
        double low = Math.min(0, smallest);
        double high = Math.max(0, largest);
        return new ValueRange(smallest, largest, low, high > low ? high : low + 1);
    }

    double fraction(double value) {
        return (value - low) / (high - low);
    }
}
