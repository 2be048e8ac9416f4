package org.raysheaf.geometry.motion;

import java.util.List;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafCatalogue;

/**
 * Everything that a moving detector can record: what it can record in each of its poses, by the share of time that it spent there. Thread-safe
 * if the catalogue of the detector is.
 */
public final class MovingCatalogue implements SheafCatalogue {
    private final SheafCatalogue still;
    private final List<Motion.Weighted> poses;

    /**
     * Moves a catalogue.
     *
     * @param still the sheaves of the detector in its own frame
     * @param poses where it stood, with shares of time that sum to 1
     */
    public MovingCatalogue(SheafCatalogue still, List<Motion.Weighted> poses) {
        this.still = still;
        this.poses = List.copyOf(poses);
        Math.multiplyExact(still.parts(), poses.size());
    }

    @Override
    public int raysPerSheaf() {
        return still.raysPerSheaf();
    }

    @Override
    public int parts() {
        return still.parts() * poses.size();
    }

    @Override
    public int capacity(int part) {
        return still.capacity(part % still.parts());
    }

    @Override
    public void fill(int part, SheafBundle out) {
        Motion.Weighted pose = poses.get(part / still.parts());
        int before = out.size() * raysPerSheaf();
        still.fill(part % still.parts(), out);
        int end = out.size() * raysPerSheaf();
        Motion.move(pose.pose(), out.rays(), before, end);
        for (int ray = before; ray < end; ray++) {
            out.weights()[ray] *= (float) pose.share();
        }
    }
}
