package org.raysheaf.io.list;

import java.io.IOException;
import java.nio.file.Path;
import org.raysheaf.io.hdf5.Hdf5Exception;

/** Thrown when a list file cannot be trusted. The message names file, dataset, index, what was expected, what was found, what to do. */
public final class ListFileException extends IOException {
    private static final long serialVersionUID = 1L;

    /** What kind of trouble it is. */
    public enum Kind {
        /** The file is no HDF5 file. */
        NOT_HDF5,
        /** It is HDF5, but not a list. */
        NOT_A_LIST,
        /** It is a list of a newer version. */
        TOO_NEW,
        /** It uses a part of HDF5 that is not read here. */
        UNSUPPORTED,
        /** The file ends before its own declared end. */
        TRUNCATED,
        /** A checksum does not match, or the file contradicts itself. */
        DAMAGED,
        /** A column or attribute that must be there is missing. */
        MISSING,
        /** A column or attribute has a type, shape or unit that it cannot have. */
        WRONG_TYPE,
        /** Columns differ in length from each other or from the declared number of events. */
        INCONSISTENT_LENGTHS,
        /** An event names an element that the detector system does not have. */
        ELEMENT_OUT_OF_RANGE,
        /** A value that cannot be: not a number, infinite, a negative time or energy, or a flag other than 0 and 1. */
        IMPOSSIBLE_VALUE,
        /** The file was changed after it was opened. */
        CHANGED
    }

    private final Kind kind;

    /**
     * Makes the exception.
     *
     * @param kind what kind of trouble it is
     * @param file the file
     * @param place a column or attribute in it, empty for the whole file
     * @param trouble what was expected, what was found, what to do
     */
    ListFileException(Kind kind, Path file, String place, String trouble) {
        super(file + (place.isEmpty() ? ": " : ", " + place + ": ") + trouble);
        this.kind = kind;
    }

    /** Gives trouble with the HDF5 beneath its name as trouble with the list. */
    ListFileException(Hdf5Exception cause) {
        super(cause.getMessage(), cause);
        this.kind = switch (cause.kind()) {
            case NOT_HDF5 -> Kind.NOT_HDF5;
            case TRUNCATED -> Kind.TRUNCATED;
            case DAMAGED -> Kind.DAMAGED;
            case UNSUPPORTED -> Kind.UNSUPPORTED;
            case OUT_OF_RANGE -> Kind.IMPOSSIBLE_VALUE;
        };
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
