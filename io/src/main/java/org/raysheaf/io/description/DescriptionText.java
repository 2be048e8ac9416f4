package org.raysheaf.io.description;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.CharBuffer;
import java.nio.charset.CharsetDecoder;
import java.nio.charset.CoderResult;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import org.yaml.snakeyaml.reader.StreamReader;

/**
 * A description as text, known to be of bearable size and free of characters that no text has.
 *
 * @param source the file, or a name for the text
 * @param text the text, without byte-order mark
 */
record DescriptionText(String source, String text) {
    /** No description that a person wrote comes near; it keeps a mistaken data file from being read into memory. */
    static final int LARGEST = 16 << 20;

    static DescriptionText of(Path file) throws IOException {
        String source = file.toString();
        if (!Files.exists(file)) {
            throw new DescriptionException(source, "expected a description, found no such file");
        }
        if (Files.isDirectory(file)) {
            throw new DescriptionException(source, "expected a description, found a folder");
        }
        requireModest(source, Files.size(file));
        return of(source, decode(source, Files.readAllBytes(file)));
    }

    static DescriptionText of(String source, String text) throws DescriptionException {
        requireModest(source, text.length());
        String body = text.startsWith("\uFEFF") ? text.substring(1) : text;
        if (body.isBlank()) {
            throw new DescriptionException(source, "expected a description, found nothing but blanks");
        }
        requirePrintable(source, body);
        return new DescriptionText(source, body);
    }

    private static void requireModest(String source, long size) throws DescriptionException {
        if (size > LARGEST) {
            throw new DescriptionException(
                    source, "expected a description of at most " + LARGEST + " bytes, found " + size);
        }
    }

    private static String decode(String source, byte[] bytes) throws DescriptionException {
        CharsetDecoder decoder = StandardCharsets.UTF_8.newDecoder();
        ByteBuffer in = ByteBuffer.wrap(bytes);
        CharBuffer out = CharBuffer.allocate(bytes.length);
        CoderResult result = decoder.decode(in, out, true);
        if (result.isError()) {
            throw new DescriptionException(
                    source,
                    "expected text in UTF-8, found the byte 0x%02x at offset %d; is this a data file?"
                            .formatted(bytes[in.position()], in.position()));
        }
        return out.flip().toString();
    }

    private static void requirePrintable(String source, String text) throws DescriptionException {
        int line = 1;
        int lineStart = 0;
        for (int i = 0; i < text.length(); i += Character.charCount(text.codePointAt(i))) {
            int character = text.codePointAt(i);
            if (!StreamReader.isPrintable(character)) {
                throw new DescriptionException(
                        source,
                        line,
                        i - lineStart + 1,
                        "expected text, found the character U+%04X; is this a data file?".formatted(character));
            }
            if (character == '\n') {
                line++;
                lineStart = i + 1;
            }
        }
    }
}
