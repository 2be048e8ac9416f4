/**
 * List files: {@link org.raysheaf.io.list.ListWriter} writes them as a stream, {@link org.raysheaf.io.list.ListFile} reads them as a stream,
 * so a list never needs to fit into memory. {@link org.raysheaf.io.list.ListFormat} draws the format. Whatever is wrong with a file becomes
 * a {@link org.raysheaf.io.list.ListFileException} that says what and where; nothing of a damaged chunk is ever given to anybody.
 *
 * <p>The HDF5 beneath is the business of {@link org.raysheaf.io.hdf5}. Times in ps and s, energies in keV. Public.
 */
@NullMarked
package org.raysheaf.io.list;

import org.jspecify.annotations.NullMarked;
