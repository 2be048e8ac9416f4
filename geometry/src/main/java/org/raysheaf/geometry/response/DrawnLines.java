package org.raysheaf.geometry.response;

import java.util.random.RandomGenerator;

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
 * tells apart stays at its mean, with the second-order term of ⟨1/d²⟩ if it is the depth. Then the ends are moved to where a ray of such an
 * event would end, by the blur of what is measured: near the faces of a block that blur is what shapes the sensitivity. Belongs to one thread.
 */
final class DrawnLines {
    private final ElementResponse response;
    private final double[] frames;
    private final MeasuredPoints measured;
    private final boolean several;
    private final Response[] answers = {new Response(), new Response()};
    private final EndSpread[] ends;
    private final double[] local = new double[6];
    private final double[] points = new double[6];

    DrawnLines(ElementResponse response, double[] frames, MeasuredPoints measured, boolean several) {
        this.response = response;
        this.frames = frames;
        this.measured = measured;
        this.several = several;
        this.ends = new EndSpread[] {new EndSpread(frames), new EndSpread(frames)};
    }

    /**
     * Draws a line.
     *
     * @param a one element
     * @param b the other
     * @param shares where in the laws of the six coordinates: u, v, w of a, then of b
     * @param chance draws the blur
     * @param line receives the ends, and as étendue what the line would stand for alone
     */
    void draw(int a, int b, double[] shares, RandomGenerator chance, LineOfResponse line) {
        start(a, shares, 0);
        start(b, shares, 3);
        // First the direction of the middles, then that of points drawn for it: their laws hardly change any more.
        for (int round = 0; round < 2; round++) {
            double sx = points[3] - points[0];
            double sy = points[4] - points[1];
            double sz = points[5] - points[2];
            double d = Math.sqrt(sx * sx + sy * sy + sz * sz);
            answer(a, -sx / d, -sy / d, -sz / d, 0);
            answer(b, sx / d, sy / d, sz / d, 1);
            place(a, shares, 0);
            place(b, shares, 3);
        }
        double x = points[3] - points[0];
        double y = points[4] - points[1];
        double z = points[5] - points[2];
        double square = x * x + y * y + z * z;
        double variance = fixedVariance(a, 0) + fixedVariance(b, 1);
        line.etendue = answers[0].area * answers[1].area / square * (1 + 3 * variance / square);
        blur(a, 0, chance);
        blur(b, 3, chance);
        line.ax = points[0];
        line.ay = points[1];
        line.az = points[2];
        line.bx = points[3];
        line.by = points[4];
        line.bz = points[5];
    }

    private boolean free(int element, int axis) {
        return several || measured.measures(element, axis);
    }

    private void start(int element, double[] shares, int at) {
        int f = ElementFrames.SIZE * element;
        for (int axis = 0; axis < 2; axis++) {
            local[at + axis] =
                    free(element, axis) ? (2 * shares[at + axis] - 1) * frames[f + ElementFrames.HALF + axis] : 0;
        }
        local[at + 2] = 0;
        ends[at / 3].stand(element);
        toWorld(at);
    }

    private void toWorld(int at) {
        for (int axis = 0; axis < 3; axis++) {
            points[at + axis] = ends[at / 3].world(axis, local[at], local[at + 1], local[at + 2]);
        }
    }

    private void blur(int element, int at, RandomGenerator chance) {
        for (int axis = 0; axis < 3; axis++) {
            if (measured.measures(element, axis)) {
                local[at + axis] = measured.blurred(element, axis, local[at + axis], several, chance);
            }
        }
        toWorld(at);
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
        EndSpread end = ends[at / 3];
        Response mean = answers[at / 3];
        local[at] = free(element, 0) ? end.at(0, shares[at]) : mean.u;
        local[at + 1] = free(element, 1) ? end.at(1, shares[at + 1]) : mean.v;
        local[at + 2] = free(element, 2) ? end.at(2, shares[at + 2]) : mean.w;
        toWorld(at);
    }

    private double fixedVariance(int element, int end) {
        return free(element, 2) ? 0 : answers[end].variance;
    }
}
