package org.raysheaf.geometry.response;

import java.util.List;
import java.util.Set;
import java.util.random.RandomGenerator;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.BlockKind;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.MonolithicBlock;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.frame.Vector3;

/**
 * What events say of interaction points beyond the element: a point in three dimensions where the block is of one piece, a depth where the
 * readout of the crystals measures it; and how well. Standard deviations come from the events if they have them, else from the block's
 * description. Immutable, safe for use by several threads.
 */
final class MeasuredPoints {
    static final List<Attribute> POINT_A =
            List.of(Attribute.POSITION_A_X, Attribute.POSITION_A_Y, Attribute.POSITION_A_Z);
    static final List<Attribute> POINT_B =
            List.of(Attribute.POSITION_B_X, Attribute.POSITION_B_Y, Attribute.POSITION_B_Z);
    private static final List<Attribute> SD_A =
            List.of(Attribute.POSITION_A_U_SD, Attribute.POSITION_A_V_SD, Attribute.POSITION_A_W_SD);
    private static final List<Attribute> SD_B =
            List.of(Attribute.POSITION_B_U_SD, Attribute.POSITION_B_V_SD, Attribute.POSITION_B_W_SD);
    private static final double FWHM_PER_SD = 2 * Math.sqrt(2 * Math.log(2));

    private enum What {
        NOTHING,
        DEPTH,
        POINT
    }

    private final DetectorSystem system;
    private final double[] frames;
    private final What[] what;
    /** Per block: lower then upper faces along u, v, w in its own frame. */
    private final double[] faces;
    /** Per block: standard deviations along u, v, w. */
    private final double[] sds;

    private final boolean any;

    MeasuredPoints(DetectorSystem system, double[] frames, Positions positions) {
        this.system = system;
        this.frames = frames;
        int blocks = system.blocks().size();
        what = new What[blocks];
        faces = new double[6 * blocks];
        sds = new double[3 * blocks];
        boolean found = false;
        for (PlacedBlock block : system.blocks()) {
            BlockKind kind = block.kind();
            int b = block.index();
            what[b] = positions.measuresPoint(kind)
                    ? What.POINT
                    : positions.measuresDepth(kind) ? What.DEPTH : What.NOTHING;
            found |= what[b] != What.NOTHING;
            double[] sizes = {kind.widthMm(), kind.heightMm()};
            for (int axis = 0; axis < 2; axis++) {
                faces[6 * b + axis] = -0.5 * sizes[axis];
                faces[6 * b + 3 + axis] = 0.5 * sizes[axis];
            }
            faces[6 * b + 5] = kind.depthMm();
            Double depth = kind.readout().depthFwhmMm();
            Vector3 sd = kind instanceof MonolithicBlock whole
                    ? whole.positionSdMm()
                    : new Vector3(0, 0, depth == null ? 0 : depth / FWHM_PER_SD);
            sds[3 * b] = sd.x();
            sds[3 * b + 1] = sd.y();
            sds[3 * b + 2] = sd.z();
        }
        any = found;
    }

    /** Adds the columns that can say something. */
    void addColumns(Set<Attribute> columns, boolean blurs) {
        if (any) {
            columns.addAll(POINT_A);
            columns.addAll(POINT_B);
            columns.add(Attribute.DEPTH_A);
            columns.add(Attribute.DEPTH_B);
            if (blurs) {
                columns.addAll(SD_A);
                columns.addAll(SD_B);
            }
        }
    }

    /** Whether a coordinate, 0 to 2 for u, v, w, of interactions in an element is measured. */
    boolean measures(int element, int axis) {
        return any
                && switch (what[system.blockIndexOf(element)]) {
                    case NOTHING -> false;
                    case DEPTH -> axis == 2;
                    case POINT -> true;
                };
    }

    /**
     * Where a ray ends whose photon interacted at a coordinate that is measured: the electronics blur it, and name no point outside the block; of
     * several rays, each is then spread by the blur once more.
     *
     * @param value the coordinate from the element's centre (mm)
     * @param several whether events have several rays
     */
    double blurred(int element, int axis, double value, boolean several, RandomGenerator chance) {
        int block = system.blockIndexOf(element);
        double sd = sds[3 * block + axis];
        double place = frames[ElementFrames.SIZE * element + ElementFrames.PLACE + axis];
        double low = faces[6 * block + axis] - place;
        double high = faces[6 * block + 3 + axis] - place;
        double found = Math.max(low, Math.min(high, value + sd * chance.nextGaussian()));
        return several ? EndSpread.folded(found + sd * chance.nextGaussian(), low, high) : found;
    }

    /** What was measured of the events in a block, which may be filled again. */
    Events of(EventBlock events) {
        return new Events(
                new End(events, POINT_A, SD_A, Attribute.DEPTH_A), new End(events, POINT_B, SD_B, Attribute.DEPTH_B));
    }

    /** What was measured of both photons of every event in a block. Belongs to one thread. */
    static final class Events {
        private final End endA;
        private final End endB;

        private Events(End endA, End endB) {
            this.endA = endA;
            this.endB = endB;
        }

        /**
         * Finds the line of an event: that of its pair, its ends where they were measured.
         *
         * @param etendue whether the étendue of the pair is wanted
         * @return false if the line passes the field of view
         */
        boolean find(int event, int a, int b, PairLines maker, LineOfResponse line, boolean etendue) {
            boolean moveA = endA.measures(a);
            boolean moveB = endB.measures(b);
            if (etendue && !moveA && !moveB) {
                return maker.line(a, b, line);
            }
            if (etendue) {
                maker.lineAnywhere(a, b, line);
            } else {
                maker.ends(a, b, line);
            }
            if (moveA) {
                endA.move(event, a, line, true);
            }
            if (moveB) {
                endB.move(event, b, line, false);
            }
            return maker.crossesView(line);
        }

        /** Tells the rays of an event what was measured, and how well. */
        void blur(int event, int a, int b, PairRays rays) {
            if (endA.measures(a)) {
                endA.blur(event, a, rays.end(0));
            }
            if (endB.measures(b)) {
                endB.blur(event, b, rays.end(1));
            }
        }
    }

    /** What was measured of one photon of every event in a block. */
    private final class End {
        private final float @Nullable [][] point;
        private final float @Nullable [][] blur;
        private final float @Nullable [] depth;
        private final double[] local = new double[3];

        private End(EventBlock events, List<Attribute> points, List<Attribute> blurs, Attribute depths) {
            point = columns(events, points);
            blur = columns(events, blurs);
            depth = events.has(depths) ? events.floats(depths) : null;
        }

        private static float @Nullable [][] columns(EventBlock events, List<Attribute> attributes) {
            return attributes.stream().allMatch(events::has)
                    ? attributes.stream().map(events::floats).toArray(float[][]::new)
                    : null;
        }

        /** Whether anything was measured of the photon in an element. */
        boolean measures(int element) {
            return any
                    && switch (what[system.blockIndexOf(element)]) {
                        case NOTHING -> false;
                        case DEPTH -> depth != null;
                        case POINT -> point != null;
                    };
        }

        /** Moves one end of a line to where the photon of an event was measured. */
        void move(int event, int element, LineOfResponse line, boolean endA) {
            double[] at = local;
            at[0] = endA ? line.ax : line.bx;
            at[1] = endA ? line.ay : line.by;
            at[2] = endA ? line.az : line.bz;
            float[][] measured = point;
            if (what[system.blockIndexOf(element)] == What.POINT && measured != null) {
                for (int axis = 0; axis < 3; axis++) {
                    at[axis] = measured[axis][event];
                }
            } else {
                int f = ElementFrames.SIZE * element;
                int w = f + ElementFrames.W;
                double mean =
                        ElementFrames.along(frames, w, at[0] - frames[f], at[1] - frames[f + 1], at[2] - frames[f + 2]);
                double shift = depth(event, element) - mean;
                for (int axis = 0; axis < 3; axis++) {
                    at[axis] += shift * frames[w + axis];
                }
            }
            if (endA) {
                line.ax = at[0];
                line.ay = at[1];
                line.az = at[2];
            } else {
                line.bx = at[0];
                line.by = at[1];
                line.bz = at[2];
            }
        }

        /** Measured depth from the element's centre; depths beyond the block are taken to its faces. */
        private double depth(int event, int element) {
            float[] depths = depth;
            double behindFront = depths == null ? Double.NaN : depths[event];
            double deepest = faces[6 * system.blockIndexOf(element) + 5];
            return Math.max(0, Math.min(deepest, behindFront))
                    - frames[ElementFrames.SIZE * element + ElementFrames.PLACE + 2];
        }

        /** Tells a spread what was measured, and how well. */
        void blur(int event, int element, EndSpread spread) {
            int block = system.blockIndexOf(element);
            int f = ElementFrames.SIZE * element;
            float[][] measured = point;
            if (what[block] != What.POINT || measured == null) {
                measure(2, depth(event, element), sds[3 * block + 2], f, block, spread);
                return;
            }
            double x = measured[0][event] - frames[f];
            double y = measured[1][event] - frames[f + 1];
            double z = measured[2][event] - frames[f + 2];
            float[][] own = blur;
            for (int axis = 0; axis < 3; axis++) {
                double value = ElementFrames.along(frames, f + ElementFrames.U + 3 * axis, x, y, z);
                double sd = own == null ? sds[3 * block + axis] : own[axis][event];
                measure(axis, value, sd, f, block, spread);
            }
        }

        private void measure(int axis, double value, double sd, int f, int block, EndSpread spread) {
            double place = frames[f + ElementFrames.PLACE + axis];
            spread.measure(axis, value, sd, faces[6 * block + axis] - place, faces[6 * block + 3 + axis] - place);
        }
    }
}
