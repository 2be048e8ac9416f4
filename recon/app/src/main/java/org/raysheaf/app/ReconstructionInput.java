package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import org.jspecify.annotations.Nullable;
import org.raysheaf.io.description.DescriptionException;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.io.hdf5.Hdf5File;

/**
 * What a reconstruction starts from. Files are known by what is in them, never by their names.
 *
 * @param list the list
 * @param plan how to reconstruct it
 * @param base the file that the plan came from, from whose folder its paths start; null if there is none
 */
record ReconstructionInput(
        Path list, ReconstructionPlan plan, @Nullable Path base) {
    /**
     * Finds list and plan.
     *
     * @param input a list, or a reconstruction that names one
     * @param with the plan for a list, or null
     */
    static ReconstructionInput of(Path input, @Nullable Path with, Common common) throws IOException {
        if (isList(input)) {
            if (with != null) {
                return new ReconstructionInput(input, read(with), with);
            }
            common.note(
                    "no description given: 20 passes, 1 subset (MLEM), no filter, voxels of half the crystal pitch over the field of view, in kBq/mL");
            return new ReconstructionInput(input, ReconstructionPlan.bare(), null);
        }
        if (with != null) {
            throw common.misused(
                    "--with goes with a list, but " + input + " is a reconstruction; leave one of them out");
        }
        ReconstructionPlan plan = read(input);
        String named = plan.list();
        if (named == null) {
            throw new IOException(input + ": names no list; add a line \"list: LIST.h5\", or give the list itself");
        }
        return new ReconstructionInput(input.resolveSibling(named), plan, input);
    }

    private static ReconstructionPlan read(Path file) throws IOException {
        return DescriptionReader.read(file, "reconstruction", ReconstructionPlan.class);
    }

    private static boolean isList(Path file) throws IOException {
        if (Files.isDirectory(file)) {
            throw new IOException(file + ": expected a list or a reconstruction, found a folder");
        }
        if (Hdf5File.recognises(file)) {
            return true;
        }
        try {
            DescriptionReader.kindOf(file);
            return false;
        } catch (DescriptionException e) {
            throw new IOException(
                    file + ": expected a list (HDF5) or a reconstruction (text that begins with \"raysheaf:"
                            + " reconstruction/1\"), found neither: "
                            + e.problems().get(0).message(),
                    e);
        }
    }
}
