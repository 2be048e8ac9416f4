package org.raysheaf.io.records;

import java.io.BufferedInputStream;
import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;

/** NumPy arrays, one in a file or several in a folder, as arrays of values. One thread. */
final class NpyArrays implements ArrayReader.OpenArrays {
    private static final int LARGEST_VALUE = 1 << 12;

    private final List<ArrayReader.ValueArray> arrays = new ArrayList<>();
    private final List<ArrayReader.Slot> slots = new ArrayList<>();
    private final List<InputStream> streams = new ArrayList<>();
    private final List<NpyHeader> headers = new ArrayList<>();
    private final Map<Path, Integer> numbers = new LinkedHashMap<>();
    private final List<Set<String>> taken = new ArrayList<>();
    private final DamageLog damage;

    private NpyArrays(DamageLog damage) {
        this.damage = damage;
    }

    static NpyArrays open(Path path, NpyFormat format, DamageLog damage) throws IOException {
        NpyArrays opened = new NpyArrays(damage);
        try {
            for (NpyFormat.Field field : format.fields()) {
                opened.add(path, field);
            }
            return opened;
        } catch (IOException | RuntimeException e) {
            opened.close();
            throw e;
        }
    }

    private void add(Path path, NpyFormat.Field field) throws IOException {
        boolean folder = Files.isDirectory(path);
        String name = field.array();
        if (folder != (name != null)) {
            throw new RecordException(
                    folder
                            ? path + " is a folder: expected array: NAME.npy for field " + field.name() + ", found none"
                            : path + " is a file: expected no array for field " + field.name() + ", found " + name
                                    + "; give the folder of the arrays as data file");
        }
        Path file = name == null ? path : path.resolve(name);
        Integer known = numbers.get(file);
        int number = known == null ? addArray(file) : known;
        NpyHeader header = headers.get(number);
        int valueBytes = arrays.get(number).valueBytes;
        String wanted = header.members().containsKey("") ? "" : field.member() == null ? field.name() : field.member();
        NpyHeader.Part part = header.members().get(wanted);
        if (part == null || (wanted.isEmpty() && field.member() != null)) {
            throw new RecordException(file + ": expected a member " + (wanted.isEmpty() ? field.member() : wanted)
                    + ", found "
                    + (wanted.isEmpty()
                            ? "an array that is not structured"
                            : String.join(", ", header.members().keySet())));
        }
        int columns = valueBytes / header.valueBytes();
        int column = field.column() == null ? 1 : field.column();
        if (column > columns || (columns > 1 && field.column() == null)) {
            throw new RecordException(file + ": expected column: 1 to " + columns + " for field " + field.name()
                    + ", found " + (field.column() == null ? "none" : field.column()));
        }
        taken.get(number).add(wanted);
        int offset = part.offset() + (column - 1) * header.valueBytes();
        slots.add(new ArrayReader.Slot(
                field.name(),
                number,
                BitPlace.of(valueBytes, part.order(), offset, part.bytes(), null, null),
                part.number()));
    }

    private int addArray(Path file) throws IOException {
        InputStream stream = new BufferedInputStream(Files.newInputStream(file), 1 << 17);
        streams.add(stream);
        NpyHeader header = NpyHeader.read(stream, file);
        List<Long> shape = header.shape();
        if (shape.isEmpty() || shape.size() > 2) {
            throw new RecordException(file + ": expected one or two dimensions, found " + shape.size());
        }
        boolean row = shape.size() == 2 && shape.get(0) == 1;
        long columns = shape.size() == 2 && !row ? shape.get(1) : 1;
        if (columns > 1 && header.columnsFirst()) {
            throw new RecordException(
                    file
                            + ": expected rows one after another (C order), found columns; save numpy.ascontiguousarray(array)");
        }
        if (columns < 1 || columns > LARGEST_VALUE || columns * header.valueBytes() > LARGEST_VALUE) {
            throw new RecordException(file + ": expected at most " + LARGEST_VALUE + " bytes per record, found "
                    + columns + " values of " + header.valueBytes());
        }
        int valueBytes = (int) (columns * header.valueBytes());
        long declared = row ? shape.get(1) : shape.get(0);
        long there = (Files.size(file) - header.bytes()) / valueBytes;
        if (there < declared) {
            damage.unreadable(
                    file,
                    "byte " + Files.size(file),
                    "file ends too early",
                    "expected " + declared + " values, found only " + there + " before the end of the file",
                    "(none)");
        }
        arrays.add(new ArrayReader.ValueArray(file.toString(), valueBytes, Math.min(declared, there)) {
            @Override
            void read(byte[] into, int offset, int length) throws IOException {
                if (stream.readNBytes(into, offset, length) < length) {
                    throw new RecordException(
                            place + ": expected " + length + " more bytes, found the end of the file");
                }
            }
        });
        headers.add(header);
        taken.add(new HashSet<>());
        numbers.put(file, arrays.size() - 1);
        return arrays.size() - 1;
    }

    @Override
    public List<ArrayReader.ValueArray> arrays() {
        return arrays;
    }

    @Override
    public List<ArrayReader.Slot> slots() {
        return slots;
    }

    @Override
    public List<String> unread() {
        List<String> left = new ArrayList<>();
        for (int i = 0; i < arrays.size(); i++) {
            for (String member : headers.get(i).members().keySet()) {
                if (!taken.get(i).contains(member)) {
                    left.add(member);
                }
            }
        }
        return left;
    }

    @Override
    public void close() throws IOException {
        for (InputStream stream : streams) {
            stream.close();
        }
    }
}
