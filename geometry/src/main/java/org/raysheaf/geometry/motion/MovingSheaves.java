package org.raysheaf.geometry.motion;

import java.util.EnumSet;
import java.util.Set;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafMaker;

/** The sheaves of a detector that moves against the image: each event's rays are where the detector stood at its time. Thread-safe. */
public final class MovingSheaves implements SheafMaker {
    private final SheafMaker still;
    private final Motion motion;

    /**
     * Moves the sheaves of a maker.
     *
     * @param still makes sheaves in the detector's frame
     * @param motion where the detector stood when
     */
    public MovingSheaves(SheafMaker still, Motion motion) {
        this.still = still;
        this.motion = motion;
    }

    @Override
    public Set<Attribute> attributes() {
        EnumSet<Attribute> columns = EnumSet.of(Attribute.TIME);
        columns.addAll(still.attributes());
        return columns;
    }

    @Override
    public Set<Attribute> alsoReads() {
        return still.alsoReads();
    }

    @Override
    public int raysPerSheaf() {
        return still.raysPerSheaf();
    }

    /** Rigid moves leave places along a ray as they are. */
    @Override
    public SheafBundle.WeightLaw law() {
        return still.law();
    }

    /** Lists run through time, so neighbours share a stay: they are made together, then moved together. */
    @Override
    public void make(EventBlock events, SheafBundle out, EventTally tally) {
        long[] times = events.longs(Attribute.TIME);
        EventBlock run = new EventBlock(events.attributes(), Math.max(1, events.size()));
        int from = 0;
        while (from < events.size()) {
            int stay = motion.stayAt(times[from]);
            int to = from + 1;
            while (to < events.size() && motion.stayAt(times[to]) == stay) {
                to++;
            }
            run.resize(0);
            run.append(events, from, to - from);
            int before = out.size();
            still.make(run, out, tally);
            Motion.move(motion.pose(stay), out.rays(), before * raysPerSheaf(), out.size() * raysPerSheaf());
            from = to;
        }
    }
}
