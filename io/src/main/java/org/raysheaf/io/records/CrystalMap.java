package org.raysheaf.io.records;

import java.io.BufferedInputStream;
import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.MalformedInputException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.regex.Pattern;

/** A map from positions to whole numbers, of one page or several, with axes (page, y, x). Immutable and safe for use by several threads. */
final class CrystalMap {
    private static final long MOST_CELLS = 1 << 26;

    private final int pages;
    private final int rows;
    private final int columns;
    private final int[] cells;

    private CrystalMap(int pages, int rows, int columns, int[] cells) {
        this.pages = pages;
        this.rows = rows;
        this.columns = columns;
        this.cells = cells;
    }

    static CrystalMap read(Path path) throws IOException {
        if (!Files.isRegularFile(path)) {
            throw new RecordException(path + ": expected a map, found no such file");
        }
        return path.toString().endsWith(".npy") ? npy(path) : text(path);
    }

    private static CrystalMap npy(Path path) throws IOException {
        try (InputStream stream = new BufferedInputStream(Files.newInputStream(path), 1 << 16)) {
            NpyHeader header = NpyHeader.read(stream, path);
            List<Long> shape = header.shape();
            NpyHeader.Part part = header.members().get("");
            if (part == null || shape.size() < 2 || shape.size() > 3 || header.columnsFirst()) {
                throw new RecordException(
                        path + ": expected numbers with axes (y, x) or (page, y, x) in C order, found shape " + shape);
            }
            long pages = shape.size() == 3 ? shape.get(0) : 1;
            long rows = shape.get(shape.size() - 2);
            long columns = shape.get(shape.size() - 1);
            if (pages < 1
                    || rows < 1
                    || columns < 1
                    || pages > MOST_CELLS
                    || rows > MOST_CELLS
                    || columns > MOST_CELLS
                    || pages * rows > MOST_CELLS
                    || pages * rows * columns > MOST_CELLS) {
                throw new RecordException(path + ": expected 1 to " + MOST_CELLS + " cells, found shape " + shape);
            }
            int[] cells = new int[(int) (pages * rows * columns)];
            byte[] value = new byte[8 + 2 * BitPlace.MARGIN];
            BitPlace place = BitPlace.of(part.bytes(), part.order(), null, null, null, null);
            for (int i = 0; i < cells.length; i++) {
                if (stream.readNBytes(value, BitPlace.MARGIN, part.bytes()) < part.bytes()) {
                    throw new RecordException(path + ": expected " + cells.length + " cells, found only " + i);
                }
                long bits = place.read(value, BitPlace.MARGIN);
                cells[i] = cell(path, number(bits, part));
            }
            return new CrystalMap((int) pages, (int) rows, (int) columns, cells);
        }
    }

    private static double number(long bits, NpyHeader.Part part) {
        int unused = 64 - 8 * part.bytes();
        return switch (part.number()) {
            case UNSIGNED -> bits;
            case SIGNED -> (bits << unused) >> unused;
            case FLOAT -> part.bytes() == 4 ? Float.intBitsToFloat((int) bits) : Double.longBitsToDouble(bits);
        };
    }

    private static int cell(Path path, double value) throws RecordException {
        if (Double.isNaN(value)) {
            return -1;
        }
        if (value != Math.rint(value) || Math.abs(value) > Integer.MAX_VALUE) {
            throw new RecordException(path + ": expected whole numbers of 32 bits, found " + value);
        }
        return (int) value;
    }

    private static CrystalMap text(Path path) throws IOException {
        List<int[]> rows = new ArrayList<>();
        Pattern gap = Pattern.compile("[\\s,;]+");
        int line = 0;
        List<String> lines;
        try {
            lines = Files.readAllLines(path, StandardCharsets.UTF_8);
        } catch (MalformedInputException e) {
            throw new RecordException(path + ": expected a map as text or .npy, found other bytes", e);
        }
        for (String text : lines) {
            line++;
            if (text.isBlank() || text.startsWith("#")) {
                continue;
            }
            List<String> values = gap.splitAsStream(text.strip()).toList();
            int[] row = new int[values.size()];
            for (int c = 0; c < row.length; c++) {
                try {
                    row[c] = cell(path, Double.parseDouble(values.get(c)));
                } catch (NumberFormatException e) {
                    throw new RecordException(
                            path + ", line " + line + ": expected a number, found " + values.get(c), e);
                }
            }
            if (!rows.isEmpty() && rows.get(0).length != row.length) {
                throw new RecordException(path + ", line " + line + ": expected " + rows.get(0).length
                        + " numbers as in the rows above, found " + row.length);
            }
            rows.add(row);
        }
        if (rows.isEmpty()) {
            throw new RecordException(path + ": expected rows of numbers, found none");
        }
        int columns = rows.get(0).length;
        int[] cells = new int[rows.size() * columns];
        for (int r = 0; r < rows.size(); r++) {
            System.arraycopy(rows.get(r), 0, cells, r * columns, columns);
        }
        return new CrystalMap(1, rows.size(), columns, cells);
    }

    /**
     * The number at a position.
     *
     * @param page the page
     * @param x share of the width, 0 to below 1
     * @param y share of the height, 0 to below 1
     * @return the number, or −1 outside the map
     */
    int at(long page, double x, double y) {
        if (!(x >= 0 && x < 1 && y >= 0 && y < 1) || page < 0 || page >= pages) {
            return -1;
        }
        int column = Math.min(columns - 1, (int) (x * columns));
        int row = Math.min(rows - 1, (int) (y * rows));
        return cells[((int) page * rows + row) * columns + column];
    }
}
