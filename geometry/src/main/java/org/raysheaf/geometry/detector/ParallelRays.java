package org.raysheaf.geometry.detector;

/**
 * A bundle of parallel rays close to each other: only the few blocks that the bundle can meet are looked at, and the direction is prepared once.
 * Not safe for use by several threads.
 */
public final class ParallelRays {
    private final CrystalTracer[] tracers;
    private final double[][] directions;

    ParallelRays(CrystalTracer[] tracers, double dx, double dy, double dz) {
        this.tracers = tracers;
        this.directions = new double[tracers.length][6];
        for (int i = 0; i < tracers.length; i++) {
            tracers[i].localDirection(dx, dy, dz, directions[i]);
        }
    }

    /**
     * How many blocks the bundle can meet.
     *
     * @return the count
     */
    public int blocks() {
        return tracers.length;
    }

    /**
     * Follows one ray of the bundle.
     *
     * @param ox origin (mm)
     * @param oy origin (mm)
     * @param oz origin (mm)
     * @param length crystals that begin farther away than this may be left out (mm)
     * @param path is cleared and receives the crystals, nearest first
     */
    public void trace(double ox, double oy, double oz, double length, RayPath path) {
        path.clear();
        for (int i = 0; i < tracers.length; i++) {
            double in = tracers[i].enter(ox, oy, oz, directions[i]);
            if (in < length) {
                path.addBlock(i, in);
            }
        }
        for (int i = 0; i < path.crossedBlocks(); i++) {
            int b = path.crossedBlock(i);
            tracers[b].trace(ox, oy, oz, directions[b], path.crossedBlockEnter(i), length, path);
        }
    }
}
