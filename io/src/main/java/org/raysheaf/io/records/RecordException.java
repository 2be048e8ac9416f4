package org.raysheaf.io.records;

import java.io.IOException;

/** Lab records that cannot be read, with the place where: a byte offset or a line, what was expected and found, and what to do. */
public final class RecordException extends IOException {
    private static final long serialVersionUID = 1;

    RecordException(String message) {
        super(message);
    }

    RecordException(String message, Throwable cause) {
        super(message, cause);
    }
}
