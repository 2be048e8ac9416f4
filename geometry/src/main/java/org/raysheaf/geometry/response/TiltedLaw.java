package org.raysheaf.geometry.response;

/**
 * The law of a coordinate on [0, 1] of which only the mean is known: density ∝ exp(−κ t), which of all laws with that mean says least
 * beside it (it has the largest entropy). Along the depth of a crystal it is the truncated exponential of attenuation; across a crystal whose
 * mean interaction point is its middle it is even. κ follows from the mean m by
 *
 * <pre>
 * m = 1/κ − 1/(exp(κ) − 1)    ⇔    κ = 2 L⁻¹(1 − 2m),    L(y) = coth y − 1/y,
 * </pre>
 *
 * with the approximation of L⁻¹ by Cohen (Rheologica Acta 30 (1991) 270; from memory) and a Newton step.
 */
final class TiltedLaw {
    /** A mean nearer to an end than this share is taken for this: a perfect absorber's law has no width. */
    private static final double NARROWEST = 1e-6;

    /** Below this tilt the quantile's expansion in κ is right to 0.0005 of the interval. */
    private static final double SLIGHT = 0.2;

    private TiltedLaw() {}

    /** κ of the law with a mean. */
    static double tilt(double mean) {
        double y = 1 - 2 * Math.max(NARROWEST, Math.min(1 - NARROWEST, mean));
        double tilt = 2 * y * (3 - y * y) / (1 - y * y);
        if (Math.abs(tilt) < SLIGHT) {
            return tilt;
        }
        double size = Math.abs(tilt);
        double grown = Math.expm1(size);
        double found = 1 / size - 1 / grown;
        double slope = -1 / (size * size) + (grown + 1) / (grown * grown);
        if (!(grown < 1e100)) {
            found = 1 / size;
            slope = -found * found;
        }
        double wanted = 0.5 * (1 - Math.abs(y));
        return Math.copySign(size + (wanted - found) / slope, tilt);
    }

    /** The point below which a share of the law lies. */
    static double quantile(double tilt, double share) {
        if (Math.abs(tilt) < SLIGHT) {
            return share - 0.5 * tilt * share * (1 - share);
        }
        return tilt > 0 ? above(tilt, share) : 1 - above(-tilt, 1 - share);
    }

    private static double above(double tilt, double share) {
        return -Math.log1p(share * Math.expm1(-tilt)) / tilt;
    }
}
