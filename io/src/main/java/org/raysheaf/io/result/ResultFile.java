package org.raysheaf.io.result;

import com.fasterxml.jackson.core.JsonProcessingException;
import com.fasterxml.jackson.core.StreamWriteFeature;
import com.fasterxml.jackson.core.util.DefaultIndenter;
import com.fasterxml.jackson.core.util.DefaultPrettyPrinter;
import com.fasterxml.jackson.databind.ObjectWriter;
import com.fasterxml.jackson.databind.json.JsonMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Map;
import org.raysheaf.io.file.AtomicFile;

/**
 * Writes results as JSON: records and ordered maps, lists, numbers, text. The same results give the same bytes on every machine: keys
 * keep the order of the components or of the map (maps without an order are sorted), numbers are the shortest decimals that read back to
 * the same value, lines end in a line feed. Safe for use by several threads.
 */
public final class ResultFile {
    private static final DefaultIndenter INDENT = new DefaultIndenter("  ", "\n");

    private static final ObjectWriter WRITER = JsonMapper.builder()
            .enable(StreamWriteFeature.USE_FAST_DOUBLE_WRITER) // Double.toString is not always shortest before Java 19
            .build()
            .writer(new DefaultPrettyPrinter().withObjectIndenter(INDENT));

    private ResultFile() {}

    /**
     * Renders results.
     *
     * @param results a record, or a map with text keys; within it also lists, arrays of numbers, enums, times, vectors, {@code Optional}
     *     and {@link NotKnown}
     * @return the JSON text, ended by a line feed
     * @throws IllegalArgumentException if a number is NaN or infinite, or a value has no place in JSON; the message names the field
     */
    public static String render(Object results) {
        if (!(results instanceof Record) && !(results instanceof Map)) {
            throw new IllegalArgumentException(
                    "results are a record or a map: found " + results.getClass().getName());
        }
        try {
            return WRITER.writeValueAsString(JsonTree.of(results, "")) + "\n";
        } catch (JsonProcessingException e) {
            throw new IllegalStateException("cannot write JSON", e);
        }
    }

    /**
     * Writes results, completely or not at all.
     *
     * @param results as for {@link #render(Object)}
     * @param file the file to make
     * @param replace whether an existing file may be overwritten
     * @throws IllegalArgumentException as for {@link #render(Object)}; then no file is touched
     * @throws IOException if the file exists and may not be overwritten, or writing fails
     */
    public static void write(Object results, Path file, boolean replace) throws IOException {
        String text = render(results);
        AtomicFile.write(file, replace, temporary -> Files.writeString(temporary, text));
    }
}
