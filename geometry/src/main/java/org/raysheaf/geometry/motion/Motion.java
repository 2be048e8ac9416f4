package org.raysheaf.geometry.motion;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.motion.MotionDescription.Between;
import org.raysheaf.geometry.motion.MotionDescription.Mover;
import org.raysheaf.geometry.motion.MotionDescription.TimedPose;
import org.raysheaf.geometry.settings.Problems;

/**
 * Where the detector stood against the image at any time: a sequence of stays, in each of which nothing moves. Steady motion is cut into stays
 * so short that no point within reach is off by more than a stated length. Immutable and thread-safe.
 */
public final class Motion {
    /** No point is drawn further from its true place than this (mm). */
    static final double TOLERANCE_MM = 0.05;

    private static final int MOST_STAYS = 1_000_000;
    private static final double PS_PER_S = 1e12;

    /** When each stay begins (ps); the first one has always been. */
    private final long[] starts;
    /** From the detector's frame to the image's. */
    private final Pose[] poses;

    private Motion(long[] starts, Pose[] poses) {
        this.starts = starts;
        this.poses = poses;
    }

    /**
     * Works out a motion.
     *
     * @param description what moved, and how
     * @param reachMm points up to this distance from the origin count (mm)
     * @return the motion
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if it would take more than a million stays
     */
    public static Motion of(MotionDescription description, double reachMm) {
        List<TimedPose> given = description.poses();
        List<Long> starts = new ArrayList<>();
        List<Pose> poses = new ArrayList<>();
        starts.add(Long.MIN_VALUE);
        poses.add(given.get(0).towards(given.get(0), 0));
        for (int i = 0; i + 1 < given.size(); i++) {
            TimedPose from = given.get(i);
            TimedPose to = given.get(i + 1);
            int steps = description.between() == Between.HOLD ? 1 : steps(from, to, reachMm);
            new Problems("motion")
                    .rule(
                            starts.size() + (long) steps <= MOST_STAYS,
                            "poses",
                            "the motion up to " + to.timeS() + " s takes more than " + MOST_STAYS + " steps of "
                                    + TOLERANCE_MM + " mm; give fewer or nearer poses")
                    .orThrow();
            for (int k = 0; k < steps; k++) {
                double share = k / (double) steps;
                starts.add(Math.round((from.timeS() + share * (to.timeS() - from.timeS())) * PS_PER_S));
                // A stay has the pose of its middle; a held one that of its beginning.
                poses.add(from.towards(
                        to, steps == 1 && description.between() == Between.HOLD ? 0 : share + 0.5 / steps));
            }
        }
        TimedPose last = given.get(given.size() - 1);
        starts.add(Math.round(last.timeS() * PS_PER_S));
        poses.add(last.towards(last, 0));
        boolean detector = description.of() == Mover.DETECTOR;
        return new Motion(
                starts.stream().mapToLong(Long::longValue).toArray(),
                poses.stream().map(pose -> detector ? pose : pose.inverse()).toArray(Pose[]::new));
    }

    /** So many that the middle of each is nowhere further from its ends than the tolerance. */
    private static int steps(TimedPose from, TimedPose to, double reachMm) {
        Vector3 angles = to.turnDeg().minus(from.turnDeg());
        double turned = Math.toRadians(Math.abs(angles.x()) + Math.abs(angles.y()) + Math.abs(angles.z())) * reachMm;
        double way = turned + to.shiftMm().minus(from.shiftMm()).norm();
        return (int) Math.max(1, Math.min(2.0 * MOST_STAYS, Math.ceil(0.5 * way / TOLERANCE_MM)));
    }

    /**
     * The stay at a time.
     *
     * @param timePs since the start of the list (ps)
     * @return its number, from 0
     */
    public int stayAt(long timePs) {
        int found = Arrays.binarySearch(starts, timePs);
        int stay = found >= 0 ? found : -found - 2;
        return Math.max(0, stay);
    }

    /**
     * The pose of a stay.
     *
     * @param stay its number
     * @return from the detector's frame to that of the image
     */
    public Pose pose(int stay) {
        return poses[stay];
    }

    /**
     * A few poses that stand for all of a span of time.
     *
     * @param fromS begin (s since the start of the list)
     * @param toS end (s)
     * @param most how many poses to take; if there are no more stays than that, each is taken
     * @return poses and the share of the time that each stands for; shares sum to 1
     */
    public List<Weighted> over(double fromS, double toS, int most) {
        long from = Math.round(fromS * PS_PER_S);
        long to = Math.round(toS * PS_PER_S);
        int first = stayAt(from);
        int last = stayAt(Math.max(from, to - 1));
        List<Weighted> chosen = new ArrayList<>();
        double length = (double) to - from;
        if (last - first < most) {
            for (int stay = first; stay <= last; stay++) {
                long begin = stay == first ? from : starts[stay];
                long end = stay == last ? to : starts[stay + 1];
                if (end > begin) {
                    chosen.add(new Weighted(poses[stay], (end - begin) / length));
                }
            }
            return chosen;
        }
        for (int i = 0; i < most; i++) {
            long middle = from + (long) (length * (i + 0.5) / most);
            chosen.add(new Weighted(poses[stayAt(middle)], 1.0 / most));
        }
        return chosen;
    }

    /**
     * A pose with the share of time that it stands for.
     *
     * @param pose from the detector's frame to that of the image
     * @param share 0 to 1
     */
    public record Weighted(Pose pose, double share) {}

    /**
     * Moves rays.
     *
     * @param pose from the detector's frame to that of the image
     * @param rays coordinates, six per ray (mm); overwritten
     * @param first first ray to move
     * @param end after the last one
     */
    static void move(Pose pose, float[] rays, int first, int end) {
        Vector3 u = pose.u();
        Vector3 v = pose.v();
        Vector3 w = pose.w();
        Vector3 o = pose.origin();
        for (int at = 6 * first; at < 6 * end; at += 3) {
            double x = rays[at];
            double y = rays[at + 1];
            double z = rays[at + 2];
            rays[at] = (float) (u.x() * x + v.x() * y + w.x() * z + o.x());
            rays[at + 1] = (float) (u.y() * x + v.y() * y + w.y() * z + o.y());
            rays[at + 2] = (float) (u.z() * x + v.z() * y + w.z() * z + o.z());
        }
    }
}
