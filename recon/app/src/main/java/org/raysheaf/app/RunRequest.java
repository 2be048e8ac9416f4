package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Default;

/**
 * What a reconstruction was asked for on the command line ({@code raysheaf: unfinished/1}), kept beside its checkpoints so that it can go on.
 *
 * @param input a list, or a reconstruction that names one; an absolute path
 * @param with the plan for a list, or null; an absolute path
 * @param reference the phantom that the list is of, for a calibration, or null; an absolute path
 * @param halves whether the images of the odd and of the even events were asked for
 * @param lanes accumulator images, or 0
 */
record RunRequest(
        String input,
        @Nullable String with,
        @Nullable String reference,
        @Default("false") boolean halves,
        @Default("0") int lanes) {
    static RunRequest of(Path input, @Nullable Path with, @Nullable Path reference, boolean halves, int lanes) {
        return new RunRequest(absolute(input), absoluteOrNull(with), absoluteOrNull(reference), halves, lanes);
    }

    private static String absolute(Path path) {
        return path.toAbsolutePath().normalize().toString();
    }

    private static @Nullable String absoluteOrNull(@Nullable Path path) {
        return path == null ? null : absolute(path);
    }

    /** List, plan and the folder from which the plan's paths start. */
    ReconstructionInput find(Common common) throws IOException {
        return ReconstructionInput.of(Path.of(input), with == null ? null : Path.of(with), common);
    }
}
