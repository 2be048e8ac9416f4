package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.Locale;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.correct.Attenuation;
import org.raysheaf.engine.correct.PhantomMaps;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.io.volume.VolumeFile;

/**
 * What attenuates: from a phantom, beyond which there is nothing, or from a volume, beyond which nothing is known.
 *
 * @param attenuation the map
 * @param volume path of the volume that it came from, or null if it came from a phantom
 */
record MuMap(Attenuation attenuation, @Nullable Path volume) {
    static final double VOXEL_MM = 1;

    private static final double MM_PER_CM = 10;
    private static final double MOST_PER_CM = 50;

    /**
     * Share of the activity that an image may show beyond a volume. Even where nothing is, an image of few passes shows some: up to 3 % in air round a
     * uniform cylinder.
     */
    private static final double MOST_OUTSIDE = 0.10;

    static MuMap of(Phantom phantom) {
        return new MuMap(new Attenuation(PhantomMaps.attenuation(phantom, VOXEL_MM)), null);
    }

    static MuMap read(Path volume, FieldOfView view) throws IOException {
        Image map = VolumeFile.read(volume).image().copy();
        for (int j = 0; j < map.values().length; j++) {
            float perCm = map.values()[j];
            if (!(perCm >= 0 && perCm < MOST_PER_CM)) {
                throw new IOException(volume + ": expected attenuation coefficients at 511 keV in 1/cm, from 0 to 50;"
                        + " found " + perCm + " in voxel " + j);
            }
            map.values()[j] = (float) (perCm / MM_PER_CM);
        }
        MuMap found = new MuMap(new Attenuation(map), volume);
        if (!found.meets(view)) {
            throw new IOException(String.format(
                    Locale.ROOT,
                    "%s: expected a volume that covers the object, found none of its voxels in the field of view (%.1f mm round"
                            + " the axis, %.1f mm long); look at its origin and axes, in mm",
                    volume,
                    view.radiusMm(),
                    view.lengthMm()));
        }
        return found;
    }

    private boolean meets(FieldOfView view) {
        Grid grid = attenuation.muPerMm().grid();
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    Vector3 p = grid.centre(x, y, z);
                    if (Math.hypot(p.x(), p.y()) < view.radiusMm() && Math.abs(p.z()) < 0.5 * view.lengthMm()) {
                        return true;
                    }
                }
            }
        }
        return false;
    }

    /**
     * Share of the activity of an image that lies beyond the map.
     *
     * @throws IOException if the map came from a volume and that is too much: photons from there are attenuated by matter that the volume
     *     does not know
     */
    double requireCovers(Image activity) throws IOException {
        Grid known = attenuation.muPerMm().grid();
        Grid grid = activity.grid();
        double outside = 0;
        double all = 0;
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    double here = activity.at(x, y, z);
                    all += here;
                    outside += holds(known, known.indices(grid.centre(x, y, z))) ? 0 : here;
                }
            }
        }
        double share = all > 0 ? outside / all : 0;
        if (volume != null && share > MOST_OUTSIDE) {
            throw new IOException(String.format(
                    Locale.ROOT,
                    "%s: expected a volume that covers the object, found %.0f %% of the activity outside it; look at its origin"
                            + " and axes, in mm, or add what is missing",
                    volume,
                    100 * share));
        }
        return share;
    }

    private static boolean holds(Grid grid, Vector3 index) {
        return index.x() > -0.5
                && index.y() > -0.5
                && index.z() > -0.5
                && index.x() < grid.nx() - 0.5
                && index.y() < grid.ny() - 0.5
                && index.z() < grid.nz() - 0.5;
    }
}
