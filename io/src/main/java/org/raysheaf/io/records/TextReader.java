package org.raysheaf.io.records;

import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.HexFormat;
import java.util.List;
import java.util.Map;
import java.util.regex.Pattern;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;

/** Reads records from lines of text. Bytes are parsed where they lie; only unusual lines become strings. One thread. */
final class TextReader implements RecordReader {
    private static final int LONGEST_LINE = 1 << 20;
    private static final int FIRST_BUFFER = 1 << 18;
    private static final int LONGEST_EXCERPT = 32;

    private final TextFormat format;
    private final DamageLog damage;
    private final FieldBlock block = new FieldBlock();
    private final byte delimiter;
    private final boolean blanks;
    private final byte[] comment;
    private final int quote;
    private final NumberText numbers;
    private final int[] invalidReasons;
    private final byte[][][] invalid;

    private Path file = Path.of("");
    private @Nullable InputStream stream;
    private byte[] buffer = new byte[FIRST_BUFFER];
    private int at;
    private int end;
    private boolean ended;
    private long consumed;
    private long line;
    private int lineStart;
    private int lineEnd;
    private long records;
    private int[][] fieldsOfColumn = new int[0][];
    private List<String> unread = List.of();

    TextReader(TextFormat format, DamageLog damage, Reasons reasons) {
        this.format = format;
        this.damage = damage;
        this.blanks = format.delimiter().equals("blanks");
        this.delimiter = (byte)
                (format.delimiter().equals("tab") ? '\t' : format.delimiter().charAt(0));
        this.comment = format.comment() == null ? new byte[0] : format.comment().getBytes(StandardCharsets.UTF_8);
        this.quote = format.quote() == null ? -1 : format.quote().charAt(0);
        this.numbers = new NumberText(format.decimalComma() ? ',' : '.');
        int n = format.fields().size();
        invalidReasons = new int[n];
        invalid = new byte[n][][];
        for (int i = 0; i < n; i++) {
            TextFormat.Field field = format.fields().get(i);
            block.add(field.name(), field.type() != TextFormat.Notation.REAL);
            invalid[i] = field.invalid().stream()
                    .map(text -> text.getBytes(StandardCharsets.UTF_8))
                    .toArray(byte[][]::new);
            invalidReasons[i] = field.invalid().isEmpty() ? 0 : reasons.number(field.name() + ": marked as invalid");
        }
    }

    @Override
    public void open(Path next) throws IOException {
        close();
        file = next;
        stream = DataFile.open(next);
        at = 0;
        end = 0;
        ended = false;
        consumed = 0;
        line = 0;
        records = 0;
        passOverByteOrderMark();
        String header = "";
        for (int i = 0; i < format.headerLines(); ) {
            if (!nextLine()) {
                throw new RecordException(file + ", line " + line + ": expected " + format.headerLines()
                        + " header lines, found the end of the file");
            }
            if (!isComment()) {
                header = lineText();
                i++;
            }
        }
        findColumns(header);
    }

    /** Spreadsheets like to begin a file with one. */
    private void passOverByteOrderMark() throws IOException {
        while (end < 3 && !ended) {
            fill();
        }
        if (end >= 3 && buffer[0] == (byte) 0xef && buffer[1] == (byte) 0xbb && buffer[2] == (byte) 0xbf) {
            at = 3;
            consumed = 3;
        }
    }

    private void findColumns(String header) throws RecordException {
        List<String> names = format.headerLines() == 0 ? List.of() : split(header);
        List<String> left = new ArrayList<>(names);
        int columns = 0;
        int[] columnOf = new int[format.fields().size()];
        for (int i = 0; i < columnOf.length; i++) {
            TextFormat.Field field = format.fields().get(i);
            columnOf[i] = field.number() >= 0 ? field.number() : names.indexOf(field.heading());
            if (columnOf[i] < 0) {
                throw new RecordException(file + ", line " + line + ": expected a column named " + field.heading()
                        + ", found the columns " + String.join(", ", names)
                        + "; name one of them, or give its number, in format.fields");
            }
            if (columnOf[i] < names.size()) {
                left.remove(names.get(columnOf[i]));
            }
            columns = Math.max(columns, columnOf[i] + 1);
        }
        fieldsOfColumn = new int[columns][];
        for (int c = 0; c < columns; c++) {
            int column = c;
            fieldsOfColumn[c] = IntStream.range(0, columnOf.length)
                    .filter(i -> columnOf[i] == column)
                    .toArray();
        }
        unread = names.isEmpty() ? List.of() : List.copyOf(left);
    }

    /** The values of a line as texts; only for headers. */
    private List<String> split(String text) {
        List<String> values = new ArrayList<>();
        String rest = blanks ? text.strip() : text;
        String pattern = blanks ? "[ \t]+" : Pattern.quote(String.valueOf((char) delimiter));
        for (String value : Pattern.compile(pattern).split(rest, -1)) {
            String bare = value.strip();
            if (quote >= 0
                    && bare.length() >= 2
                    && bare.charAt(0) == quote
                    && bare.charAt(bare.length() - 1) == quote) {
                bare = bare.substring(1, bare.length() - 1);
            }
            values.add(bare);
        }
        return values;
    }

    @Override
    public FieldBlock block() {
        return block;
    }

    @Override
    public boolean next(int most) throws IOException {
        int rows = 0;
        int room = Math.min(most, FieldBlock.CAPACITY);
        Arrays.fill(block.fates(), 0, room, 0);
        while (rows < room && nextLine()) {
            if (lineStart == lineEnd || isComment() || isBlank()) {
                continue;
            }
            String trouble = parse(rows);
            if (trouble == null) {
                rows++;
            } else {
                block.fates()[rows] = 0;
                report(trouble);
            }
        }
        block.set(rows, records);
        records += rows;
        return rows > 0;
    }

    private void report(String trouble) throws RecordException {
        int colon = trouble.indexOf(": ");
        String kind = colon < 0 ? trouble : trouble.substring(0, colon);
        damage.unreadable(file, "line " + line, kind, trouble, excerpt());
    }

    /** The line, as text or, if it is none, in hexadecimal. */
    private String excerpt() {
        String text = printable(lineText());
        int shown = Math.min(lineEnd - lineStart, LONGEST_EXCERPT);
        return text.indexOf('\uFFFD') < 0
                ? "\"" + text + "\""
                : HexFormat.ofDelimiter(" ").formatHex(buffer, lineStart, lineStart + shown);
    }

    private static String printable(String text) {
        StringBuilder shown = new StringBuilder();
        text.codePoints()
                .limit(400)
                .forEach(c -> shown.appendCodePoint(Character.isISOControl(c) && c != '\t' ? '�' : c));
        return shown.toString();
    }

    private boolean isComment() {
        int length = comment.length;
        return length > 0
                && lineEnd - lineStart >= length
                && Arrays.equals(buffer, lineStart, lineStart + length, comment, 0, length);
    }

    private boolean isBlank() {
        if (delimiter == '\t' && !blanks) {
            return false; // a line of tabs has values, all of them missing
        }
        for (int i = lineStart; i < lineEnd; i++) {
            if (buffer[i] != ' ' && buffer[i] != '\t') {
                return false;
            }
        }
        return true;
    }

    private String lineText() {
        return new String(buffer, lineStart, Math.min(lineEnd - lineStart, 2000), StandardCharsets.UTF_8);
    }

    /** Parses the line into a row of the block; returns null or what is wrong. */
    private @Nullable String parse(int row) {
        int column = 0;
        int i = lineStart;
        int columns = fieldsOfColumn.length;
        if (blanks) {
            while (i < lineEnd && isGap(buffer[i])) {
                i++;
            }
        }
        while (column < columns) {
            if (i > lineEnd || (blanks && i == lineEnd)) {
                return "too few columns: expected at least " + columns + ", found " + column;
            }
            int start = i;
            int stop;
            int bodyStart = start;
            while (bodyStart < lineEnd && buffer[bodyStart] == ' ') {
                bodyStart++;
            }
            boolean quoted = bodyStart < lineEnd && buffer[bodyStart] == quote;
            if (quoted) {
                int close = closingQuote(bodyStart + 1);
                if (close < 0) {
                    return "unclosed quote: expected a closing " + format.quote() + " in column " + (column + 1)
                            + ", found the end of the line";
                }
                start = bodyStart + 1;
                stop = close;
                i = endOfValue(close + 1);
            } else {
                i = endOfValue(start);
                stop = i;
            }
            for (int f : fieldsOfColumn[column]) {
                String trouble = value(f, start, stop, row);
                if (trouble != null) {
                    return trouble;
                }
            }
            column++;
            i++;
            if (blanks) {
                while (i < lineEnd && isGap(buffer[i])) {
                    i++;
                }
            }
        }
        return null;
    }

    private static boolean isGap(byte b) {
        return b == ' ' || b == '\t';
    }

    private int endOfValue(int from) {
        int i = from;
        if (blanks) {
            while (i < lineEnd && !isGap(buffer[i])) {
                i++;
            }
        } else {
            while (i < lineEnd && buffer[i] != delimiter) {
                i++;
            }
        }
        return i;
    }

    private int closingQuote(int from) {
        for (int i = from; i < lineEnd; i++) {
            if (buffer[i] == quote) {
                if (i + 1 < lineEnd && buffer[i + 1] == quote) {
                    i++;
                } else {
                    return i;
                }
            }
        }
        return -1;
    }

    private @Nullable String value(int f, int from, int to, int row) {
        int start = from;
        int stop = to;
        while (start < stop && isGap(buffer[start])) {
            start++;
        }
        while (stop > start && isGap(buffer[stop - 1])) {
            stop--;
        }
        for (byte[] marker : invalid[f]) {
            if (Arrays.equals(buffer, start, stop, marker, 0, marker.length)) {
                block.fates()[row] = invalidReasons[f];
                return null;
            }
        }
        TextFormat.Field field = format.fields().get(f);
        Column column = block.fields().get(f);
        boolean good = switch (field.type()) {
            case REAL -> numbers.real(buffer, start, stop);
            case INTEGER -> numbers.integer(buffer, start, stop);
            case HEX -> numbers.hex(buffer, start, stop);
        };
        if (!good) {
            String expected = switch (field.type()) {
                case REAL -> "a number";
                case INTEGER -> "a whole number of at most 64 bits";
                case HEX -> "a hexadecimal number of at most 16 digits";
            };
            String found = new String(buffer, start, Math.min(stop - start, 60), StandardCharsets.UTF_8);
            return "no number in " + field.name() + ": expected " + expected + ", found \"" + printable(found) + "\"";
        }
        if (column.whole()) {
            column.longs()[row] = numbers.whole();
        } else {
            column.doubles()[row] = numbers.value();
        }
        return null;
    }

    /** Finds the next line in the buffer, reading on if it must. */
    private boolean nextLine() throws IOException {
        int scan = at;
        while (true) {
            while (scan < end && buffer[scan] != '\n') {
                scan++;
            }
            if (scan < end || (ended && at < end)) {
                lineStart = at;
                lineEnd = scan > at && buffer[scan - 1] == '\r' ? scan - 1 : scan;
                consumed += Math.min(scan + 1, end) - at;
                at = Math.min(scan + 1, end);
                line++;
                return true;
            }
            if (ended) {
                return false;
            }
            scan -= at;
            if (scan > LONGEST_LINE) {
                passOverLongLine();
                scan = at;
            } else {
                fill();
                scan += at;
            }
        }
    }

    private void fill() throws IOException {
        System.arraycopy(buffer, at, buffer, 0, end - at);
        end -= at;
        at = 0;
        if (end == buffer.length) {
            buffer = Arrays.copyOf(buffer, 2 * buffer.length);
        }
        int got = stream == null ? -1 : stream.read(buffer, end, buffer.length - end);
        ended = got < 0;
        end += Math.max(0, got);
    }

    private void passOverLongLine() throws IOException {
        line++;
        lineStart = at;
        lineEnd = end;
        damage.unreadable(
                file,
                "line " + line,
                "line too long",
                "expected a line of at most " + LONGEST_LINE + " bytes, found a longer one; is this a binary file?",
                excerpt());
        while (true) {
            int scan = at;
            while (scan < end && buffer[scan] != '\n') {
                scan++;
            }
            consumed += Math.min(scan + 1, end) - at;
            boolean found = scan < end;
            at = Math.min(scan + 1, end);
            if (found || ended) {
                return;
            }
            fill();
        }
    }

    @Override
    public long position() {
        return consumed;
    }

    @Override
    public Map<String, Long> marks() {
        return Map.of();
    }

    @Override
    public List<String> unread() {
        return unread;
    }

    @Override
    public void close() throws IOException {
        if (stream != null) {
            stream.close();
            stream = null;
        }
    }
}
