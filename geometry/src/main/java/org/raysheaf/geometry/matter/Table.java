package org.raysheaf.geometry.matter;

import java.io.BufferedReader;
import java.io.IOException;
import java.io.InputStream;
import java.io.InputStreamReader;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Objects;

/** Reads the tables that come with this package: one row a line, cells between semicolons, lines that begin with # are comments. */
final class Table {
    private Table() {}

    static List<List<String>> rows(Class<?> beside, String resource, int cells) {
        List<List<String>> rows = new ArrayList<>();
        try (InputStream stream = beside.getResourceAsStream(resource);
                BufferedReader lines = new BufferedReader(
                        new InputStreamReader(Objects.requireNonNull(stream, resource), StandardCharsets.UTF_8))) {
            for (String line = lines.readLine(); line != null; line = lines.readLine()) {
                if (!line.isBlank() && !line.startsWith("#")) {
                    List<String> row = Arrays.stream(line.split(";", cells))
                            .map(String::trim)
                            .toList();
                    if (row.size() != cells) {
                        throw new IllegalStateException(resource + ": expected " + cells + " cells in " + line);
                    }
                    rows.add(row);
                }
            }
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
        return rows;
    }

    /** The items of a cell, between spaces, each taken apart at its colons. */
    static List<List<String>> pairs(String cell) {
        List<List<String>> pairs = new ArrayList<>();
        for (String item : cell.split(" ", -1)) {
            if (!item.isBlank()) {
                pairs.add(Arrays.asList(item.split(":", -1)));
            }
        }
        return pairs;
    }
}
