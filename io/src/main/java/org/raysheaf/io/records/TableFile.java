package org.raysheaf.io.records;

import java.io.IOException;
import java.nio.charset.MalformedInputException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.regex.Pattern;

/**
 * A small table in a text file: lines that begin with {@code #} are comments, the first other line names the columns, the first column is a whole-number key.
 * Columns are separated by semicolons, tabs, commas or blanks, whichever of these the first line has, in this order. An empty value means "none". Immutable
 * and safe for use by several threads.
 */
final class TableFile {
    private static final long LARGEST = 256L << 20;
    private static final int LARGEST_DENSE = 1 << 22;

    private final Path path;
    private final String keyName;
    private final long[] keys;
    private final Map<String, double[]> columns;
    private final int[] dense;

    private TableFile(Path path, String keyName, long[] keys, Map<String, double[]> columns, int[] dense) {
        this.path = path;
        this.keyName = keyName;
        this.keys = keys;
        this.columns = columns;
        this.dense = dense;
    }

    static TableFile read(Path path) throws IOException {
        if (!Files.isRegularFile(path)) {
            throw new RecordException(path + ": expected a table, found no such file");
        }
        if (Files.size(path) > LARGEST) {
            throw new RecordException(
                    path + ": expected a table of at most " + LARGEST + " bytes, found " + Files.size(path));
        }
        List<String> lines;
        try {
            lines = Files.readAllLines(path, StandardCharsets.UTF_8);
        } catch (MalformedInputException e) {
            throw new RecordException(path + ": expected a table as text, found other bytes", e);
        }
        int first = 0;
        while (first < lines.size()
                && (lines.get(first).isBlank() || lines.get(first).startsWith("#"))) {
            first++;
        }
        if (first == lines.size()) {
            throw new RecordException(path + ": expected a line that names the columns, found none");
        }
        String head = lines.get(first);
        Pattern gap = Pattern.compile(
                head.contains(";") ? ";" : head.contains("\t") ? "\t" : head.contains(",") ? "," : "\\s+");
        List<String> names = split(gap, head);
        List<double[]> rows = new ArrayList<>();
        Map<Long, Integer> lineOfKey = new LinkedHashMap<>();
        for (int i = first + 1; i < lines.size(); i++) {
            String line = lines.get(i);
            if (!line.isBlank() && !line.startsWith("#")) {
                rows.add(row(path, i + 1, names, split(gap, line), lineOfKey));
            }
        }
        rows.sort((a, b) -> Double.compare(a[0], b[0]));
        long[] keys = new long[rows.size()];
        Map<String, double[]> columns = new LinkedHashMap<>();
        for (int r = 0; r < keys.length; r++) {
            keys[r] = (long) rows.get(r)[0];
        }
        for (int c = 1; c < names.size(); c++) {
            int column = c;
            columns.put(
                    names.get(c), rows.stream().mapToDouble(row -> row[column]).toArray());
        }
        return new TableFile(path, names.get(0), keys, columns, index(keys));
    }

    private static List<String> split(Pattern gap, String line) {
        return Arrays.stream(gap.split(line.strip(), -1)).map(String::strip).toList();
    }

    private static double[] row(
            Path path, int line, List<String> names, List<String> values, Map<Long, Integer> lineOfKey)
            throws RecordException {
        String place = path + ", line " + line;
        if (values.size() != names.size()) {
            throw new RecordException(place + ": expected " + names.size() + " columns (" + String.join(", ", names)
                    + "), found " + values.size());
        }
        double[] row = new double[names.size()];
        for (int c = 0; c < row.length; c++) {
            String value = values.get(c);
            try {
                row[c] = value.isEmpty() && c > 0 ? Double.NaN : Double.parseDouble(value);
            } catch (NumberFormatException e) {
                throw new RecordException(place + ", " + names.get(c) + ": expected a number, found " + value, e);
            }
        }
        if (!(row[0] == Math.rint(row[0]) && Math.abs(row[0]) < 0x1p53)) {
            throw new RecordException(
                    place + ", " + names.get(0) + ": expected a whole number as key, found " + values.get(0));
        }
        Integer before = lineOfKey.put((long) row[0], line);
        if (before != null) {
            throw new RecordException(place + ", " + names.get(0) + ": expected every key once, found " + values.get(0)
                    + " also in line " + before);
        }
        return row;
    }

    /** Row of every key from 0, if that takes little room; −1 where there is none. */
    private static int[] index(long[] keys) {
        if (keys.length == 0 || keys[0] < 0 || keys[keys.length - 1] >= LARGEST_DENSE) {
            return new int[0];
        }
        int[] dense = new int[(int) keys[keys.length - 1] + 1];
        Arrays.fill(dense, -1);
        for (int r = 0; r < keys.length; r++) {
            dense[(int) keys[r]] = r;
        }
        return dense;
    }

    /** Row of a key, or −1. */
    int row(long key) {
        if (dense.length > 0) {
            return key >= 0 && key < dense.length ? dense[(int) key] : -1;
        }
        int row = Arrays.binarySearch(keys, key);
        return row < 0 ? -1 : row;
    }

    int rows() {
        return keys.length;
    }

    long key(int row) {
        return keys[row];
    }

    String keyName() {
        return keyName;
    }

    boolean has(String column) {
        return columns.containsKey(column);
    }

    /**
     * A column, NaN where there is no value.
     *
     * @throws RecordException if there is no such column
     */
    double[] column(String name) throws RecordException {
        double[] column = columns.get(name);
        if (column == null) {
            throw new RecordException(path + ": expected a column " + name + ", found " + keyName + ", "
                    + String.join(", ", columns.keySet()));
        }
        return column;
    }

    /** Whether all values of a column are whole numbers that doubles hold exactly. */
    static boolean whole(double[] column) {
        return Arrays.stream(column).allMatch(v -> Double.isNaN(v) || (v == Math.rint(v) && Math.abs(v) < 0x1p53));
    }
}
