package org.raysheaf.io.records;

import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/**
 * The header of a NumPy array, versions 1 to 3 of its format (numpy.lib.format): the mark {@code \x93NUMPY}, two bytes of version, the length of the
 * header (2 or 4 bytes, little-endian), then a Python dictionary as text.
 *
 * @param members the members of a value; one of an empty name if the array is not structured
 * @param valueBytes size of a value (bytes)
 * @param columnsFirst whether the first index runs fastest
 * @param shape the shape
 * @param bytes length of the header, all included (bytes)
 */
record NpyHeader(Map<String, Part> members, int valueBytes, boolean columnsFirst, List<Long> shape, long bytes) {
    private static final int LARGEST = 1 << 20;
    private static final Pattern DESCR =
            Pattern.compile("'descr'\\s*:\\s*('[^']*'|\\[.*?\\])\\s*,\\s*'", Pattern.DOTALL);
    private static final Pattern FORTRAN = Pattern.compile("'fortran_order'\\s*:\\s*(True|False)");
    private static final Pattern SHAPE = Pattern.compile("'shape'\\s*:\\s*\\(([0-9,\\sL]*)\\)");
    private static final Pattern MEMBER = Pattern.compile("\\(\\s*'([^']*)'\\s*,\\s*'([^']*)'\\s*(,[^)]*\\)\\s*)?\\)");

    /** A number in a value. */
    record Part(int offset, int bytes, BinaryFormat.Coding number, BinaryFormat.Order order) {}

    static NpyHeader read(InputStream stream, Path file) throws IOException {
        byte[] start = stream.readNBytes(8);
        boolean marked = start.length == 8
                && start[0] == (byte) 0x93
                && new String(start, 1, 5, StandardCharsets.ISO_8859_1).equals("NUMPY");
        if (!marked) {
            throw new RecordException(file + ", byte 0: expected a NumPy array (.npy), found another kind of file");
        }
        int version = start[6];
        if (version < 1 || version > 3) {
            throw new RecordException(file + ", byte 6: expected version 1 to 3 of .npy, found " + version);
        }
        byte[] lengthBytes = stream.readNBytes(version == 1 ? 2 : 4);
        long length = 0;
        for (int i = 0; i < lengthBytes.length; i++) {
            length |= (lengthBytes[i] & 0xffL) << (8 * i);
        }
        if (length > LARGEST) {
            throw new RecordException(
                    file + ", byte 8: expected a header of at most " + LARGEST + " bytes, found " + length);
        }
        byte[] header = stream.readNBytes((int) length);
        if (header.length < length) {
            throw new RecordException(file + ": expected a header of " + length + " bytes, found the end of the file");
        }
        String text = new String(header, StandardCharsets.UTF_8);
        return parse(text, 8L + lengthBytes.length + length, file);
    }

    private static NpyHeader parse(String text, long bytes, Path file) throws RecordException {
        String descr = find(DESCR, text, "descr", file);
        boolean columnsFirst = find(FORTRAN, text, "fortran_order", file).equals("True");
        List<Long> shape = new ArrayList<>();
        for (String extent : Pattern.compile(",")
                .splitAsStream(find(SHAPE, text, "shape", file))
                .toList()) {
            String digits = extent.strip().replace("L", "");
            if (!digits.isEmpty()) {
                try {
                    shape.add(Long.parseLong(digits));
                } catch (NumberFormatException e) {
                    throw new RecordException(file + ", header: expected a shape, found " + extent, e);
                }
            }
        }
        Map<String, Part> members = new LinkedHashMap<>();
        int size = 0;
        if (descr.startsWith("'")) {
            Part part = part(descr.substring(1, descr.length() - 1), 0, file);
            members.put("", part);
            size = part.bytes();
        } else {
            Matcher member = MEMBER.matcher(descr);
            while (member.find()) {
                if (member.group(3) != null) {
                    throw new RecordException(
                            file + ", header: expected members that are single numbers, found the array "
                                    + member.group(1) + "; store it apart");
                }
                String type = member.group(2);
                if (type.startsWith("|V")) {
                    size += width(type, file); // padding
                } else {
                    Part part = part(type, size, file);
                    members.put(member.group(1), part);
                    size += part.bytes();
                }
                if (size > 1 << 16) {
                    throw new RecordException(file + ", header: expected values of at most 65536 bytes, found more");
                }
            }
        }
        if (members.isEmpty()) {
            throw new RecordException(file + ", header: expected at least one member, found " + descr);
        }
        return new NpyHeader(members, size, columnsFirst, List.copyOf(shape), bytes);
    }

    private static String find(Pattern pattern, String text, String what, Path file) throws RecordException {
        Matcher matcher = pattern.matcher(text);
        if (!matcher.find()) {
            throw new RecordException(file + ", header: expected " + what + ", found none");
        }
        return matcher.group(1);
    }

    private static int width(String type, Path file) throws RecordException {
        String digits = type.substring(Math.min(2, type.length()));
        if (digits.isEmpty() || digits.length() > 5 || !digits.chars().allMatch(c -> c >= '0' && c <= '9')) {
            throw new RecordException(file + ", header: expected a type such as <i8 or <f4, found " + type);
        }
        return Integer.parseInt(digits);
    }

    private static Part part(String type, int offset, Path file) throws RecordException {
        int bytes = width(type, file);
        char order = type.charAt(0);
        char kind = type.charAt(1);
        boolean whole = kind == 'u' || kind == 'i' || kind == 'b';
        boolean known = whole
                ? bytes == 1 || bytes == 2 || bytes == 4 || bytes == 8
                : kind == 'f' && (bytes == 4 || bytes == 8);
        if (!known || "<>|=".indexOf(order) < 0) {
            throw new RecordException(
                    file + ", header: expected whole numbers of 8 to 64 bits or floats of 32 or 64, found " + type
                            + "; convert it with astype");
        }
        BinaryFormat.Coding number = kind == 'f'
                ? BinaryFormat.Coding.FLOAT
                : kind == 'i' ? BinaryFormat.Coding.SIGNED : BinaryFormat.Coding.UNSIGNED;
        return new Part(offset, bytes, number, order == '>' ? BinaryFormat.Order.BIG : BinaryFormat.Order.LITTLE);
    }
}
