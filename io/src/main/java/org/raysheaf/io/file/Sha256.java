package org.raysheaf.io.file;

import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.HexFormat;

/** SHA-256 (FIPS 180-4) as {@code sha256sum} prints it. Safe for use by several threads. */
public final class Sha256 {
    private Sha256() {}

    /**
     * Digest of a text, the same as of a file that holds it.
     *
     * @param text the text
     * @return SHA-256 of its UTF-8 bytes, 64 hexadecimal digits
     */
    public static String ofText(String text) {
        return HexFormat.of().formatHex(start().digest(text.getBytes(StandardCharsets.UTF_8)));
    }

    /**
     * Begins a digest of several parts.
     *
     * @return a fresh digest, to be used by one thread
     */
    public static MessageDigest start() {
        try {
            return MessageDigest.getInstance("SHA-256");
        } catch (NoSuchAlgorithmException e) {
            throw new IllegalStateException("every Java platform has SHA-256", e);
        }
    }
}
