package org.raysheaf.app;

import java.util.Locale;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.RayPath;

/**
 * Which share of directions from the centre of the field of view meets crystals, by following evenly spread directions.
 *
 * @param one share for one photon, with its error, as text
 * @param both share for both photons of a pair that the system admits, with its error, as text
 */
record Coverage(String one, String both) {
    private static final int DIRECTIONS = 20_000;

    static Coverage atCentre(DetectorSystem system) {
        RayPath there = new RayPath();
        RayPath back = new RayPath();
        int one = 0;
        int both = 0;
        for (int i = 0; i < DIRECTIONS; i++) {
            // Fibonacci lattice on the sphere: equal areas, no two directions alike.
            double z = 1 - (2 * i + 1.0) / DIRECTIONS;
            double r = Math.sqrt(1 - z * z);
            double angle = i * Math.PI * (3 - Math.sqrt(5));
            double x = r * Math.cos(angle);
            double y = r * Math.sin(angle);
            system.trace(0, 0, 0, x, y, z, there);
            system.trace(0, 0, 0, -x, -y, -z, back);
            one += there.size() > 0 ? 1 : 0;
            boolean pair = there.size() > 0 && back.size() > 0 && system.admits(there.element(0), back.element(0));
            both += pair ? 1 : 0;
        }
        return new Coverage(text(one), text(both));
    }

    /** The binomial error is an upper bound: evenly spread directions do better than random ones. */
    private static String text(int hits) {
        double share = hits / (double) DIRECTIONS;
        double error = Math.sqrt(share * (1 - share) / DIRECTIONS);
        return String.format(Locale.ROOT, "%.2f ± %.2f %%", 100 * share, 100 * error);
    }
}
