package org.raysheaf.io.description;

import java.io.IOException;
import java.nio.file.Path;
import java.util.Objects;
import org.yaml.snakeyaml.nodes.MappingNode;

/**
 * Reads descriptions. All problems of a file are reported together, each with file, line and field:
 *
 * <pre>
 * heron.yaml, line 7, field block.pich_mm: expected one of columns, rows, pitch_mm, found pich_mm; the nearest is pitch_mm
 * </pre>
 *
 * <p>The rules that a record states in its constructor can be tested only once all of its values could be read; until then the record
 * reports the values that could not. The package comment says how each type of component is written. Safe for use by several threads.
 */
public final class DescriptionReader {
    private DescriptionReader() {}

    /**
     * Tells what a description describes, from its first line alone; the rest may be unsound.
     *
     * @param file a text file
     * @return the kind, for example {@code system} for {@code raysheaf: system/1}, in any version
     * @throws DescriptionException if this is no readable description
     * @throws IOException if the file cannot be read
     */
    public static String kindOf(Path file) throws IOException {
        return FirstLine.of(DescriptionText.of(file)).kind();
    }

    /**
     * Reads a description from a file.
     *
     * @param <T> the record that owns the settings
     * @param file a text file in UTF-8, at most 16 MiB
     * @param kind the kind that its first line must name, for example {@code system}
     * @param type the record
     * @return the settings, complete with defaults and checked by the record
     * @throws DescriptionException if anything is wrong with the description; it carries every problem
     * @throws IOException if the file cannot be read
     */
    public static <T extends Record> T read(Path file, String kind, Class<T> type) throws IOException {
        return bind(DescriptionText.of(file), kind, type);
    }

    /**
     * Reads a description from a text, as it rides inside list files.
     *
     * @param <T> the record that owns the settings
     * @param text the whole description
     * @param source where the text came from, for messages
     * @param kind the kind that its first line must name, for example {@code system}
     * @param type the record
     * @return the settings, complete with defaults and checked by the record
     * @throws DescriptionException if anything is wrong with the description; it carries every problem
     */
    public static <T extends Record> T readText(String text, String source, String kind, Class<T> type)
            throws DescriptionException {
        return bind(DescriptionText.of(source, text), kind, type);
    }

    private static <T extends Record> T bind(DescriptionText text, String kind, Class<T> type)
            throws DescriptionException {
        FirstLine.of(text).require(kind);
        MappingNode root = YamlTree.root(text);
        Findings findings = new Findings(text.source());
        Object settings = new Binder(findings).bindRoot(type, root);
        findings.orThrow();
        return type.cast(Objects.requireNonNull(settings));
    }
}
