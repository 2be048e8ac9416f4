package org.raysheaf.io.checkpoint;

import java.io.IOException;
import java.nio.file.DirectoryStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Map;
import java.util.Optional;
import org.raysheaf.geometry.port.Checkpoints;
import org.raysheaf.geometry.port.Snapshot;
import org.raysheaf.io.hdf5.GroupWriter;
import org.raysheaf.io.hdf5.Hdf5File;
import org.raysheaf.io.hdf5.Hdf5Writer;
import org.raysheaf.io.hdf5.StoredDataset;
import org.raysheaf.io.hdf5.StoredGroup;

/**
 * The latest snapshot of one computation as an HDF5 file, with the root attributes {@code raysheaf} ("checkpoint/1") and {@code key} (a
 * digest of what the computation depends on), and two groups: {@code images} (float32) and {@code figures} (float64), one dataset for each
 * name, each with its CRC-32C. The file is written under another name, forced to disk, and then moved into place, so that there is always
 * a whole one. Used by one thread.
 */
public final class CheckpointFile implements Checkpoints {
    private static final String MARK = "raysheaf";
    private static final String VERSION = "checkpoint/1";
    private static final String KEY = "key";
    private static final String IMAGES = "images";
    private static final String FIGURES = "figures";

    private final Path file;
    private final String key;

    /**
     * The checkpoint of a computation.
     *
     * @param file where it is, or is going to be; its folder must exist when it is saved
     * @param key digest of everything that the computation depends on
     */
    public CheckpointFile(Path file, String key) {
        this.file = file;
        this.key = key;
    }

    @Override
    public Optional<Snapshot> latest() throws IOException {
        if (!Files.exists(file)) {
            return Optional.empty();
        }
        try (Hdf5File stored = Hdf5File.open(file)) {
            String mark = stored.root().attributes().text(MARK).orElse("nothing");
            if (!mark.equals(VERSION)) {
                throw new IOException(
                        file + ": expected a checkpoint (raysheaf = \"" + VERSION + "\"), found \"" + mark + "\"");
            }
            if (!stored.root().attributes().text(KEY).orElse("").equals(key)) {
                throw new IOException(
                        file
                                + ": expected the checkpoint of the same list with the same settings, found that of others;"
                                + " the list, the description or a file that it names has changed since. Start again without --resume");
            }
            return Optional.of(read(stored));
        }
    }

    private static Snapshot read(Hdf5File stored) throws IOException {
        Snapshot snapshot = new Snapshot();
        StoredGroup images = group(stored, IMAGES);
        for (String name : images.names()) {
            snapshot.put(name, dataset(images, name).floats());
        }
        StoredGroup figures = group(stored, FIGURES);
        for (String name : figures.names()) {
            snapshot.put(name, dataset(figures, name).doubles());
        }
        return snapshot;
    }

    private static StoredGroup group(Hdf5File stored, String name) throws IOException {
        return stored.root()
                .group(name)
                .orElseThrow(() ->
                        new IOException("the checkpoint has no group " + name + "; start again without --resume"));
    }

    private static StoredDataset dataset(StoredGroup group, String name) throws IOException {
        return group.dataset(name).orElseThrow(() -> new IOException("the checkpoint has no dataset " + name));
    }

    @Override
    public void save(Snapshot snapshot) throws IOException {
        removeUnfinished();
        try (Hdf5Writer writer = Hdf5Writer.create(file, true)) {
            writer.root().attribute(MARK, VERSION);
            writer.root().attribute(KEY, key);
            GroupWriter images = writer.root().group(IMAGES);
            for (Map.Entry<String, float[]> image : snapshot.images().entrySet()) {
                images.array(image.getKey(), image.getValue(), image.getValue().length);
            }
            GroupWriter figures = writer.root().group(FIGURES);
            for (Map.Entry<String, double[]> figure : snapshot.figures().entrySet()) {
                figures.array(figure.getKey(), figure.getValue(), figure.getValue().length);
            }
            writer.commit();
        } catch (IOException e) {
            throw new IOException(
                    file + ": the checkpoint could not be written (" + e.getMessage()
                            + "); the one before it is kept. Make room, then go on with --resume",
                    e);
        }
    }

    /** What a program that was killed while it wrote left behind. */
    private void removeUnfinished() throws IOException {
        Path folder = file.toAbsolutePath().getParent();
        if (folder == null) {
            return;
        }
        try (DirectoryStream<Path> left = Files.newDirectoryStream(folder, "." + file.getFileName() + ".*.partial")) {
            for (Path path : left) {
                Files.deleteIfExists(path);
            }
        }
    }
}
