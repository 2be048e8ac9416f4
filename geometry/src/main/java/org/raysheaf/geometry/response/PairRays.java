package org.raysheaf.geometry.response;

import org.raysheaf.geometry.sheaf.SheafBundle;

/**
 * The rays of a pair whose interaction points are known within its two elements, or within a blur, only: as many lines as {@link Strata} has
 * rays, of equal weight, their ends spread as {@link EndSpread} says for photons along the line of the pair. Belongs to one thread.
 */
final class PairRays {
    private final ElementResponse response;
    private final double[] frames;
    private final Strata strata;
    private final EndSpread[] ends;
    private final Response answer = new Response();
    private final int[] dealt;
    private final double[] points = new double[6];
    private int first;
    private int second;

    PairRays(ElementResponse response, double[] frames, Strata strata) {
        this.response = response;
        this.frames = frames;
        this.strata = strata;
        this.ends = new EndSpread[] {new EndSpread(frames), new EndSpread(frames)};
        this.dealt = new int[6 * strata.rays()];
    }

    /** Takes up a pair. */
    void aim(int a, int b, LineOfResponse line) {
        first = a;
        second = b;
        double length = line.lengthMm();
        double x = (line.bx - line.ax) / length;
        double y = (line.by - line.ay) / length;
        double z = (line.bz - line.az) / length;
        spread(ends[0], a, -x, -y, -z);
        spread(ends[1], b, x, y, z);
    }

    private void spread(EndSpread end, int element, double x, double y, double z) {
        int f = ElementFrames.SIZE * element;
        response.lookUp(
                element,
                ElementFrames.along(frames, f + ElementFrames.U, x, y, z),
                ElementFrames.along(frames, f + ElementFrames.V, x, y, z),
                ElementFrames.along(frames, f + ElementFrames.W, x, y, z),
                answer);
        end.set(element, answer);
    }

    /** The laws of an end of the pair in hand: 0 for a, 1 for b. */
    EndSpread end(int index) {
        return ends[index];
    }

    /** Appends the sheaf of the pair in hand. The element of the lower number leads, so that (b, a) has the rays of (a, b). */
    void append(SheafBundle out, double weight) {
        strata.deal(Math.min(first, second), Math.max(first, second), dealt);
        int swapped = first < second ? 0 : 3;
        int sheaf = out.append();
        int rays = strata.rays();
        for (int k = 0; k < rays; k++) {
            place(ends[0], 6 * k + swapped, 0);
            place(ends[1], 6 * k + 3 - swapped, 3);
            out.set(sheaf * rays + k, points[0], points[1], points[2], points[3], points[4], points[5], weight / rays);
        }
    }

    private void place(EndSpread end, int at, int to) {
        double u = end.at(0, strata, dealt[at]);
        double v = end.at(1, strata, dealt[at + 1]);
        double w = end.at(2, strata, dealt[at + 2]);
        for (int axis = 0; axis < 3; axis++) {
            points[to + axis] = end.world(axis, u, v, w);
        }
    }
}
