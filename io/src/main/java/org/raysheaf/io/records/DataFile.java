package org.raysheaf.io.records;

import java.io.EOFException;
import java.io.FilterInputStream;
import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.zip.GZIPInputStream;
import java.util.zip.ZipException;

/** The bytes of a data file; one whose name ends in {@code .gz} is uncompressed on the way. One thread. */
final class DataFile extends FilterInputStream {
    private static final int BUFFER = 1 << 16;

    private final Path file;
    private long given;

    private DataFile(Path file, InputStream bytes) {
        super(bytes);
        this.file = file;
    }

    static InputStream open(Path file) throws IOException {
        InputStream bytes = Files.newInputStream(file);
        if (!file.toString().endsWith(".gz")) {
            return bytes;
        }
        try {
            return new DataFile(file, new GZIPInputStream(bytes, BUFFER));
        } catch (EOFException | ZipException e) {
            bytes.close();
            throw new RecordException(file + ": expected data compressed with gzip, found other bytes", e);
        }
    }

    @Override
    public int read(byte[] into, int offset, int length) throws IOException {
        try {
            int got = super.read(into, offset, length);
            given += Math.max(0, got);
            return got;
        } catch (EOFException | ZipException e) {
            throw new RecordException(
                    file + ": expected sound compressed data, found damage or the end after " + given
                            + " uncompressed bytes; take another copy, or uncompress what can be saved",
                    e);
        }
    }
}
