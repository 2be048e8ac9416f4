package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.file.Path;

/**
 * Writes one HDF5 file of any size as a stream. The bytes grow in a temporary file in the same folder; {@link #commit()} completes it,
 * forces it to the disk and moves it to its name in one step. Closing without commit leaves nothing behind:
 *
 * <pre>
 * try (Hdf5Writer file = Hdf5Writer.create(path, false)) {
 *     ArrayWriter activity = file.root().array("activity", values, nz, ny, nx);
 *     activity.attribute("unit", "kBq/mL");
 *     file.commit();
 * }
 * </pre>
 *
 * <p>The file starts with a superblock of version 2:
 *
 * <pre>
 * offset  bytes
 *      0      8  89 "HDF" 0d 0a 1a 0a
 *      8      4  version 2, bytes per address 8, bytes per length 8, flags 0
 *     12      8  base address, 0
 *     20      8  no extension
 *     28      8  end of the file
 *     36      8  address of the root group's header
 *     44      4  checksum (lookup3) of everything before
 * </pre>
 *
 * <p>The same calls give the same bytes: no times, no chance. Not safe for use by several threads.
 */
public final class Hdf5Writer implements AutoCloseable {
    private static final int SUPERBLOCK_BYTES = 48;

    private final PendingFile file;
    private final GroupWriter root;

    private Hdf5Writer(PendingFile file) {
        this.file = file;
        this.root = new GroupWriter(file);
    }

    /**
     * Starts a file.
     *
     * @param path where it is to appear; the folder exists
     * @param replace whether a file that is already there may be replaced
     * @return the writer; the caller closes it
     * @throws java.nio.file.FileAlreadyExistsException if the path exists and must not be replaced
     * @throws IOException if the folder cannot be written to
     */
    public static Hdf5Writer create(Path path, boolean replace) throws IOException {
        return new Hdf5Writer(new PendingFile(path, replace, SUPERBLOCK_BYTES));
    }

    /**
     * The outermost group.
     *
     * @return the group that holds everything in the file
     */
    public GroupWriter root() {
        return root;
    }

    /**
     * Completes the file and lets it appear under its name. Call once, last.
     *
     * @throws IOException if the disk does not take it
     */
    public void commit() throws IOException {
        long rootAddress = root.finish(file);
        ByteBuffer superblock = Messages.buffer(SUPERBLOCK_BYTES);
        superblock.put(Superblock.signature()).put(new byte[] {2, 8, 8, 0});
        superblock.putLong(0).putLong(Messages.UNDEFINED).putLong(file.end()).putLong(rootAddress);
        superblock.putInt(Lookup3.hash(superblock, superblock.position()));
        file.commit(superblock.flip());
    }

    /**
     * Ends the writing; without a commit before, nothing remains of the file.
     *
     * @throws IOException if the temporary file cannot be removed
     */
    @Override
    public void close() throws IOException {
        file.close();
    }
}
