package org.raysheaf.geometry.response;

import org.raysheaf.geometry.detector.BlockKind;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;

/**
 * Lines between points drawn within two elements, for systems whose rays end anywhere. The rate of a pair per activity and length is an
 * integral over both volumes,
 *
 * <pre>
 * G = ∫∫ dV₁ dV₂ κ₁(p₁) κ₂(p₂) / d²,    ∫ dV κ(p; s) = A(s)
 * </pre>
 *
 * <p>(κ: probability per length that a photon along s interacts at p, d: distance of the points), so with points drawn from κ/A every line
 * stands for A₁A₂/d² at its own direction and length. The law of points is that of {@link EndSpread}. A coordinate that no ray of an event
 * tells apart stays at its mean, with the second-order term of ⟨1/d²⟩ if it is the depth. Belongs to one thread.
 */
final class DrawnLines {
    private final ElementResponse response;
    private final double[] frames;
    private final boolean[] freeAcross;
    private final boolean[] freeInDepth;
    private final Response[] answers = {new Response(), new Response()};
    private final EndSpread[] ends;
    private final double[] points = new double[6];

    DrawnLines(ElementResponse response, double[] frames, Positions positions) {
        this.response = response;
        this.frames = frames;
        this.ends = new EndSpread[] {new EndSpread(frames), new EndSpread(frames)};
        DetectorSystem system = response.system();
        freeAcross = new boolean[system.blocks().size()];
        freeInDepth = new boolean[system.blocks().size()];
        for (PlacedBlock block : system.blocks()) {
            BlockKind kind = block.kind();
            freeAcross[block.index()] = positions.rays() > 1 || positions.measuresPoint(kind);
            freeInDepth[block.index()] = freeAcross[block.index()] || positions.measuresDepth(kind);
        }
    }

    /**
     * Draws a line.
     *
     * @param a one element
     * @param b the other
     * @param shares where in the laws of the six coordinates: u, v, w of a, then of b
     * @param line receives the ends, and as étendue what the line would stand for alone
     */
    void draw(int a, int b, double[] shares, LineOfResponse line) {
        start(a, shares, 0);
        start(b, shares, 3);
        // First the direction of the middles, then that of points drawn for it: their laws hardly change any more.
        for (int round = 0; round < 2; round++) {
            double x = points[3] - points[0];
            double y = points[4] - points[1];
            double z = points[5] - points[2];
            double d = Math.sqrt(x * x + y * y + z * z);
            answer(a, -x / d, -y / d, -z / d, 0);
            answer(b, x / d, y / d, z / d, 1);
            place(a, shares, 0);
            place(b, shares, 3);
        }
        line.ax = points[0];
        line.ay = points[1];
        line.az = points[2];
        line.bx = points[3];
        line.by = points[4];
        line.bz = points[5];
        double square = line.lengthMm() * line.lengthMm();
        double variance = fixedVariance(a, 0) + fixedVariance(b, 1);
        line.etendue = answers[0].area * answers[1].area / square * (1 + 3 * variance / square);
    }

    private void start(int element, double[] shares, int at) {
        int f = ElementFrames.SIZE * element;
        boolean free = freeAcross[response.system().blockIndexOf(element)];
        double u = free ? (2 * shares[at] - 1) * frames[f + ElementFrames.HALF] : 0;
        double v = free ? (2 * shares[at + 1] - 1) * frames[f + ElementFrames.HALF + 1] : 0;
        for (int axis = 0; axis < 3; axis++) {
            points[at + axis] =
                    frames[f + axis] + u * frames[f + ElementFrames.U + axis] + v * frames[f + ElementFrames.V + axis];
        }
    }

    private void answer(int element, double x, double y, double z, int end) {
        int f = ElementFrames.SIZE * element;
        response.lookUp(
                element,
                ElementFrames.along(frames, f + ElementFrames.U, x, y, z),
                ElementFrames.along(frames, f + ElementFrames.V, x, y, z),
                ElementFrames.along(frames, f + ElementFrames.W, x, y, z),
                answers[end]);
        ends[end].set(element, answers[end]);
    }

    private void place(int element, double[] shares, int at) {
        int block = response.system().blockIndexOf(element);
        EndSpread end = ends[at / 3];
        Response mean = answers[at / 3];
        double u = freeAcross[block] ? end.at(0, shares[at]) : mean.u;
        double v = freeAcross[block] ? end.at(1, shares[at + 1]) : mean.v;
        double w = freeInDepth[block] ? end.at(2, shares[at + 2]) : mean.w;
        for (int axis = 0; axis < 3; axis++) {
            points[at + axis] = end.world(axis, u, v, w);
        }
    }

    private double fixedVariance(int element, int end) {
        return freeInDepth[response.system().blockIndexOf(element)] ? 0 : answers[end].variance;
    }
}
