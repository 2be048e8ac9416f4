package org.raysheaf.io.volume;

import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

/**
 * A rotation as NIfTI-1 stores it: the unit quaternion a + b i + c j + d k with a >= 0, of which b, c and d are written.
 *
 * <p>R = [[a²+b²−c²−d², 2bc−2ad, 2bd+2ac], [2bc+2ad, a²+c²−b²−d², 2cd−2ab], [2bd−2ac, 2cd+2ab, a²+d²−b²−c²]]
 */
record Quaternion(double a, double b, double c, double d) {
    /** From the stored three; rounding may leave them a little longer than 1. */
    static Quaternion ofStored(double b, double c, double d) {
        double rest = 1 - (b * b + c * c + d * d);
        if (rest > 0) {
            return new Quaternion(Math.sqrt(rest), b, c, d);
        }
        double length = Math.sqrt(1 - rest);
        return new Quaternion(0, b / length, c / length, d / length);
    }

    /** From a pose's rotation, by whichever of the four components is largest, so that no small number is divided by. */
    static Quaternion of(Pose pose) {
        Vector3 u = pose.u();
        Vector3 v = pose.v();
        Vector3 w = pose.w();
        // Four times the squares of a, b, c, d.
        double aa = 1 + u.x() + v.y() + w.z();
        double bb = 1 + u.x() - v.y() - w.z();
        double cc = 1 - u.x() + v.y() - w.z();
        double dd = 1 - u.x() - v.y() + w.z();
        double bPart = v.z() - w.y();
        double cPart = w.x() - u.z();
        double dPart = u.y() - v.x();
        double largest = Math.max(Math.max(aa, bb), Math.max(cc, dd));
        if (aa == largest) {
            return positive(aa, bPart, cPart, dPart);
        }
        if (bb == largest) {
            return positive(bPart, bb, u.y() + v.x(), w.x() + u.z());
        }
        if (cc == largest) {
            return positive(cPart, u.y() + v.x(), cc, v.z() + w.y());
        }
        return positive(dPart, w.x() + u.z(), v.z() + w.y(), dd);
    }

    private static Quaternion positive(double a, double b, double c, double d) {
        double length = Math.sqrt(a * a + b * b + c * c + d * d) * (a < 0 ? -1 : 1);
        return new Quaternion(a / length, b / length, c / length, d / length);
    }

    Vector3 u() {
        return new Vector3(a * a + b * b - c * c - d * d, 2 * (b * c + a * d), 2 * (b * d - a * c));
    }

    Vector3 v() {
        return new Vector3(2 * (b * c - a * d), a * a + c * c - b * b - d * d, 2 * (c * d + a * b));
    }

    Vector3 w() {
        return new Vector3(2 * (b * d + a * c), 2 * (c * d - a * b), a * a + d * d - b * b - c * c);
    }
}
