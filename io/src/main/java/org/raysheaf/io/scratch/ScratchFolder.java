package org.raysheaf.io.scratch;

import java.io.EOFException;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.FileChannel;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.util.Locale;
import java.util.Set;
import java.util.UUID;
import org.raysheaf.geometry.port.Scratch;

/**
 * Scratch files in a folder. They are removed when closed; where the system allows it (Linux, macOS) they have no name any more from the
 * moment they are opened, so that not even a crash leaves anything behind. Safe for use by several threads.
 */
public final class ScratchFolder implements Scratch {
    private final Path folder;

    /**
     * Scratch files in a folder.
     *
     * @param folder where; made when the first file is opened
     */
    public ScratchFolder(Path folder) {
        this.folder = folder;
    }

    @Override
    public Scratch.File open() throws IOException {
        Files.createDirectories(folder);
        Path path = folder.resolve("raysheaf-" + UUID.randomUUID() + ".scratch");
        FileChannel channel = FileChannel.open(
                path,
                Set.of(
                        StandardOpenOption.CREATE_NEW,
                        StandardOpenOption.READ,
                        StandardOpenOption.WRITE,
                        StandardOpenOption.DELETE_ON_CLOSE));
        return new Open(path, channel);
    }

    /** An open file; not private so that a test can open a full disk. */
    static final class Open implements Scratch.File {
        private final Path path;
        private final FileChannel channel;
        private long end;

        Open(Path path, FileChannel channel) {
            this.path = path;
            this.channel = channel;
        }

        @Override
        public long append(ByteBuffer bytes) throws IOException {
            long at = end;
            try {
                while (bytes.hasRemaining()) {
                    end += channel.write(bytes, end);
                }
            } catch (IOException e) {
                throw new IOException(
                        String.format(
                                Locale.ROOT,
                                "%s: the events do not fit into memory, and writing them to disk failed after %.1f MB (%s);"
                                        + " free some space there, choose another place with --scratch DIR, or give Java more memory",
                                path.toAbsolutePath().getParent(),
                                end * 1e-6,
                                e.getMessage()),
                        e);
            }
            return at;
        }

        @Override
        public void read(long at, ByteBuffer bytes) throws IOException {
            long from = at;
            while (bytes.hasRemaining()) {
                int count = channel.read(bytes, from);
                if (count < 0) {
                    throw new EOFException(path + ": expected " + bytes.remaining() + " more bytes at " + from
                            + ", found the end; did another program change the file?");
                }
                from += count;
            }
        }

        @Override
        public void close() throws IOException {
            channel.close();
        }
    }
}
