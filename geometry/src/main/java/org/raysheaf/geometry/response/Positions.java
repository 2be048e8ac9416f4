package org.raysheaf.geometry.response;

import java.util.Set;
import org.raysheaf.geometry.detector.BlockKind;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.MonolithicBlock;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.settings.Problems;

/**
 * How well the interaction points of events are known, and how many rays stand for what is not known of them.
 *
 * @param rays rays of a sheaf, 1 to 1000. One ray joins the mean or measured interaction points; more are spread over both crystals, or over
 *     the blur of what was measured.
 * @param points whether events bring measured points, which blocks of one piece use
 * @param depths whether events bring measured depths, which crystals use whose readout has a depth_fwhm_mm
 */
public record Positions(int rays, boolean points, boolean depths) {
    /** One ray, between whatever was measured. */
    public static final Positions ONE_RAY = new Positions(1, true, true);

    public Positions {
        new Problems("reconstruction").within("rays_per_event", rays, 1, 1000).orThrow();
    }

    /**
     * What a list brings.
     *
     * @param rays rays of a sheaf
     * @param columns the list's attributes
     * @return how well its points are known
     */
    public static Positions of(int rays, Set<Attribute> columns) {
        return new Positions(
                rays,
                columns.containsAll(MeasuredPoints.POINT_A) && columns.containsAll(MeasuredPoints.POINT_B),
                columns.contains(Attribute.DEPTH_A) && columns.contains(Attribute.DEPTH_B));
    }

    /**
     * Whether ends of rays lie anywhere, so that no finite catalogue has the rays of the events.
     *
     * @param system the system
     * @return true if some block's points or depths are measured
     */
    public boolean continuous(DetectorSystem system) {
        return system.blocks().stream().anyMatch(block -> measuresPoint(block.kind()) || measuresDepth(block.kind()));
    }

    boolean measuresPoint(BlockKind kind) {
        return points && kind instanceof MonolithicBlock;
    }

    boolean measuresDepth(BlockKind kind) {
        return depths && kind instanceof CrystalBlock && kind.readout().depthFwhmMm() != null;
    }
}
