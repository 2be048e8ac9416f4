package org.raysheaf.engine.correct;

import org.raysheaf.engine.ray.Joseph;
import org.raysheaf.engine.ray.Lattice;
import org.raysheaf.engine.ray.Walks;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.response.LineOfResponse;

/** Line integrals through an image by the projector of the engine, one at a time. Belongs to one thread; {@link #twin} serves another. */
final class RaySums {
    private final Lattice lattice;
    private final float[] values;
    private final Joseph joseph;
    private final Walks walk;
    private final float[] ends = new float[6];

    RaySums(Image image) {
        lattice = new Lattice(image.grid());
        values = lattice.fromImage(image);
        joseph = new Joseph(lattice);
        walk = new Walks(lattice, 1);
    }

    private RaySums(RaySums other) {
        lattice = other.lattice;
        values = other.values;
        joseph = new Joseph(lattice);
        walk = new Walks(lattice, 1);
    }

    RaySums twin() {
        return new RaySums(this);
    }

    /** The integral between two points (unit of the image times mm). */
    double along(double ax, double ay, double az, double bx, double by, double bz) {
        ends[0] = (float) ax;
        ends[1] = (float) ay;
        ends[2] = (float) az;
        ends[3] = (float) bx;
        ends[4] = (float) by;
        ends[5] = (float) bz;
        walk.set(0, ends, 0, 1);
        joseph.aim(walk, 0);
        return joseph.forward(values);
    }

    double along(LineOfResponse line) {
        return along(line.a(0), line.a(1), line.a(2), line.b(0), line.b(1), line.b(2));
    }
}
