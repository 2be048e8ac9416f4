package org.raysheaf.engine.correct;

import java.util.ArrayList;
import java.util.List;
import java.util.SplittableRandom;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.KleinNishina;
import org.raysheaf.geometry.response.ElementResponse;
import org.raysheaf.geometry.response.FlightTimes;
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
 * is smooth. With {@link FlightTimes} it is told apart by offset as well: a decay at the distance l from p on the way to a has the true offset
 * (R_b − R_a)/2 + l, which the times blur. Scatter twice and more, and activity outside the image, are taken in by a common scale, see {@link #scaled}. Immutable,
 * safe for use by several threads.
 */
public final class Scatter {
    /** Voxels below this share of the largest attenuation scatter too little to count. */
    private static final double DENSE = 0.1;

    private static final double TOTAL_511 = KleinNishina.totalB(KleinNishina.ELECTRON_KEV);

    private final ScatterMesh mesh;
    private final float[] perEtendue;
    private final double scale;
    private final @Nullable Offsets offsets;

    /** Scatter per étendue and mm of offset: for nodes i and j as a and b, the row i · nodes + j; null where there is none. */
    @SuppressWarnings("ArrayRecordComponent") // nobody compares them
    private record Offsets(OffsetBins bins, float[] @Nullable [] perEtendueMm) {}

    private Scatter(ScatterMesh mesh, float[] perEtendue, double scale, @Nullable Offsets offsets) {
        this.mesh = mesh;
        this.perEtendue = perEtendue;
        this.scale = scale;
        this.offsets = offsets;
    }

    /**
     * Estimates the scatter, without regard to times.
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
        return of(response, window, activityBqPerMl, muPerMm, points, null, pool);
    }

    /**
     * Estimates the scatter.
     *
     * @param response effective areas in the energy window
     * @param window acceptance at lower energies
     * @param activityBqPerMl image of the activity (Bq/mL)
     * @param muPerMm map of attenuation at 511 keV (1/mm)
     * @param points points in the object, some hundred
     * @param times what the times of pairs tell, or null
     * @param pool does the work
     * @return scatter of every pair
     */
    public static Scatter of(
            ElementResponse response,
            WindowShares window,
            Image activityBqPerMl,
            Image muPerMm,
            int points,
            @Nullable FlightTimes times,
            ForkJoinPool pool) {
        DetectorSystem system = response.system();
        ScatterMesh mesh = new ScatterMesh(system);
        int[] element = mesh.sampled();
        List<double[]> places = places(muPerMm, points);
        Paths paths = new Paths(response, element, places, activityBqPerMl, muPerMm, times, pool);
        OffsetBins bins = paths.bins;
        float[] @Nullable [] byOffset = new float[bins == null ? 0 : element.length * element.length][];
        float[] table = new float[element.length * element.length];
        PairLines lines = new PairLines(response);
        pool.submit(() -> IntStream.range(0, element.length).parallel().forEach(i -> {
                    PairLines mine = lines.twin();
                    LineOfResponse line = new LineOfResponse();
                    for (int j = 0; j < i; j++) {
                        if (system.admits(element[i], element[j])) {
                            mine.lineAnywhere(element[i], element[j], line);
                            double[] amounts = new double[bins == null ? 0 : bins.count()];
                            double scattered = paths.scatter(i, j, window, amounts);
                            double ratio = line.etendueMm2Sr() > 0 ? scattered / line.etendueMm2Sr() : 0;
                            table[i * element.length + j] = (float) ratio;
                            table[j * element.length + i] = (float) ratio;
                            if (bins != null && times != null && ratio > 0) {
                                float[] row = bins.blurred(amounts, times.sdMm(element[i], element[j], line));
                                byOffset[i * element.length + j] = scaled(row, 1 / line.etendueMm2Sr());
                                byOffset[j * element.length + i] = reversed(row);
                            }
                        }
                    }
                }))
                .join();
        return new Scatter(mesh, table, 1, bins == null ? null : new Offsets(bins, byOffset));
    }

    private static float[] scaled(float[] row, double factor) {
        for (int k = 0; k < row.length; k++) {
            row[k] *= (float) factor;
        }
        return row;
    }

    private static float[] reversed(float[] row) {
        float[] result = new float[row.length];
        for (int k = 0; k < row.length; k++) {
            result[k] = row[row.length - 1 - k];
        }
        return result;
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
        // Only with times: distance, and the activity cell by cell from the point on, at (e · points + p) · cells.
        private final double[] distance;
        private final float[] cellActivity;
        private final int cells;
        private final @Nullable OffsetBins bins;

        Paths(
                ElementResponse response,
                int[] element,
                List<double[]> places,
                Image activityImage,
                Image mu,
                @Nullable FlightTimes times,
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
            distance = new double[size];
            RaySums muSums = new RaySums(mu);
            RaySums activitySums = new RaySums(activityImage);
            bins = times == null ? null : bins(response, element, times, activityImage);
            cells = bins == null ? 0 : 1 + (int) (reachMm(activityImage) / bins.widthMm());
            cellActivity = new float[Math.multiplyExact(size, cells)];
            pool.submit(() -> IntStream.range(0, elements)
                            .parallel()
                            .forEach(e -> fill(response, element[e], e, muSums.twin(), activitySums.twin())))
                    .join();
        }

        /** From any point to the furthest activity (mm): the diagonal of the image. */
        private static double reachMm(Image image) {
            Grid grid = image.grid();
            double x = grid.nx() * grid.spacingXMm();
            double y = grid.ny() * grid.spacingYMm();
            double z = grid.nz() * grid.spacingZMm();
            return Math.sqrt(x * x + y * y + z * z);
        }

        private OffsetBins bins(ElementResponse response, int[] element, FlightTimes times, Image activityImage) {
            DetectorSystem system = response.system();
            double uneven = 0;
            for (double[] place : places) {
                Vector3 point = new Vector3(place[0], place[1], place[2]);
                double nearest = Double.POSITIVE_INFINITY;
                double furthest = 0;
                for (int e : element) {
                    double way = system.centre(e).minus(point).norm();
                    nearest = Math.min(nearest, way);
                    furthest = Math.max(furthest, way);
                }
                uneven = Math.max(uneven, furthest - nearest);
            }
            double depth = 0;
            for (int e : element) {
                depth = Math.max(depth, system.size(e).norm());
            }
            double reach = 0.5 * uneven + reachMm(activityImage) + depth;
            return new OffsetBins(times.leastSdMm(), reach, Math.hypot(times.mostSdMm(), 0.5 * depth));
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
                distance[at] = Math.sqrt(square);
                if (bins != null && activity[at] > 0) {
                    cut(active, point, d, bins.widthMm(), at);
                }
            }
        }

        /** Cuts the activity between a point and an element into cells; their sum stays exactly that of the whole. */
        private void cut(RaySums active, Vector3 point, Vector3 direction, double widthMm, int at) {
            double sum = 0;
            for (int k = 0; k < cells; k++) {
                double toMm = k == cells - 1 ? distance[at] : Math.min(distance[at], (k + 1) * widthMm);
                if (k * widthMm >= toMm) {
                    break;
                }
                Vector3 from = point.plus(direction.times(k * widthMm));
                Vector3 to = point.plus(direction.times(toMm));
                double cell = active.along(from.x(), from.y(), from.z(), to.x(), to.y(), to.z());
                cellActivity[at * cells + k] = (float) cell;
                sum += cell;
            }
            for (int k = 0; k < cells && sum > 0; k++) {
                cellActivity[at * cells + k] *= (float) (activity[at] / sum);
            }
        }

        /** Σ over the points (Bq/mL · mm³ sr, like étendue · ∫ activity / 2π); with times also added to the amounts, by true offset. */
        double scatter(int i, int j, WindowShares window, double[] amounts) {
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
                double fromA = common * Math.exp(-tau[a] - more * tau[b]);
                double fromB = common * Math.exp(-tau[b] - more * tau[a]);
                sum += activity[a] * fromA + activity[b] * fromB;
                if (bins != null) {
                    double turnMm = 0.5 * (distance[b] - distance[a]);
                    deposit(bins, a, fromA, turnMm, 1, amounts);
                    deposit(bins, b, fromB, turnMm, -1, amounts);
                }
            }
            return sum;
        }

        /** Adds what comes from the cells between a point and an element, which lie one bin apart, in the one direction or the other. */
        private void deposit(OffsetBins at, int way, double factor, double turnMm, int direction, double[] amounts) {
            double first = at.place(turnMm) + 0.5 * direction;
            int below = (int) Math.floor(first);
            double upper = first - below;
            for (int k = 0; k < cells; k++) {
                double amount = factor * cellActivity[way * cells + k];
                amounts[below + direction * k] += (1 - upper) * amount;
                amounts[below + direction * k + 1] += upper * amount;
            }
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
     * The part of {@link #perEtendue} that has a measured offset.
     *
     * @param a one element
     * @param b the other
     * @param offsetMm c/2 times the time difference of a and b: where decays on their line would be, from its middle towards a (mm)
     * @return scatter per étendue and mm of offset (Bq/mL)
     * @throws IllegalStateException if the estimate was made without times
     */
    public double perEtendueMm(int a, int b, double offsetMm) {
        if (offsets == null) {
            throw new IllegalStateException("this scatter was estimated without times");
        }
        double place = offsets.bins.place(offsetMm);
        int low = (int) Math.floor(place);
        if (!(place >= 0 && low + 1 < offsets.bins.count())) {
            return 0;
        }
        double share = place - low;
        return scale * mesh.interpolate(offsets.perEtendueMm, low, share, a, b);
    }

    /**
     * The same, scaled.
     *
     * @param factor what to multiply it with
     * @return scatter times the factor
     */
    public Scatter scaled(double factor) {
        return new Scatter(mesh, perEtendue, scale * factor, offsets);
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
