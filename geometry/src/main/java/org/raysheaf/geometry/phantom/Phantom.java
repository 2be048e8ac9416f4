package org.raysheaf.geometry.phantom;

import java.util.ArrayList;
import java.util.List;
import java.util.Objects;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.Material;
import org.raysheaf.geometry.matter.Materials;
import org.raysheaf.geometry.settings.Problems;
import org.raysheaf.geometry.solid.Bounds;
import org.raysheaf.geometry.solid.Placed;

/**
 * A phantom in its place: what is where, and how much activity there is.
 *
 * <p>Its matter is numbered in <em>regions</em>: first the parts, in their order, then the labels of its volume. Immutable, safe for use by
 * several threads.
 */
public final class Phantom {
    private static final double MM3_PER_ML = 1000;

    private final PhantomDescription description;
    private final Placed[] solids;
    private final @Nullable VoxelRegions voxels;

    /**
     * Places the parts of a description that has no volume.
     *
     * @param description a sound description
     */
    public Phantom(PhantomDescription description) {
        this(description, null);
    }

    /**
     * Places the parts of a description.
     *
     * @param description a sound description
     * @param volume the volume of labels that it names, or null if it names none
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if one of the two is there without the other, or a voxel holds no label
     */
    public Phantom(PhantomDescription description, @Nullable Image volume) {
        LabelledVolume labels = description.volume();
        new Problems("phantom " + description.name())
                .rule(
                        (labels == null) == (volume == null),
                        "volume",
                        labels == null
                                ? "expected no volume, found one"
                                : "expected the volume " + labels.file() + ", found none")
                .orThrow();
        this.description = description;
        this.solids = description.parts().stream().map(PhantomPart::placed).toArray(Placed[]::new);
        this.voxels = labels == null || volume == null ? null : new VoxelRegions(labels, volume);
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
     * The solids, in the order in which later ones replace earlier ones.
     *
     * @return an unmodifiable list
     */
    public List<PhantomPart> parts() {
        return description.parts();
    }

    private List<LabelledVolume.Label> labels() {
        LabelledVolume volume = description.volume();
        return volume == null ? List.of() : volume.labels();
    }

    /**
     * Number of regions.
     *
     * @return parts and labels together
     */
    public int regions() {
        return solids.length + labels().size();
    }

    /**
     * Name of a region.
     *
     * @param region its number
     * @return the name of the part or label
     */
    public String name(int region) {
        return region < solids.length
                ? parts().get(region).name()
                : labels().get(region - solids.length).name();
    }

    /**
     * What a region is made of.
     *
     * @param region its number
     * @return the material
     */
    public Material material(int region) {
        String name = region < solids.length
                ? parts().get(region).material()
                : labels().get(region - solids.length).material();
        return Materials.resolve(name, description.materials()).orElseThrow();
    }

    /**
     * Activity concentration of a region.
     *
     * @param region its number
     * @return the concentration at the start (Bq/mL)
     */
    public double concentrationBqPerMl(int region) {
        return region < solids.length
                ? parts().get(region).concentrationBqPerMl()
                : 1000 * labels().get(region - solids.length).concentrationKBqPerMl();
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
     * The grid of the volume.
     *
     * @return the grid, or null without a volume
     */
    public @Nullable Grid volumeGrid() {
        return voxels == null ? null : voxels.grid();
    }

    /**
     * The region of a voxel of the volume, whether or not a solid replaces it.
     *
     * @param voxel index of the voxel
     * @return the region, or −1 if the voxel is nothing
     */
    public int regionOfVoxel(int voxel) {
        int label = Objects.requireNonNull(voxels).labelOf(voxel);
        return label < 0 ? -1 : solids.length + label;
    }

    /**
     * The region that fills a point.
     *
     * @param x the point (mm)
     * @param y the point (mm)
     * @param z the point (mm)
     * @return the last solid that holds the point, else the label there, else −1
     */
    public int regionAt(double x, double y, double z) {
        for (int part = solids.length - 1; part >= 0; part--) {
            if (solids[part].contains(x, y, z)) {
                return part;
            }
        }
        if (voxels == null) {
            return -1;
        }
        int label = voxels.labelAt(x, y, z);
        return label < 0 ? -1 : solids.length + label;
    }

    /**
     * Activity concentration at a point. Sources without volume have none.
     *
     * @param x the point (mm)
     * @param y the point (mm)
     * @param z the point (mm)
     * @return the concentration (Bq/mL), 0 where nothing is
     */
    public double concentrationBqPerMlAt(double x, double y, double z) {
        int region = regionAt(x, y, z);
        return region < 0 ? 0 : concentrationBqPerMl(region);
    }

    /**
     * The smallest box along the axes that holds all matter; the origin if there is none.
     *
     * @return the box
     */
    public Bounds bounds() {
        List<Bounds> all = new ArrayList<>();
        for (Placed solid : solids) {
            all.add(solid.bounds());
        }
        if (voxels != null) {
            all.add(voxels.bounds());
        }
        return all.stream().reduce(Bounds::with).orElse(new Bounds(Vector3.ZERO, Vector3.ZERO));
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
     * Activity of a region at the start, as far as no later part replaces it.
     *
     * @param region its number
     * @return the activity (Bq); exact or estimated like the volume. A voxel counts for a label if its centre is in no solid
     */
    public Estimate activityBq(int region) {
        double concentration = concentrationBqPerMl(region);
        if (concentration == 0) {
            return Estimate.exactly(0);
        }
        if (region < solids.length) {
            return visibleVolumeMm3(region).times(concentration / MM3_PER_ML);
        }
        Grid grid = Objects.requireNonNull(voxels).grid();
        long count = 0;
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    if (regionOfVoxel(grid.index(x, y, z)) == region) {
                        Vector3 centre = grid.centre(x, y, z);
                        count += regionAt(centre.x(), centre.y(), centre.z()) == region ? 1 : 0;
                    }
                }
            }
        }
        return Estimate.exactly(count * grid.voxelVolumeMm3() * concentration / MM3_PER_ML);
    }

    /**
     * Activity of all regions and sources at the start.
     *
     * @return the activity (Bq); exact if that of every radioactive region is
     */
    public Estimate activityBq() {
        Estimate sum = Estimate.exactly(0);
        for (int region = 0; region < regions(); region++) {
            sum = sum.plus(activityBq(region));
        }
        for (Source source : description.sources()) {
            sum = sum.plus(Estimate.exactly(1000 * source.activityKBq()));
        }
        return sum;
    }
}
