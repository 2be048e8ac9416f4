package org.raysheaf.io.records;

import java.util.HashSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * One record per line of text (ASCII or UTF-8). Blank lines are passed over, lines may end with CR LF.
 *
 * @param delimiter what stands between columns: one character, {@code tab}, or {@code blanks} for any run of blanks and tabs
 * @param comment lines that begin with this are passed over, or null if there are none
 * @param headerLines lines to pass over at the start of every file, comments not counted; if a field finds its column by name, the last of them
 *     names the columns
 * @param quote the character around quoted values, or null if there is none; doubled inside a value it stands for itself
 * @param decimalComma whether numbers are written with a decimal comma
 * @param fields the fields to read; other columns are passed over
 */
public record TextFormat(
        @Default("','") String delimiter,
        @Nullable String comment,
        @Default("0") int headerLines,
        @Nullable String quote,
        @Default("false") boolean decimalComma,
        List<Field> fields)
        implements RecordFormat {

    /** How a number is written. */
    public enum Notation {
        /** A real number, with or without exponent. */
        REAL,
        /** A whole number within 64 bits, kept exactly. */
        INTEGER,
        /** A whole number of up to 16 hexadecimal digits, with or without 0x. */
        HEX
    }

    /**
     * One column.
     *
     * @param name the name of the value
     * @param column number of the column, from 1, or its name in the header; if left out, the name of the value
     * @param type how the number is written
     * @param invalid texts that stand for "no value"; the record is then set aside
     */
    public record Field(
            String name,
            @Nullable String column,
            @Default("real") Notation type,
            @Default("[]") List<String> invalid) {

        /** Number of the column from 0, or −1 if it is found by name. */
        int number() {
            if (column == null || !column.chars().allMatch(c -> c >= '0' && c <= '9') || column.length() > 6) {
                return -1;
            }
            return column.isEmpty() ? -1 : Integer.parseInt(column) - 1;
        }

        /** Name of the column, if it is found by name. */
        String heading() {
            return column == null ? name : column;
        }
    }

    public TextFormat {
        Problems problems = new Problems("text records")
                .atLeast("header_lines", headerLines, 0)
                .rule(
                        delimiter.length() == 1 || delimiter.equals("tab") || delimiter.equals("blanks"),
                        "delimiter",
                        "expected one character, tab or blanks, found " + delimiter)
                .rule(quote == null || quote.length() == 1, "quote", "expected one character, found " + quote)
                .rule(comment == null || !comment.isEmpty(), "comment", "expected a text, found nothing; leave it out")
                .rule(!fields.isEmpty(), "fields", "expected at least one field, found none")
                .rule(
                        !(decimalComma && delimiter.equals(",")),
                        "delimiter",
                        "expected another delimiter than the decimal comma, found a comma");
        Set<String> names = new HashSet<>();
        for (int i = 0; i < fields.size(); i++) {
            Field field = fields.get(i);
            FieldNames.require(problems, "fields[" + i + "].name", field.name(), names);
            problems.rule(
                    field.number() >= 0 || headerLines > 0,
                    "fields[" + i + "].column",
                    "expected the number of a column from 1, since no header_lines name the columns, found "
                            + field.heading());
        }
        problems.orThrow();
    }
}
