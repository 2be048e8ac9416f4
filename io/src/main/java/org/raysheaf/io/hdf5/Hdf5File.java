package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;

/**
 * An HDF5 file open for reading. Objects taken from it can be used until it is closed. Every read either gives what was written or throws
 * {@link Hdf5Exception}; where the file carries no checksum (superblocks and headers of the older kind, data without a checksum beside
 * it), damage that contradicts nothing cannot be noticed. Not safe for use by several threads.
 */
public final class Hdf5File implements AutoCloseable {
    private final FileBytes bytes;
    private final StoredGroup root;

    private Hdf5File(FileBytes bytes, StoredGroup root) {
        this.bytes = bytes;
        this.root = root;
    }

    /**
     * Opens a file.
     *
     * @param path the file
     * @return the file; the caller closes it
     * @throws Hdf5Exception if it is not HDF5, truncated, damaged, or uses what is not read here
     * @throws IOException if it cannot be read
     */
    public static Hdf5File open(Path path) throws IOException {
        FileBytes bytes = new FileBytes(path);
        try {
            Superblock superblock = Superblock.read(bytes);
            ObjectHeader header = ObjectHeader.read(bytes, superblock.rootAddress(), "root group");
            return new Hdf5File(bytes, new StoredGroup(bytes, "", header));
        } catch (IOException | RuntimeException e) {
            bytes.close();
            throw e;
        }
    }

    /**
     * Tells from its first bytes whether a file is HDF5, whatever its name; the rest may be damaged.
     *
     * @param path the file
     * @return whether it begins as an HDF5 file does
     * @throws IOException if it cannot be read
     */
    public static boolean recognises(Path path) throws IOException {
        byte[] signature = Superblock.signature();
        try (InputStream in = Files.newInputStream(path)) {
            return Arrays.equals(in.readNBytes(signature.length), signature);
        }
    }

    /**
     * The outermost group.
     *
     * @return the group that holds everything in the file
     */
    public StoredGroup root() {
        return root;
    }

    @Override
    public void close() throws IOException {
        bytes.close();
    }
}
