package org.raysheaf.io.volume;

import java.util.SplittableRandom;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

/** Volumes for tests. */
final class Volumes {
    private Volumes() {}

    static final Grid PLAIN = new Grid(5, 4, 3, 0.925, 0.925, 1.85, Pose.shift(new Vector3(1.5, -2.25, 10)));

    static final Grid OBLIQUE = new Grid(
            6,
            5,
            4,
            0.7,
            1.1,
            1.3,
            Pose.shift(new Vector3(3, -4, 5)).after(Pose.rotation(new Vector3(1, 2, -0.5), 0.6)));

    static Image image(Grid grid, long seed) {
        SplittableRandom random = new SplittableRandom(seed);
        Image image = new Image(grid);
        for (int i = 0; i < grid.voxels(); i++) {
            image.values()[i] = (float) random.nextDouble(-1, 100);
        }
        return image;
    }
}
