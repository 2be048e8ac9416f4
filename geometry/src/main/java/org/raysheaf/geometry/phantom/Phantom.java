package org.raysheaf.geometry.phantom;

import java.util.List;
import org.raysheaf.geometry.solid.Bounds;
import org.raysheaf.geometry.solid.Placed;

/**
 * A phantom in its place: what is where, and how much activity there is. Immutable, safe for use by several threads.
 */
public final class Phantom {
    private static final double MM3_PER_ML = 1000;

    private final PhantomDescription description;
    private final Placed[] solids;

    /**
     * Places the parts of a description.
     *
     * @param description a sound description
     */
    public Phantom(PhantomDescription description) {
        this.description = description;
        this.solids = description.parts().stream().map(PhantomPart::placed).toArray(Placed[]::new);
    }

    /**
     * The description that this phantom was placed from.
     *
     * @return the description
     */
    public PhantomDescription description() {
        return description;
    }

    /**
     * The parts, in the order in which later ones replace earlier ones.
     *
     * @return an unmodifiable list
     */
    public List<PhantomPart> parts() {
        return description.parts();
    }

    /**
     * The solid of a part, whether or not later parts replace some of it.
     *
     * @param part index of the part
     * @return the solid in its place
     */
    public Placed solid(int part) {
        return solids[part];
    }

    /**
     * The part that fills a point.
     *
     * @param x the point (mm)
     * @param y the point (mm)
     * @param z the point (mm)
     * @return index of the last part that holds the point, or −1 outside all parts
     */
    public int partAt(double x, double y, double z) {
        int part = solids.length - 1;
        while (part >= 0 && !solids[part].contains(x, y, z)) {
            part--;
        }
        return part;
    }

    /**
     * Activity concentration at a point.
     *
     * @param x the point (mm)
     * @param y the point (mm)
     * @param z the point (mm)
     * @return the concentration (Bq/mL), 0 outside all parts
     */
    public double concentrationBqPerMlAt(double x, double y, double z) {
        int part = partAt(x, y, z);
        return part < 0 ? 0 : parts().get(part).concentrationBqPerMl();
    }

    /**
     * The smallest box along the axes that holds all parts.
     *
     * @return the box
     */
    public Bounds bounds() {
        Bounds bounds = solids[0].bounds();
        for (Placed solid : solids) {
            bounds = bounds.with(solid.bounds());
        }
        return bounds;
    }

    /**
     * Volume of a part that no later part replaces: exact where no later part can overlap it, else an estimate, see
     * {@link VisibleVolume}.
     *
     * @param part index of the part
     * @return the volume (mm³)
     */
    public Estimate visibleVolumeMm3(int part) {
        return VisibleVolume.of(solids, part);
    }

    /**
     * Activity of a part at the start, as far as no later part replaces it.
     *
     * @param part index of the part
     * @return the activity (Bq); exact or estimated like the volume
     */
    public Estimate activityBq(int part) {
        double concentration = parts().get(part).concentrationBqPerMl();
        if (concentration == 0) {
            return Estimate.exactly(0);
        }
        return visibleVolumeMm3(part).times(concentration / MM3_PER_ML);
    }

    /**
     * Activity of all parts at the start.
     *
     * @return the activity (Bq); exact if every radioactive part is
     */
    public Estimate activityBq() {
        Estimate sum = Estimate.exactly(0);
        for (int part = 0; part < solids.length; part++) {
            sum = sum.plus(activityBq(part));
        }
        return sum;
    }
}
