package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.EstimationSettings;
import org.raysheaf.engine.Estimator;
import org.raysheaf.engine.OtherGrid;
import org.raysheaf.engine.PassListener;
import org.raysheaf.engine.StartSettings;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.engine.ray.Storage;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.volume.Volume;
import org.raysheaf.io.volume.VolumeFile;

/**
 * What an estimate starts from, if its settings name something: an image that is there already, or a first estimate on coarse voxels.
 *
 * @param part the events
 * @param model of these events
 * @param selection which of them take part
 */
record FirstImage(EventSource part, CorrectedModel model, EventSelection selection) {
    /** Activity (Bq/mL) on the grid of the model, or null for a uniform start. */
    @Nullable
    Image of(EstimationSettings settings, @Nullable Path base, Storage storage, ForkJoinPool pool, Progress progress)
            throws IOException {
        StartSettings start = settings.start();
        if (start == null) {
            return null;
        }
        String volume = start.volume();
        Integer passes = start.coarsePasses();
        if (volume != null) {
            return read(base == null ? Path.of(volume) : base.resolveSibling(volume));
        }
        return passes == null ? null : coarse(settings.coarse(passes), storage, pool, progress);
    }

    private Image read(Path file) throws IOException {
        Volume volume = VolumeFile.read(file);
        boolean kilo = volume.unit().isEmpty() || volume.unit().equals(ResultFolder.UNIT);
        if (!kilo && !volume.unit().equals("Bq/mL")) {
            throw new IOException(
                    file + ": expected a start image in kBq/mL or Bq/mL, found the unit " + volume.unit());
        }
        Image image = OtherGrid.interpolated(volume.image(), model.support().grid());
        double inside = 0;
        for (int j = 0; j < image.values().length; j++) {
            image.values()[j] *= kilo ? 1000 : 1;
            inside += model.support().values()[j] * Math.max(0, image.values()[j]);
        }
        if (!(inside > 0)) {
            throw new IOException(
                    file + ": expected a start image with activity where this reconstruction may have some,"
                            + " found none; is it of another place, or empty?");
        }
        return image;
    }

    private Image coarse(EstimationSettings settings, Storage storage, ForkJoinPool pool, Progress progress)
            throws IOException {
        try (EventStore store = EventLoader.load(
                part,
                model.sheaves(),
                OtherGrid.summed(model.support()),
                selection,
                settings.parts(),
                model.background(),
                storage,
                pool,
                progress)) {
            Image image = new Estimator(store, OtherGrid.summed(model.counts()), settings, pool)
                    .run(PassListener.SILENT, progress)
                    .image();
            return OtherGrid.interpolated(image, model.support().grid());
        }
    }
}
