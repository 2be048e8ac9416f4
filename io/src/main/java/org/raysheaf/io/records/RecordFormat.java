package org.raysheaf.io.records;

/** How records lie in a data file. */
public sealed interface RecordFormat permits TextFormat, BinaryFormat, Hdf5Format, NpyFormat {}
