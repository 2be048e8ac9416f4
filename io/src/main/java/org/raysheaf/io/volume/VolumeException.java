package org.raysheaf.io.volume;

import java.io.IOException;
import java.nio.file.Path;

/** Thrown when a file is no volume that can be used; the message names the file, what was expected and what was found. */
public final class VolumeException extends IOException {
    private static final long serialVersionUID = 1L;

    VolumeException(Path file, String message) {
        super(file + ": " + message);
    }

    VolumeException(Path file, String message, Throwable cause) {
        super(file + ": " + message, cause);
    }
}
