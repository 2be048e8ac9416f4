package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.DirectoryStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Optional;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.ray.Storage;
import org.raysheaf.geometry.port.Checkpoints;
import org.raysheaf.geometry.port.Snapshot;
import org.raysheaf.io.checkpoint.CheckpointFile;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.io.description.DescriptionWriter;
import org.raysheaf.io.file.AtomicFile;
import org.raysheaf.io.scratch.ScratchFolder;

/**
 * Where a reconstruction keeps what it needs to go on after a break: the folder {@code checkpoint} among its results, with what was asked for
 * and one file for each image. It comes into being with the first checkpoint and goes when all results are written.
 */
final class WorkFolder {
    private static final String FOLDER = "checkpoint";
    private static final String REQUEST = "unfinished.yaml";
    private static final String KIND = "unfinished";

    /** Events take at most this share of what Java may have; images, accumulators and the shard that is being sorted need the rest. */
    private static final double MOST_FOR_EVENTS = 0.4;

    private final Path results;
    private final Path folder;
    private final RunRequest request;
    private final Path scratch;
    private final Interruption interruption;

    /**
     * The work folder of a reconstruction.
     *
     * @param results folder for the results
     * @param request what was asked for
     * @param scratch where events go that do not fit into memory, or null for the folder in which the results' folder is
     * @param interruption tells when to stop
     */
    WorkFolder(Path results, RunRequest request, @Nullable Path scratch, Interruption interruption) {
        this.results = results;
        this.folder = results.resolve(FOLDER);
        this.request = request;
        this.scratch = scratch != null ? scratch : results.toAbsolutePath().resolveSibling("");
        this.interruption = interruption;
    }

    /** Whether a folder holds a reconstruction that was not finished. */
    static boolean isUnfinished(Path results) {
        return Files.exists(results.resolve(FOLDER).resolve(REQUEST));
    }

    /**
     * What an unfinished reconstruction was asked for.
     *
     * @param results its folder
     * @throws IOException if there is none
     */
    static RunRequest request(Path results) throws IOException {
        if (!Files.isDirectory(results)) {
            throw new IOException(results + ": there is no such folder, so nothing to go on with");
        }
        if (!isUnfinished(results)) {
            throw new IOException(results + ": expected an unfinished reconstruction, found "
                    + (Files.exists(results.resolve("result.json")) ? "a finished one" : "none")
                    + "; a checkpoint comes with the first pass over the events");
        }
        return DescriptionReader.read(results.resolve(FOLDER).resolve(REQUEST), KIND, RunRequest.class);
    }

    /** Where events may lie. */
    Storage storage() {
        return new Storage((long) (MOST_FOR_EVENTS * Runtime.getRuntime().maxMemory()), new ScratchFolder(scratch));
    }

    /**
     * The checkpoints of one image.
     *
     * @param name of the image, unique within the reconstruction
     * @param key digest of all that it depends on
     */
    Checkpoints checkpoints(String name, String key) {
        CheckpointFile file = new CheckpointFile(folder.resolve(name + ".h5"), key);
        return new Checkpoints() {
            @Override
            public Optional<Snapshot> latest() throws IOException {
                return file.latest();
            }

            @Override
            public void save(Snapshot snapshot) throws IOException {
                open();
                file.save(snapshot);
                interruption.safePoint();
            }
        };
    }

    private void open() throws IOException {
        if (!isUnfinished(results)) {
            Files.createDirectories(folder);
            String text = DescriptionWriter.render(KIND, request);
            AtomicFile.write(folder.resolve(REQUEST), true, file -> Files.writeString(file, text));
        }
    }

    /** Forgets everything: the results are there, or the work begins anew. The request goes first, so that half a folder is none. */
    void clear() throws IOException {
        if (!Files.isDirectory(folder)) {
            return;
        }
        Files.deleteIfExists(folder.resolve(REQUEST));
        try (DirectoryStream<Path> files = Files.newDirectoryStream(folder, "{*,.*}")) {
            for (Path file : files) {
                Files.delete(file);
            }
        }
        Files.delete(folder);
    }
}
