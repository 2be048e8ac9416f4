package org.raysheaf.geometry.response;

import java.util.Arrays;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.ParallelRays;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.detector.RayPath;
import org.raysheaf.geometry.frame.Vector3;

/**
 * The response of one crystal to one direction, by quadrature. Every photon that can interact in a box-shaped crystal enters it through one of
 * the (at most three) faces that look toward the source, so
 *
 * <pre>
 * area = Σ_faces ∫ dS |n·s| exp(−τ(P)) (1 − exp(−ℓ(P)/λ)),
 * </pre>
 *
 * with τ the optical depth of all crystals, in all blocks, between the source and the entry point P, ℓ the chord from P through the crystal, and
 * λ its attenuation length (0: perfect absorber). The mean interaction point and its variance along s are moments of the same integrand. The
 * source is taken to lie before the point of the line that is nearest the origin: matter behind that point is not in the photon's way.
 *
 * <p>Faces are cut where the integrand has kinks (where the shadow of the next crystal's front edge falls, once per lattice period) and each
 * panel is integrated by Gauss–Legendre quadrature. Not safe for use by several threads: it owns a ray path.
 */
public final class ResponseIntegral {
    /** Cuts in depth for shadows of the crystals upstream; those beyond are faint. */
    private static final int MOST_CUTS = 8;

    /** Below this cosine a face is seen edge-on and lets nothing in. */
    private static final double EDGE_ON = 1e-9;

    private final DetectorSystem system;
    private final RayPath path = new RayPath();
    private final QuadratureRule rule;
    private final int panelsForAbsorber;
    private ParallelRays rays;

    // The crystal and direction in hand; set by evaluate().
    private int element;
    private double lambda;
    private boolean front;
    private final double[] half = new double[3];
    private final double[] direction = new double[3];
    private Vector3 origin = Vector3.ZERO;
    private Vector3 axisU = Vector3.X;
    private Vector3 axisV = Vector3.Y;
    private Vector3 axisW = Vector3.Z;
    private Vector3 flight = Vector3.Z;
    // Moments of the integrand: total, three coordinates, position along s, its square.
    private double m0;
    private double mu;
    private double mv;
    private double mw;
    private double m1;
    private double m2;

    /**
     * An integral at the accuracy that tables are made with (about 0.05 %).
     *
     * @param system the system whose crystals are asked about
     */
    public ResponseIntegral(DetectorSystem system) {
        this(system, 1);
    }

    /**
     * An integral with a chosen number of sampling points.
     *
     * @param system the system whose crystals are asked about
     * @param refinement factor by which every panel is sampled more densely in each dimension, at least 1
     */
    public ResponseIntegral(DetectorSystem system, int refinement) {
        this.system = system;
        this.rule = QuadratureRule.gaussLegendre(2 + 2 * refinement);
        this.panelsForAbsorber = 4 * refinement;
        this.rays = system.parallelRays(0, 0, 0, 0, 0, 1, 0);
    }

    /**
     * Computes the response.
     *
     * @param elementNumber the crystal, by its number in the system
     * @param su direction of flight in the block's frame, along u
     * @param sv along v
     * @param sw along w; the three make a unit vector
     * @param out receives the response
     */
    public void evaluate(int elementNumber, double su, double sv, double sw, Response out) {
        begin(elementNumber, su, sv, sw);
        for (int face = 0; face < 3; face++) {
            if (Math.abs(direction[face]) > EDGE_ON) {
                integrateFace(face);
            }
        }
        out.area = m0;
        boolean seen = m0 > 0;
        out.u = seen ? mu / m0 : 0;
        out.v = seen ? mv / m0 : 0;
        out.w = seen ? mw / m0 : 0;
        out.variance = seen ? Math.max(0, m2 / m0 - (m1 / m0) * (m1 / m0) - acrossVariance()) : 0;
    }

    /** Variance along the flight that a slanting front face alone would give. */
    private double acrossVariance() {
        double u = direction[0] * half[0];
        double v = direction[1] * half[1];
        return (u * u + v * v) / 3;
    }

    private void begin(int elementNumber, double su, double sv, double sw) {
        element = elementNumber;
        PlacedBlock block = system.blockOf(element);
        lambda = block.material().meanFreePathMm();
        Vector3 size = system.size(element);
        front = block.kind().lattice().layer(element - block.firstElement()) == 0;
        half[0] = 0.5 * size.x();
        half[1] = 0.5 * size.y();
        half[2] = 0.5 * size.z();
        direction[0] = su;
        direction[1] = sv;
        direction[2] = sw;
        origin = system.centre(element);
        axisU = block.pose().u();
        axisV = block.pose().v();
        axisW = block.pose().w();
        flight = block.pose().turn(new Vector3(su, sv, sw));
        double back = Math.max(0, origin.dot(flight));
        Vector3 start = origin.minus(flight.times(back));
        rays = system.parallelRays(
                start.x(), start.y(), start.z(), flight.x(), flight.y(), flight.z(), 0.5 * size.norm());
        m0 = 0;
        mu = 0;
        mv = 0;
        mw = 0;
        m1 = 0;
        m2 = 0;
    }

    /** Integrates over the face that looks toward the source along one axis. */
    private void integrateFace(int face) {
        int first = face == 0 ? 1 : 0;
        int second = face == 2 ? 1 : 2;
        double[] firstCuts = cuts(face, first);
        double[] secondCuts = cuts(face, second);
        double cosine = Math.abs(direction[face]);
        // Nothing can stand before the front of a block that no other block comes near.
        boolean open = face == 2 && direction[2] > 0 && front && rays.blocks() == 1;
        double[] p = new double[3];
        p[face] = direction[face] > 0 ? -half[face] : half[face];
        for (int i = 1; i < firstCuts.length; i++) {
            double firstHalf = 0.5 * (firstCuts[i] - firstCuts[i - 1]);
            for (int j = 1; j < secondCuts.length; j++) {
                double secondHalf = 0.5 * (secondCuts[j] - secondCuts[j - 1]);
                for (int a = 0; a < rule.size(); a++) {
                    p[first] = firstCuts[i - 1] + firstHalf * (1 + rule.node(a));
                    for (int b = 0; b < rule.size(); b++) {
                        p[second] = secondCuts[j - 1] + secondHalf * (1 + rule.node(b));
                        double arrives = open ? 1 : transmissionTo(p[0], p[1], p[2]);
                        addRay(p, arrives, cosine * firstHalf * secondHalf * rule.weight(a) * rule.weight(b));
                    }
                }
            }
        }
    }

    /**
     * Where to cut a face along one of its axes: where the far end of the chord moves from one face to another, and, in depth, where the shadow
     * of the crystals upstream begins (gap / slope below the front, then once per lattice period).
     */
    private double[] cuts(int face, int axis) {
        double[] cuts = new double[MOST_CUTS + 2 + panelsForAbsorber];
        int n = 0;
        cuts[n++] = -half[axis];
        cuts[n++] = half[axis];
        double drift = 2 * half[face] * Math.abs(direction[axis] / direction[face]);
        n = addCut(cuts, n, axis, direction[axis] > 0 ? half[axis] - drift : drift - half[axis]);
        if (axis == 2 && direction[2] > EDGE_ON) {
            n = addShadowCuts(cuts, n, face);
        }
        for (int k = 1; lambda == 0 && k < panelsForAbsorber; k++) {
            n = addCut(cuts, n, axis, half[axis] * (2.0 * k / panelsForAbsorber - 1));
        }
        Arrays.sort(cuts, 0, n);
        return Arrays.copyOf(cuts, n);
    }

    private int addShadowCuts(double[] cuts, int count, int face) {
        int n = count;
        PlacedBlock block = system.blockOf(element);
        CrystalBlock kind = block.kind().lattice();
        double pitch = face == 0 ? kind.pitchMm().x() : kind.pitchMm().y();
        double slope = Math.abs(direction[face]) / direction[2];
        double front = -half[2]
                - kind.layer(element - block.firstElement()) * kind.pitchMm().z();
        for (int k = 0; k < MOST_CUTS; k++) {
            n = addCut(cuts, n, 2, front + ((k + 1) * pitch - 2 * half[face]) / slope);
        }
        return n;
    }

    private int addCut(double[] cuts, int count, int axis, double at) {
        boolean inside = Math.abs(at) < half[axis] * (1 - 1e-9);
        if (inside) {
            cuts[count] = at;
        }
        return inside ? count + 1 : count;
    }

    /** One ray that enters the crystal at a point of its surface, given from the crystal's centre. */
    private void addRay(double[] p, double arrives, double weight) {
        double pu = p[0];
        double pv = p[1];
        double pw = p[2];
        if (!(arrives > 0)) {
            return;
        }
        double chord = Math.min(exit(pu, 0), Math.min(exit(pv, 1), exit(pw, 2)));
        double stopped = 1;
        double mean = 0;
        double meanSquare = 0;
        if (lambda > 0) {
            double x = chord / lambda;
            double through = Math.exp(-x);
            stopped = -Math.expm1(-x);
            if (!(stopped > 0)) {
                return;
            }
            // Moments of the truncated exponential law of depth.
            mean = lambda - chord * through / stopped;
            meanSquare = 2 * lambda * mean - chord * chord * through / stopped;
        }
        double share = weight * arrives * stopped;
        double entry = pu * direction[0] + pv * direction[1] + pw * direction[2];
        m0 += share;
        mu += share * (pu + mean * direction[0]);
        mv += share * (pv + mean * direction[1]);
        mw += share * (pw + mean * direction[2]);
        m1 += share * (entry + mean);
        m2 += share * (entry * entry + 2 * entry * mean + meanSquare);
    }

    /** Distance to the far face along one axis. */
    private double exit(double p, int axis) {
        double s = direction[axis];
        if (Math.abs(s) < EDGE_ON) {
            return Double.POSITIVE_INFINITY;
        }
        return ((s > 0 ? half[axis] : -half[axis]) - p) / s;
    }

    /** Probability that a photon reaches an entry point, past every crystal before it. */
    private double transmissionTo(double pu, double pv, double pw) {
        double x = origin.x() + pu * axisU.x() + pv * axisV.x() + pw * axisW.x();
        double y = origin.y() + pu * axisU.y() + pv * axisV.y() + pw * axisW.y();
        double z = origin.z() + pu * axisU.z() + pv * axisV.z() + pw * axisW.z();
        double distance = x * flight.x() + y * flight.y() + z * flight.z();
        if (!(distance > 0)) {
            return 1;
        }
        rays.trace(x - distance * flight.x(), y - distance * flight.y(), z - distance * flight.z(), distance, path);
        double depth = 0;
        for (int i = 0; i < path.size() && path.enter(i) < distance; i++) {
            if (path.element(i) != element) {
                double length = Math.min(path.leave(i), distance) - path.enter(i);
                depth += length / path.attenuationLength(i);
            }
        }
        return Math.exp(-depth);
    }
}
