package org.raysheaf.geometry.response;

import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.port.Progress;

/**
 * The response of every crystal of a system, tabulated over direction. Crystals that see the same surroundings share a table; nodes are dense
 * near the lattice axes; between nodes the response is interpolated bilinearly, with the cosine of the angle to the block's axis taken out.
 * Directions come from the pairs that the system admits; others are clamped to the edge of the table.
 *
 * <p>Immutable once made, safe for use by several threads.
 */
public final class ElementResponse {
    /** Values of a node: area / cosine, three coordinates, variance. */
    private static final int VALUES = 5;

    /** Spacing of nodes in the stretched slope, for an interpolation error below 0.2 % (measured in the tests). */
    private static final double STEP = 0.16;

    /** Directions flatter than this against the front face are clamped (slope 20 is 87 degrees). */
    private static final double STEEPEST = 20;

    private final DetectorSystem system;
    private final ElementClasses classes;
    private final SlopeAxis u;
    private final SlopeAxis v;
    private final float[] table;
    private final @Nullable WindowShares window;

    private ElementResponse(DetectorSystem system, ElementClasses classes, SlopeAxis u, SlopeAxis v, float[] table) {
        this(system, classes, u, v, table, null);
    }

    private ElementResponse(
            DetectorSystem system,
            ElementClasses classes,
            SlopeAxis u,
            SlopeAxis v,
            float[] table,
            @Nullable WindowShares window) {
        this.system = system;
        this.classes = classes;
        this.u = u;
        this.v = v;
        this.table = table;
        this.window = window;
    }

    /**
     * The response in an energy window: effective areas times the share of signals in the window. Points of interaction stay.
     *
     * @param shares what becomes of first interactions in this system
     * @return the response for signals in the window; it shares the tables
     */
    public ElementResponse within(WindowShares shares) {
        return new ElementResponse(system, classes, u, v, table, shares);
    }

    /**
     * Number of classes of elements that see the same surroundings.
     *
     * @return the count
     */
    public int classes() {
        return classes.classes();
    }

    /**
     * The class of an element.
     *
     * @param element the element
     * @return number of its class, from 0
     */
    public int classOf(int element) {
        return classes.classOf(element);
    }

    /**
     * Makes the tables of a system. Takes some 0.1 ms of one core per node; the result does not depend on the number of threads.
     *
     * @param system the system
     * @param pool does the work
     * @param progress hears of it
     * @return the response of all elements
     */
    public static ElementResponse tabulate(DetectorSystem system, ForkJoinPool pool, Progress progress) {
        ElementResponse response = untabulated(system);
        int rows = response.classes.classes() * response.u.nodes();
        progress.begin("element response", rows, "rows");
        pool.submit(() -> IntStream.range(0, rows).parallel().forEach(row -> {
                    response.fillRow(row);
                    progress.advance(1);
                }))
                .join();
        progress.end(String.format(
                "%d tables of %d x %d directions", response.classes.classes(), response.u.nodes(), response.v.nodes()));
        return response;
    }

    /**
     * Takes tables that were made before, for the same system.
     *
     * @param system the system
     * @param tables what {@link #tables()} gave; copied
     * @return the response of all elements
     * @throws IllegalArgumentException if the tables have not the size that this system needs
     */
    public static ElementResponse restore(DetectorSystem system, float[] tables) {
        ElementResponse response = untabulated(system);
        if (tables.length != response.table.length) {
            throw new IllegalArgumentException("expected " + response.table.length + " values for this system, found "
                    + tables.length + "; make the tables again");
        }
        System.arraycopy(tables, 0, response.table, 0, tables.length);
        return response;
    }

    private static ElementResponse untabulated(DetectorSystem system) {
        ElementClasses classes = new ElementClasses(system);
        double[] most = steepestSlopes(system);
        SlopeAxis u = new SlopeAxis(most[0], STEP);
        SlopeAxis v = new SlopeAxis(most[1], STEP);
        int nodes = Math.multiplyExact(classes.classes(), u.nodes() * v.nodes());
        return new ElementResponse(system, classes, u, v, new float[Math.multiplyExact(VALUES, nodes)]);
    }

    /**
     * The response of perfectly absorbing front faces: A cosθ, at the centre of the face, whatever stands before it. The limit that crystals tend
     * to, and a yardstick for the étendue of pairs.
     *
     * @param system the system
     * @return the response of all elements
     */
    public static ElementResponse ofFaces(DetectorSystem system) {
        ElementClasses classes = new ElementClasses(system);
        SlopeAxis axis = new SlopeAxis(1, 1);
        int nodes = axis.nodes() * axis.nodes();
        float[] table = new float[VALUES * nodes * classes.classes()];
        for (int node = 0; node < nodes * classes.classes(); node++) {
            Vector3 size = system.size(classes.representative(node / nodes));
            table[VALUES * node] = (float) (size.x() * size.y());
            table[VALUES * node + 3] = (float) (-0.5 * size.z());
        }
        return new ElementResponse(system, classes, axis, axis, table);
    }

    /**
     * The tables, to be kept and given to {@link #restore} later.
     *
     * @return a copy
     */
    public float[] tables() {
        return table.clone();
    }

    private void fillRow(int row) {
        ResponseIntegral integral = new ResponseIntegral(system);
        Response response = new Response();
        int element = classes.representative(row / u.nodes());
        double slopeU = u.slope(row % u.nodes());
        for (int node = 0; node < v.nodes(); node++) {
            double slopeV = v.slope(node);
            double cosine = 1 / Math.sqrt(1 + slopeU * slopeU + slopeV * slopeV);
            integral.evaluate(element, slopeU * cosine, slopeV * cosine, cosine, response);
            int at = VALUES * (row * v.nodes() + node);
            table[at] = (float) (response.area / cosine);
            table[at + 1] = (float) response.u;
            table[at + 2] = (float) response.v;
            table[at + 3] = (float) response.w;
            table[at + 4] = (float) response.variance;
        }
    }

    /**
     * The largest |u/w| and |v/w| that a line can have at the far end when it joins two blocks that may pair and crosses the field of view: the
     * smaller of what either condition allows.
     */
    private static double[] steepestSlopes(DetectorSystem system) {
        double[] paired = {0, 0};
        double[] seen = {0, 0};
        List<Vector3> rim = rim(system.fieldOfView());
        for (PlacedBlock to : system.blocks()) {
            Pose local = to.pose().inverse();
            for (Vector3 end : to.corners()) {
                for (Vector3 start : rim) {
                    widen(seen, local.turn(end.minus(start)));
                }
                for (PlacedBlock from : system.blocks()) {
                    if (system.pairs().admits(from, to)) {
                        for (Vector3 start : from.corners()) {
                            widen(paired, local.turn(end.minus(start)));
                        }
                    }
                }
            }
        }
        return new double[] {Math.min(paired[0], seen[0]), Math.min(paired[1], seen[1])};
    }

    /** Points on both rims of the field of view, a little outside so that they enclose the circles. */
    private static List<Vector3> rim(FieldOfView view) {
        final int points = 32;
        double radius = view.radiusMm() / Math.cos(Math.PI / points);
        List<Vector3> rim = new ArrayList<>();
        for (int i = 0; i < points; i++) {
            double angle = 2 * Math.PI * i / points;
            for (int side = -1; side <= 1; side += 2) {
                rim.add(new Vector3(radius * Math.cos(angle), radius * Math.sin(angle), 0.5 * side * view.lengthMm()));
            }
        }
        return rim;
    }

    private static void widen(double[] most, Vector3 d) {
        double uSlope = d.z() > 0 ? Math.abs(d.x() / d.z()) : STEEPEST;
        double vSlope = d.z() > 0 ? Math.abs(d.y() / d.z()) : STEEPEST;
        most[0] = Math.min(STEEPEST, Math.max(most[0], uSlope));
        most[1] = Math.min(STEEPEST, Math.max(most[1], vSlope));
    }

    /**
     * Looks up the response of an element.
     *
     * @param element the element
     * @param su direction of flight in the frame of the element's block, along u
     * @param sv along v
     * @param sw along w; the three make a unit vector. Photons from behind (w not above 0) find an area of 0.
     * @param out receives the response
     */
    public void lookUp(int element, double su, double sv, double sw, Response out) {
        if (!(sw > 0)) {
            out.area = 0;
            out.u = 0;
            out.v = 0;
            out.w = 0;
            out.variance = 0;
            return;
        }
        double signU = classes.flipsU(element) ? -1 : 1;
        double signV = classes.flipsV(element) ? -1 : 1;
        double pu = u.position(signU * su / sw);
        double pv = v.position(signV * sv / sw);
        int iu = (int) pu;
        int iv = (int) pv;
        double fu = pu - iu;
        double fv = pv - iv;
        int at = VALUES * ((classes.classOf(element) * u.nodes() + iu) * v.nodes() + iv);
        out.area = sw * blend(at, fu, fv);
        out.u = signU * blend(at + 1, fu, fv);
        out.v = signV * blend(at + 2, fu, fv);
        out.w = blend(at + 3, fu, fv);
        out.variance = blend(at + 4, fu, fv);
        if (window != null) {
            out.area *= window.of(classes.classOf(element), su, sv);
            out.w += window.deeperMm();
        }
    }

    private double blend(int at, double fu, double fv) {
        int next = VALUES * v.nodes();
        double low = table[at] + fv * (table[at + VALUES] - table[at]);
        double high = table[at + next] + fv * (table[at + next + VALUES] - table[at + next]);
        return low + fu * (high - low);
    }

    /**
     * The system that the tables belong to.
     *
     * @return the system
     */
    public DetectorSystem system() {
        return system;
    }
}
