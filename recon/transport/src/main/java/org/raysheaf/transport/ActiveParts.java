package org.raysheaf.transport;

import java.util.List;
import java.util.stream.IntStream;
import org.apache.commons.rng.UniformRandomProvider;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomPart;
import org.raysheaf.geometry.solid.Placed;

/**
 * Where decays happen. A part is chosen in proportion to concentration · volume of its whole solid, then a point in
 * that solid, and the point is dropped if a later part fills it. Candidates therefore come at the rate of all solids as
 * if none were replaced, and what is left has exactly the density that the phantom describes, without any volume of an
 * overlap being known. Immutable.
 */
final class ActiveParts {
    private static final double MM3_PER_ML = 1000;

    private final Phantom phantom;
    private final int[] part;
    private final Placed[] solid;
    private final double[] activityUpTo;

    ActiveParts(Phantom phantom) {
        this.phantom = phantom;
        List<PhantomPart> parts = phantom.parts();
        part = IntStream.range(0, parts.size())
                .filter(i -> parts.get(i).concentrationBqPerMl() > 0)
                .toArray();
        solid = new Placed[part.length];
        activityUpTo = new double[part.length];
        double sum = 0;
        for (int i = 0; i < part.length; i++) {
            solid[i] = phantom.solid(part[i]);
            sum += parts.get(part[i]).concentrationBqPerMl() / MM3_PER_ML * solid[i].volumeMm3();
            activityUpTo[i] = sum;
        }
    }

    /** Activity of all candidates (Bq): that of the phantom, plus what later parts replace. */
    double candidateBq() {
        return part.length == 0 ? 0 : activityUpTo[part.length - 1];
    }

    /**
     * Draws a candidate.
     *
     * @param random the stream to draw from
     * @param point receives the place of the decay (mm)
     * @return whether it is one: false if a later part fills the point
     */
    boolean draw(UniformRandomProvider random, double[] point) {
        double u = random.nextDouble() * candidateBq();
        int i = 0;
        while (u >= activityUpTo[i] && i < part.length - 1) {
            i++;
        }
        solid[i].pick(random::nextDouble, point);
        return !replaced(part[i], point);
    }

    private boolean replaced(int by, double[] point) {
        for (int later = phantom.parts().size() - 1; later > by; later--) {
            if (phantom.solid(later).contains(point[0], point[1], point[2])) {
                return true;
            }
        }
        return false;
    }
}
