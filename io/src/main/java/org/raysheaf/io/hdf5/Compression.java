package org.raysheaf.io.hdf5;

/** How the chunks of a column are stored. Readers of HDF5 undo either without being asked. */
public enum Compression {
    /** As they are: fastest. */
    NONE,
    /** Bytes regrouped by significance (shuffle), then deflate at its fastest level. Pays where files are sent or kept. */
    DEFLATE
}
