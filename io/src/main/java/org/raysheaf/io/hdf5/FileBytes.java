package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.FileChannel;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.util.Arrays;

/** The bytes of a file, read by position and never beyond its end or beyond reason. Not safe for use by several threads. */
final class FileBytes implements AutoCloseable {
    /** No structure other than data is larger than this, so a damaged size cannot ask for more memory (bytes). */
    private static final int LARGEST_STRUCTURE = 1 << 26;

    private static final long SMALLEST_USER_BLOCK = 512;

    private final Path path;
    private final FileChannel channel;
    private final long start;
    private final long size;

    FileBytes(Path path) throws IOException {
        this.path = path;
        channel = FileChannel.open(path, StandardOpenOption.READ);
        try {
            start = start(channel);
            size = channel.size() - start;
        } catch (IOException | RuntimeException e) {
            channel.close();
            throw e;
        }
    }

    /** Where the HDF5 data begin: at 0, or behind a block of the user's own of 512 bytes or twice, four times … as many (MATLAB writes one). */
    private static long start(FileChannel channel) throws IOException {
        byte[] signature = Superblock.signature();
        ByteBuffer found = ByteBuffer.allocate(signature.length);
        for (long at = 0; at + signature.length <= channel.size(); at = at == 0 ? SMALLEST_USER_BLOCK : 2 * at) {
            found.clear();
            if (channel.read(found, at) == signature.length && Arrays.equals(found.array(), signature)) {
                return at;
            }
        }
        return 0;
    }

    /** Bytes before the HDF5 data; addresses do not count them. */
    long start() {
        return start;
    }

    Path path() {
        return path;
    }

    /** Length of the HDF5 data (bytes). */
    long size() {
        return size;
    }

    /**
     * Reads a structure.
     *
     * @param address where it starts
     * @param length its size (bytes)
     * @param place what it is, for messages
     * @return its fields
     * @throws Hdf5Exception if it does not lie within the file, or is absurdly large
     * @throws IOException if the file cannot be read
     */
    Fields read(long address, long length, String place) throws IOException {
        requireInside(address, length, place);
        if (length > LARGEST_STRUCTURE) {
            throw damaged(
                    place, "expected at most " + LARGEST_STRUCTURE + " bytes, found a declared size of " + length);
        }
        ByteBuffer bytes = Messages.buffer((int) length);
        fill(bytes, address, place);
        return new Fields(this, place, bytes.flip());
    }

    /**
     * Reads data into a buffer until nothing of it remains.
     *
     * @param target receives the bytes
     * @param address where they start
     * @param place what they are, for messages
     * @throws Hdf5Exception if they do not lie within the file
     * @throws IOException if the file cannot be read
     */
    void fill(ByteBuffer target, long address, String place) throws IOException {
        requireInside(address, target.remaining(), place);
        long next = address;
        while (target.hasRemaining()) {
            int n = channel.read(target, start + next);
            if (n < 0) {
                throw new Hdf5Exception(
                        Hdf5Exception.Kind.TRUNCATED, path, place, "the file became shorter while it was read");
            }
            next += n;
        }
    }

    /**
     * Requires that a run of bytes lies within the file.
     *
     * @param address where it starts
     * @param length its size (bytes)
     * @param place what it is, for messages
     * @throws Hdf5Exception if it does not
     */
    void requireInside(long address, long length, String place) throws Hdf5Exception {
        if (address < 0 || length < 0 || length > size || address > size - length) {
            throw damaged(
                    place,
                    "expected to lie within the file's " + size + " bytes, found " + Long.toUnsignedString(length)
                            + " bytes at address " + Long.toUnsignedString(address));
        }
    }

    Hdf5Exception damaged(String place, String trouble) {
        return new Hdf5Exception(
                Hdf5Exception.Kind.DAMAGED, path, place, trouble + "; the file is damaged, take another copy of it");
    }

    Hdf5Exception unsupported(String place, String trouble) {
        return new Hdf5Exception(Hdf5Exception.Kind.UNSUPPORTED, path, place, trouble);
    }

    @Override
    public void close() throws IOException {
        channel.close();
    }
}
