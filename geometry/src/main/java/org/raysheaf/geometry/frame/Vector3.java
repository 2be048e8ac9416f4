package org.raysheaf.geometry.frame;

/**
 * A point or a displacement in three dimensions. One type serves both, because the code that uses it is short-lived geometry at
 * set-up time; hot loops work on plain doubles and arrays.
 *
 * @param x first coordinate (mm, or dimensionless for a direction)
 * @param y second coordinate
 * @param z third coordinate
 */
public record Vector3(double x, double y, double z) {
    /** The origin. */
    public static final Vector3 ZERO = new Vector3(0, 0, 0);

    /** Unit vector along +x. */
    public static final Vector3 X = new Vector3(1, 0, 0);

    /** Unit vector along +y. */
    public static final Vector3 Y = new Vector3(0, 1, 0);

    /** Unit vector along +z. */
    public static final Vector3 Z = new Vector3(0, 0, 1);

    /**
     * Sum.
     *
     * @param other the vector to add
     * @return this + other
     */
    public Vector3 plus(Vector3 other) {
        return new Vector3(x + other.x, y + other.y, z + other.z);
    }

    /**
     * Difference.
     *
     * @param other the vector to subtract
     * @return this − other
     */
    public Vector3 minus(Vector3 other) {
        return new Vector3(x - other.x, y - other.y, z - other.z);
    }

    /**
     * Scaled copy.
     *
     * @param factor the factor
     * @return factor · this
     */
    public Vector3 times(double factor) {
        return new Vector3(factor * x, factor * y, factor * z);
    }

    /**
     * Scalar product.
     *
     * @param other the other vector
     * @return this · other
     */
    public double dot(Vector3 other) {
        return x * other.x + y * other.y + z * other.z;
    }

    /**
     * Vector product.
     *
     * @param other the right-hand factor
     * @return this × other
     */
    public Vector3 cross(Vector3 other) {
        return new Vector3(y * other.z - z * other.y, z * other.x - x * other.z, x * other.y - y * other.x);
    }

    /**
     * Euclidean length.
     *
     * @return the length, in the unit of the coordinates
     */
    public double norm() {
        return Math.sqrt(dot(this));
    }

    /**
     * Unit vector of the same direction.
     *
     * @return this divided by its length
     * @throws IllegalArgumentException if the length is 0 or not finite
     */
    public Vector3 unit() {
        double length = norm();
        if (!(length > 0) || !Double.isFinite(length)) {
            throw new IllegalArgumentException("a direction needs a finite length > 0: " + this);
        }
        return times(1 / length);
    }
}
