package org.raysheaf.io.file;

import java.io.IOException;
import java.nio.channels.FileChannel;
import java.nio.file.AtomicMoveNotSupportedException;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.nio.file.StandardOpenOption;

/**
 * Writes a file completely or not at all: first under another name in the same folder, then moved into place. Whoever looks at the
 * folder sees the old file or the new one, never half of one; after a failure the old file is as it was. Safe for use by several
 * threads on different targets.
 */
public final class AtomicFile {
    /** So many unfinished files of one name are no accident any more. */
    private static final int MOST_LEFTOVERS = 100;

    private AtomicFile() {}

    /** Writes the content. */
    @FunctionalInterface
    public interface Body {
        /**
         * Writes the whole content into an existing, empty file.
         *
         * @param temporary the file
         * @throws IOException if that fails; then nothing reaches the target
         */
        void writeTo(Path temporary) throws IOException;
    }

    /**
     * Writes a file.
     *
     * @param target the file to make; its folder must exist
     * @param replace whether an existing file may be overwritten
     * @param body writes the content
     * @throws IOException if the target exists and may not be overwritten, if its folder is missing, or if writing fails
     */
    public static void write(Path target, boolean replace, Body body) throws IOException {
        requireFree(target, replace);
        Path temporary = makeTemporary(target);
        try {
            body.writeTo(temporary);
            try (FileChannel channel = FileChannel.open(temporary, StandardOpenOption.WRITE)) {
                channel.force(true);
            }
            requireFree(target, replace); // it may have come up meanwhile
            move(temporary, target);
        } finally {
            Files.deleteIfExists(temporary);
        }
    }

    /**
     * Checks, before long work, that a file may be written.
     *
     * @param target the file to make
     * @param replace whether an existing file may be overwritten
     * @throws IOException if the target exists and may not be overwritten, or if its folder is missing
     */
    public static void requireFree(Path target, boolean replace) throws IOException {
        if (Files.isDirectory(target)) {
            throw new IOException(target + ": expected the name of a file, found a folder");
        }
        if (!replace && Files.exists(target)) {
            throw new IOException(target + ": exists already; choose another name, or allow it with --replace");
        }
        Path folder = target.toAbsolutePath().getParent();
        if (folder == null || !Files.isDirectory(folder)) {
            throw new IOException(target + ": expected a folder " + folder + ", found none; make it first");
        }
    }

    private static Path makeTemporary(Path target) throws IOException {
        for (int i = 0; i < MOST_LEFTOVERS; i++) {
            Path temporary = target.resolveSibling("." + target.getFileName() + ".part" + i);
            if (isNew(temporary)) {
                return temporary;
            }
        }
        throw new IOException(target + ": expected to find a free name for a temporary file, found " + MOST_LEFTOVERS
                + " unfinished ones beside it; remove ." + target.getFileName() + ".part*");
    }

    /** Makes the file; if it is there already, somebody else is writing, or was stopped, and it stays theirs. */
    private static boolean isNew(Path file) throws IOException {
        try {
            Files.createFile(file); // Files.createTempFile would make a file that only its owner may read
            return true;
        } catch (FileAlreadyExistsException e) {
            return false;
        }
    }

    private static void move(Path from, Path to) throws IOException {
        try {
            Files.move(from, to, StandardCopyOption.ATOMIC_MOVE);
        } catch (AtomicMoveNotSupportedException e) {
            Files.move(from, to, StandardCopyOption.REPLACE_EXISTING);
        }
    }
}
