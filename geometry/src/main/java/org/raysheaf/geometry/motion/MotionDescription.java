package org.raysheaf.geometry.motion;

import java.util.List;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * How detector or subject moved while a list was taken ({@code raysheaf: motion/1}).
 *
 * @param of what moved; the image stands still with the other
 * @param between what happened between two of the poses
 * @param poses where it was when; before the first pose it stood there, and from the last one on it stayed
 */
public record MotionDescription(
        @Default("detector") Mover of, @Default("hold") Between between, List<TimedPose> poses) {
    /** What moved. */
    public enum Mover {
        /** The detector, for example on a turning gantry; the image belongs to the room. */
        DETECTOR,
        /** The subject, for example an animal that shifts; the image belongs to the subject, in the coordinates that the poses take to the room. */
        SUBJECT
    }

    /** What happened between two poses. */
    public enum Between {
        /** Each pose held until the time of the next. */
        HOLD,
        /** Shift and angles changed evenly from one pose to the next, so an angle from 0 to 360 is a full turn. */
        EVEN
    }

    /**
     * A pose and its time.
     *
     * @param timeS since the start of the list (s)
     * @param turnDeg turned about the x axis by the first angle, then about y by the second, then about z by the third (degrees)
     * @param shiftMm then moved by this (mm)
     */
    public record TimedPose(
            double timeS,
            @Default("[0, 0, 0]") Vector3 turnDeg,
            @Default("[0, 0, 0]") Vector3 shiftMm) {
        /**
         * Checks that all numbers are finite.
         *
         * @throws org.raysheaf.geometry.settings.InvalidSettingsException if one is not
         */
        public TimedPose {
            new Problems("poses")
                    .finite("time_s", timeS)
                    .finite("turn_deg", turnDeg.norm())
                    .finite("shift_mm", shiftMm.norm())
                    .orThrow();
        }

        /** The pose on the way to another one: 0 for this, 1 for that. */
        Pose towards(TimedPose next, double share) {
            return Pose.turnedAndShifted(
                    turnDeg.plus(next.turnDeg.minus(turnDeg).times(share)),
                    shiftMm.plus(next.shiftMm.minus(shiftMm).times(share)));
        }
    }

    /**
     * Checks that there are poses, in the order of time.
     *
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if not
     */
    public MotionDescription {
        poses = List.copyOf(poses);
        Problems problems =
                new Problems("motion").rule(!poses.isEmpty(), "poses", "expected at least one pose, found none");
        for (int i = 1; i < poses.size(); i++) {
            problems.rule(
                    poses.get(i).timeS() > poses.get(i - 1).timeS(),
                    "poses[" + i + "].time_s",
                    "expected a time after that of the pose before, "
                            + poses.get(i - 1).timeS() + ", found "
                            + poses.get(i).timeS());
        }
        problems.orThrow();
    }
}
