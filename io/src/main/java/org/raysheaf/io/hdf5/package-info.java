/**
 * The part of the open HDF5 format that lists and volumes need, written and read by our own small classes.
 *
 * <p>Writing starts at {@link org.raysheaf.io.hdf5.Hdf5Writer}: one file of any size, as a stream, with flat memory, which appears under
 * its name only when it is complete. Reading starts at {@link org.raysheaf.io.hdf5.Hdf5File}: every size and address is checked against the
 * file before anything is allocated or followed, every checksum that the file carries is verified, and whatever is wrong becomes an
 * {@link org.raysheaf.io.hdf5.Hdf5Exception}, never another exception, a hang or a silently wrong number.
 *
 * <p>Why not a library: the one kept pure-Java library cannot write beyond memory, and while reading it ignores Fletcher checksums,
 * returns garbage for truncated contiguous data and meets damaged headers with arbitrary runtime exceptions or huge allocations. A guard
 * around it would have to walk the same structures as a reader does, so the walk is the reader; tests let that library, h5py and h5dump
 * read what is written here. What is read: superblocks 0 to 3, also behind a user block, both kinds of object header, groups as symbol tables or compact links,
 * compact, contiguous and chunked (B-tree version 1) layouts, the filters shuffle, deflate, lzf and fletcher32,
 * numbers, texts and members of compound values. That is what h5py, MATLAB
 * and the HDF5 library write unless asked for the newest structures ({@code libver="latest"}), which are refused by name.
 *
 * <p>Byte layouts follow the "HDF5 File Format Specification", version 3.0 (The HDF Group). Public.
 */
@NullMarked
package org.raysheaf.io.hdf5;

import org.jspecify.annotations.NullMarked;
