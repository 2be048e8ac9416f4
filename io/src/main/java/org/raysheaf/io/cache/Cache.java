package org.raysheaf.io.cache;

import java.io.DataInputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.HexFormat;
import java.util.Optional;
import java.util.zip.CRC32C;
import org.raysheaf.io.file.AtomicFile;

/**
 * Keeps arrays of floats in a folder. An entry that is damaged counts as absent; a folder that cannot be written to keeps nothing. Safe for use by
 * several threads and processes.
 *
 * <pre>
 * offset  type      content
 * 0       8 bytes   "RSHFCAC1"
 * 8       int32     number of values n, big-endian
 * 12      int64     CRC-32C of the values' bytes
 * 20      float32   n values, big-endian
 * </pre>
 */
public final class Cache {
    private static final byte[] MARK = "RSHFCAC1".getBytes(StandardCharsets.US_ASCII);
    private static final int HEAD = MARK.length + Integer.BYTES + Long.BYTES;

    private final Path folder;

    /**
     * A cache in a folder.
     *
     * @param folder where entries live; made when the first is kept
     */
    public Cache(Path folder) {
        this.folder = folder;
    }

    /**
     * Digest of everything that an entry depends on.
     *
     * @param parts texts; their order and boundaries count
     * @return SHA-256 in hexadecimal
     */
    public static String digest(String... parts) {
        try {
            MessageDigest sha = MessageDigest.getInstance("SHA-256");
            for (String part : parts) {
                byte[] bytes = part.getBytes(StandardCharsets.UTF_8);
                sha.update(
                        ByteBuffer.allocate(Integer.BYTES).putInt(bytes.length).array());
                sha.update(bytes);
            }
            return HexFormat.of().formatHex(sha.digest());
        } catch (NoSuchAlgorithmException e) {
            throw new IllegalStateException("every Java has SHA-256", e);
        }
    }

    /**
     * Digest of numbers.
     *
     * @param values the numbers
     * @return SHA-256 of their bits in hexadecimal
     */
    public static String digest(float[] values) {
        try {
            MessageDigest sha = MessageDigest.getInstance("SHA-256");
            ByteBuffer bytes = ByteBuffer.allocate(Math.multiplyExact(Float.BYTES, values.length));
            bytes.asFloatBuffer().put(values);
            sha.update(bytes);
            return HexFormat.of().formatHex(sha.digest());
        } catch (NoSuchAlgorithmException e) {
            throw new IllegalStateException("every Java has SHA-256", e);
        }
    }

    /**
     * Looks for an entry.
     *
     * @param kind what it is, part of the file's name
     * @param digest what it depends on
     * @return the values, or empty if they are not there or damaged
     */
    public Optional<float[]> find(String kind, String digest) {
        Path file = file(kind, digest);
        try (DataInputStream in = new DataInputStream(Files.newInputStream(file))) {
            byte[] mark = in.readNBytes(MARK.length);
            int count = in.readInt();
            long crc = in.readLong();
            if (!MessageDigest.isEqual(mark, MARK) || Files.size(file) != HEAD + (long) Float.BYTES * count) {
                return Optional.empty();
            }
            byte[] bytes = in.readNBytes(Float.BYTES * count);
            float[] values = new float[count];
            ByteBuffer.wrap(bytes).asFloatBuffer().get(values);
            return crc(bytes) == crc ? Optional.of(values) : Optional.empty();
        } catch (IOException | RuntimeException e) {
            return Optional.empty();
        }
    }

    /**
     * Keeps an entry.
     *
     * @param kind what it is, part of the file's name
     * @param digest what it depends on
     * @param values the values, fewer than 2^29
     * @throws IOException if the folder cannot be written to; the caller can do without
     */
    public void keep(String kind, String digest, float[] values) throws IOException {
        Files.createDirectories(folder);
        byte[] bytes = new byte[Math.multiplyExact(Float.BYTES, values.length)];
        ByteBuffer.wrap(bytes).asFloatBuffer().put(values);
        AtomicFile.write(file(kind, digest), true, temporary -> {
            try (DataOutputStream out = new DataOutputStream(Files.newOutputStream(temporary))) {
                out.write(MARK);
                out.writeInt(values.length);
                out.writeLong(crc(bytes));
                out.write(bytes);
            }
        });
    }

    private static long crc(byte[] bytes) {
        CRC32C crc = new CRC32C();
        crc.update(bytes);
        return crc.getValue();
    }

    private Path file(String kind, String digest) {
        return folder.resolve(kind + "-" + digest + ".cache");
    }
}
