package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.file.Path;

/** Thrown when an HDF5 file cannot be read as it should be. The message names file, place, what was expected and what was found. */
public final class Hdf5Exception extends IOException {
    private static final long serialVersionUID = 1L;

    /** What kind of trouble it is. */
    public enum Kind {
        /** The file is something else. */
        NOT_HDF5,
        /** The file ends before its own declared end. */
        TRUNCATED,
        /** A checksum does not match, or a structure contradicts itself or the file. */
        DAMAGED,
        /** The file is HDF5, but uses a structure that is not read here. */
        UNSUPPORTED,
        /** A number does not fit the type that was asked for. */
        OUT_OF_RANGE
    }

    private final Kind kind;

    /**
     * Makes the exception.
     *
     * @param kind what kind of trouble it is
     * @param file the file
     * @param place a dataset, group or structure in it, empty for the whole file
     * @param trouble what was expected, what was found, what to do
     */
    public Hdf5Exception(Kind kind, Path file, String place, String trouble) {
        super(file + (place.isEmpty() ? ": " : ", " + place + ": ") + trouble);
        this.kind = kind;
    }

    /**
     * What kind of trouble it is.
     *
     * @return the kind
     */
    public Kind kind() {
        return kind;
    }
}
