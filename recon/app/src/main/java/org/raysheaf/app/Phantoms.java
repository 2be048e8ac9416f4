package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.phantom.LabelledVolume;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.io.volume.VolumeFile;

/** Reads phantoms with all that they name. */
final class Phantoms {
    private Phantoms() {}

    static Phantom read(Path file) throws IOException {
        PhantomDescription description = DescriptionReader.read(file, "phantom", PhantomDescription.class);
        LabelledVolume volume = description.volume();
        Image labels = volume == null
                ? null
                : VolumeFile.read(file.resolveSibling(volume.file())).image();
        return new Phantom(description, labels);
    }
}
