package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.FileChannel;
import java.nio.file.AtomicMoveNotSupportedException;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.nio.file.StandardOpenOption;

/**
 * A file that grows at its end beside the place where it is to appear, and appears there whole or not at all. Not safe for use by several
 * threads.
 */
final class PendingFile implements AutoCloseable {
    private final Path target;
    private final Path temporary;
    private final boolean replace;
    private final FileChannel channel;
    private long end;
    private boolean committed;

    /**
     * Starts the temporary file.
     *
     * @param target where the file is to appear
     * @param replace whether a file that is already there may be replaced
     * @param firstAddress where appending starts (bytes); what comes before is written last
     * @throws IOException if the target exists and must not be replaced, or its folder cannot be written to
     */
    PendingFile(Path target, boolean replace, long firstAddress) throws IOException {
        this.target = target;
        this.replace = replace;
        this.end = firstAddress;
        refuseToOverwrite();
        String unique = ProcessHandle.current().pid() + "-" + Long.toHexString(System.nanoTime());
        temporary = target.resolveSibling("." + target.getFileName() + "." + unique + ".partial");
        channel = FileChannel.open(temporary, StandardOpenOption.CREATE_NEW, StandardOpenOption.WRITE);
    }

    private void refuseToOverwrite() throws IOException {
        if (!replace && Files.exists(target)) {
            throw new FileAlreadyExistsException(
                    target.toString(), null, "exists already; choose another name or allow it to be replaced");
        }
    }

    /**
     * The target of the writing, for messages.
     *
     * @return where the file is to appear
     */
    Path target() {
        return target;
    }

    /**
     * Where the next bytes will go.
     *
     * @return the address just after everything appended (bytes)
     */
    long end() {
        return end;
    }

    /**
     * Appends all remaining bytes of a buffer.
     *
     * @param bytes what to write
     * @return the address of its first byte
     * @throws IOException if the disk does not take it
     */
    long append(ByteBuffer bytes) throws IOException {
        long start = end;
        while (bytes.hasRemaining()) {
            end += channel.write(bytes, end);
        }
        return start;
    }

    /**
     * Completes the file with its first bytes and lets it appear. The bytes are on the disk before the name is.
     *
     * @param start the bytes from address 0 on
     * @throws IOException if the disk does not take them or the target appeared meanwhile and must not be replaced
     */
    void commit(ByteBuffer start) throws IOException {
        long address = 0;
        while (start.hasRemaining()) {
            address += channel.write(start, address);
        }
        channel.force(true);
        channel.close();
        refuseToOverwrite();
        try {
            Files.move(temporary, target, StandardCopyOption.ATOMIC_MOVE);
        } catch (AtomicMoveNotSupportedException e) {
            Files.move(temporary, target, StandardCopyOption.REPLACE_EXISTING);
        }
        committed = true;
    }

    /** Removes the temporary file unless it was committed. */
    @Override
    public void close() throws IOException {
        channel.close();
        if (!committed) {
            Files.deleteIfExists(temporary);
        }
    }
}
