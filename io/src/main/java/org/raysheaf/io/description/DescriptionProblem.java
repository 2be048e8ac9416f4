package org.raysheaf.io.description;

/**
 * One thing that is wrong with a description.
 *
 * @param source the file, or a name for the text
 * @param line the line, counted from 1; 0 if the problem belongs to no line
 * @param column the column, counted from 1; 0 if the line says enough
 * @param field the field, for example {@code blocks[2].pitch_mm}; empty if the problem belongs to no field
 * @param message what was expected, what was found, what to do
 */
public record DescriptionProblem(String source, int line, int column, String field, String message) {
    /** Where and what, in one line: {@code heron.yaml, line 7, field block.pitch_mm: expected a number, found "wide"}. */
    @Override
    public String toString() {
        StringBuilder text = new StringBuilder(source);
        if (line > 0) {
            text.append(", line ").append(line);
        }
        if (column > 0) {
            text.append(", column ").append(column);
        }
        if (!field.isEmpty()) {
            text.append(", field ").append(field);
        }
        return text.append(": ").append(message).toString();
    }
}
