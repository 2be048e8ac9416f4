package org.raysheaf.engine.correct;

import java.util.ArrayList;
import java.util.List;
import java.util.SplittableRandom;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.IntStream;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.KleinNishina;
import org.raysheaf.geometry.response.ElementResponse;
import org.raysheaf.geometry.response.LineOfResponse;
import org.raysheaf.geometry.response.PairLines;
import org.raysheaf.geometry.response.Response;
import org.raysheaf.geometry.response.WindowShares;

/**
 * Pairs of which one photon scattered once in the object, from an image of the activity and a map of attenuation (single-scatter simulation:
 * Watson, Newport &amp; Casey 1996; Ollinger 1996, Phys. Med. Biol. 41:153). For a pair of elements a and b,
 *
 * <pre>
 * s = Σ over points p of ΔV / 2π · A_a / R_a² · A_b / R_b² · µ_p (dσ/dΩ)(θ) / σ · ( I_a w_b(E') e^(−τ_a − τ'_b) + I_b w_a(E') e^(−τ_b − τ'_a) )
 * </pre>
 *
 * <p>with effective areas A (in the energy window, for 511 keV), distances R from p, the integral I of the activity from p to the element on
 * the side of the unscattered photon, the acceptance w of the scattered one relative to 511 keV, and attenuation along both ways, τ' at the
 * lower energy. It is sampled coarsely (some points in the object, some elements of each block) and interpolated as scatter per étendue, which
 * is smooth. Scatter twice and more, and activity outside the image, are taken in by a common scale, see {@link #scaled}. Immutable,
 * safe for use by several threads.
 */
public final class Scatter {
    /** Voxels below this share of the largest attenuation scatter too little to count. */
    private static final double DENSE = 0.1;

    private static final double TOTAL_511 = KleinNishina.totalB(KleinNishina.ELECTRON_KEV);

    private final ScatterMesh mesh;
    private final float[] perEtendue;
    private final double scale;

    private Scatter(ScatterMesh mesh, float[] perEtendue, double scale) {
        this.mesh = mesh;
        this.perEtendue = perEtendue;
        this.scale = scale;
    }

    /**
     * Estimates the scatter.
     *
     * @param response effective areas in the energy window
     * @param window acceptance at lower energies
     * @param activityBqPerMl image of the activity (Bq/mL)
     * @param muPerMm map of attenuation at 511 keV (1/mm)
     * @param points points in the object, some hundred
     * @param pool does the work
     * @return scatter of every pair
     */
    public static Scatter of(
            ElementResponse response,
            WindowShares window,
            Image activityBqPerMl,
            Image muPerMm,
            int points,
            ForkJoinPool pool) {
        DetectorSystem system = response.system();
        ScatterMesh mesh = new ScatterMesh(system);
        int[] element = mesh.sampled();
        List<double[]> places = places(muPerMm, points);
        Paths paths = new Paths(response, element, places, activityBqPerMl, muPerMm, pool);
        float[] table = new float[element.length * element.length];
        PairLines lines = new PairLines(response);
        pool.submit(() -> IntStream.range(0, element.length).parallel().forEach(i -> {
                    PairLines mine = lines.twin();
                    LineOfResponse line = new LineOfResponse();
                    for (int j = 0; j < i; j++) {
                        if (system.admits(element[i], element[j])) {
                            mine.lineAnywhere(element[i], element[j], line);
                            double scattered = paths.scatter(i, j, window);
                            double ratio = line.etendueMm2Sr() > 0 ? scattered / line.etendueMm2Sr() : 0;
                            table[i * element.length + j] = (float) ratio;
                            table[j * element.length + i] = (float) ratio;
                        }
                    }
                }))
                .join();
        return new Scatter(mesh, table, 1);
    }

    /** Points spread over the dense voxels by a stratified draw with a fixed seed: x, y, z, µ, volume. */
    private static List<double[]> places(Image mu, int points) {
        float most = 0;
        for (float value : mu.values()) {
            most = Math.max(most, value);
        }
        Grid grid = mu.grid();
        List<int[]> dense = new ArrayList<>();
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    if (mu.at(x, y, z) > DENSE * most) {
                        dense.add(new int[] {x, y, z});
                    }
                }
            }
        }
        SplittableRandom random = new SplittableRandom(5_107L);
        List<double[]> places = new ArrayList<>();
        int n = Math.min(points, dense.size());
        for (int i = 0; i < n; i++) {
            // One voxel out of every n-th part of the list, which runs through space.
            int from = (int) ((long) dense.size() * i / n);
            int to = (int) ((long) dense.size() * (i + 1) / n);
            int[] v = dense.get(from + random.nextInt(Math.max(1, to - from)));
            Vector3 p = grid.centre(
                    v[0] + random.nextDouble() - 0.5,
                    v[1] + random.nextDouble() - 0.5,
                    v[2] + random.nextDouble() - 0.5);
            double volume = (to - from) * grid.voxelVolumeMm3();
            places.add(new double[] {p.x(), p.y(), p.z(), mu.at(v[0], v[1], v[2]), volume});
        }
        return places;
    }

    /** What is known of the way between each point and each sampled element. */
    private static final class Paths {
        private final int elements;
        private final List<double[]> places;
        // For element e and point p at e · points + p: direction from the point, area / distance², attenuation,
        // activity.
        private final double[] dx;
        private final double[] dy;
        private final double[] dz;
        private final double[] seen;
        private final double[] tau;
        private final double[] activity;

        Paths(
                ElementResponse response,
                int[] element,
                List<double[]> places,
                Image activityImage,
                Image mu,
                ForkJoinPool pool) {
            this.elements = element.length;
            this.places = places;
            int size = elements * places.size();
            dx = new double[size];
            dy = new double[size];
            dz = new double[size];
            seen = new double[size];
            tau = new double[size];
            activity = new double[size];
            RaySums muSums = new RaySums(mu);
            RaySums activitySums = new RaySums(activityImage);
            pool.submit(() -> IntStream.range(0, elements)
                            .parallel()
                            .forEach(e -> fill(response, element[e], e, muSums.twin(), activitySums.twin())))
                    .join();
        }

        private void fill(ElementResponse elementResponse, int element, int e, RaySums mu, RaySums active) {
            DetectorSystem system = elementResponse.system();
            PlacedBlock block = system.blockOf(element);
            Vector3 centre = system.centre(element);
            Vector3 u = block.pose().u();
            Vector3 v = block.pose().v();
            Vector3 w = block.pose().w();
            Response found = new Response();
            for (int p = 0; p < places.size(); p++) {
                double[] place = places.get(p);
                Vector3 point = new Vector3(place[0], place[1], place[2]);
                // From the centre to the mean point of interaction for this direction.
                Vector3 end = centre;
                for (int round = 0; round < 2; round++) {
                    Vector3 d = end.minus(point).unit();
                    elementResponse.lookUp(element, u.dot(d), v.dot(d), w.dot(d), found);
                    end = centre.plus(u.times(found.u()))
                            .plus(v.times(found.v()))
                            .plus(w.times(found.w()));
                }
                Vector3 way = end.minus(point);
                Vector3 d = way.unit();
                double square = way.dot(way);
                int at = e * places.size() + p;
                dx[at] = d.x();
                dy[at] = d.y();
                dz[at] = d.z();
                // the second term of the mean of 1/distance² over the depths
                seen[at] = found.areaMm2() / square * (1 + 3 * found.varianceMm2() / square);
                tau[at] = mu.along(place[0], place[1], place[2], end.x(), end.y(), end.z());
                activity[at] = active.along(place[0], place[1], place[2], end.x(), end.y(), end.z());
            }
        }

        /** Σ over the points (Bq/mL · mm³ sr, like étendue · ∫ activity / 2π). */
        double scatter(int i, int j, WindowShares window) {
            double sum = 0;
            int n = places.size();
            for (int p = 0; p < n; p++) {
                int a = i * n + p;
                int b = j * n + p;
                if (activity[a] == 0 && activity[b] == 0) {
                    continue;
                }
                double cosine = -(dx[a] * dx[b] + dy[a] * dy[b] + dz[a] * dz[b]);
                double kept = KleinNishina.ELECTRON_KEV * KleinNishina.keptShare(KleinNishina.ELECTRON_KEV, cosine);
                double accepted = window.relativeAt(kept);
                if (accepted == 0) {
                    continue;
                }
                double more = KleinNishina.totalB(kept) / TOTAL_511;
                double[] place = places.get(p);
                double common = place[4]
                        / (2 * Math.PI)
                        * place[3]
                        * KleinNishina.perSteradianB(KleinNishina.ELECTRON_KEV, cosine)
                        / TOTAL_511
                        * seen[a]
                        * seen[b]
                        * accepted;
                sum += common
                        * (activity[a] * Math.exp(-tau[a] - more * tau[b])
                                + activity[b] * Math.exp(-tau[b] - more * tau[a]));
            }
            return sum;
        }
    }

    /**
     * Scatter of a pair for each unit of its étendue, interpolated linearly over rows and columns of both blocks.
     *
     * @param a one element
     * @param b the other
     * @return scatter per étendue (Bq/mL · mm), to be compared with ∫ activity dl / 2π
     */
    public double perEtendue(int a, int b) {
        return scale * mesh.interpolate(perEtendue, a, b);
    }

    /**
     * The same, scaled.
     *
     * @param factor what to multiply it with
     * @return scatter times the factor
     */
    public Scatter scaled(double factor) {
        return new Scatter(mesh, perEtendue, scale * factor);
    }

    /**
     * The common scale.
     *
     * @return 1, or what {@link #scaled} was given
     */
    public double scale() {
        return scale;
    }
}
