package org.raysheaf.engine;

import java.util.Random;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.IntStream;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.engine.ray.JosephTwin;
import org.raysheaf.engine.ray.Storage;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.port.Progress;

/**
 * Lines through a hot and a warm ball in a grid of a few hundred voxels: small enough for dense matrices in double precision, with the
 * system's matrix from the slow twin of the projector.
 */
final class TinyScan {
    static final Grid GRID = Grid.centred(7, 7, 6, 5);
    static final float BACKGROUND = 0.05f;

    final double[][] lines;
    final Image sensitivity = new Image(GRID);
    private final MemoryList list;

    TinyScan(int events, long seed) {
        Random random = new Random(seed);
        lines = new double[events][];
        for (int i = 0; i < events; i++) {
            boolean hot = random.nextInt(3) > 0;
            Vector3 centre = hot ? new Vector3(-6, 3, 2) : new Vector3(3, -2, 0);
            Vector3 point = centre.plus(direction(random).times((hot ? 4 : 11) * Math.cbrt(random.nextDouble())));
            Vector3 along = direction(random);
            Vector3 start = point.minus(along.times(40));
            Vector3 end = point.plus(along.times(45));
            lines[i] = new double[] {start.x(), start.y(), start.z(), end.x(), end.y(), end.z(), 1};
        }
        list = new MemoryList(1, lines, IntStream.range(0, events).toArray());
        for (int j = 0; j < GRID.voxels(); j++) {
            sensitivity.values()[j] = 2 + (j % 5) * 0.25f;
        }
    }

    private static Vector3 direction(Random random) {
        double z = 2 * random.nextDouble() - 1;
        double phi = 2 * Math.PI * random.nextDouble();
        double r = Math.sqrt(1 - z * z);
        return new Vector3(r * Math.cos(phi), r * Math.sin(phi), z);
    }

    EventStore store(int parts, ForkJoinPool pool) throws Exception {
        return EventLoader.load(
                list,
                list,
                FieldOfView.support(sensitivity, p -> true),
                EventSelection.ALL,
                parts,
                event -> BACKGROUND,
                Storage.MEMORY,
                pool,
                Progress.SILENT);
    }

    EventStore storeWithoutBackground(ForkJoinPool pool) throws Exception {
        return EventLoader.load(
                list,
                list,
                FieldOfView.support(sensitivity, p -> true),
                EventSelection.ALL,
                1,
                EventBackground.NONE,
                Storage.MEMORY,
                pool,
                Progress.SILENT);
    }

    /** The system's matrix, a row per event, from the end points in the precision in which sheaves hold them. */
    double[][] matrix() {
        double[][] rows = new double[lines.length][];
        for (int i = 0; i < rows.length; i++) {
            double[] l = lines[i];
            rows[i] = JosephTwin.row(
                    GRID,
                    new Vector3((float) l[0], (float) l[1], (float) l[2]),
                    new Vector3((float) l[3], (float) l[4], (float) l[5]));
        }
        return rows;
    }
}
