package org.raysheaf.io.records;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.raysheaf.io.hdf5.Hdf5File;
import org.raysheaf.io.hdf5.Member;
import org.raysheaf.io.hdf5.StoredDataset;
import org.raysheaf.io.hdf5.StoredGroup;
import org.raysheaf.io.hdf5.StoredType;
import org.raysheaf.io.hdf5.ValueBytes;

/** The datasets of an HDF5 file as arrays of values. One thread. */
final class Hdf5Arrays implements ArrayReader.OpenArrays {
    /** Bytes of one value, so that a block of them stays small. */
    private static final int LARGEST_VALUE = 1 << 12;

    private final Path path;
    private final Hdf5File file;
    private final List<ArrayReader.ValueArray> arrays = new ArrayList<>();
    private final List<ArrayReader.Slot> slots = new ArrayList<>();
    private final Map<String, Integer> numbers = new LinkedHashMap<>();
    private final List<Set<String>> taken = new ArrayList<>();
    private final List<StoredDataset> datasets = new ArrayList<>();

    private Hdf5Arrays(Path path, Hdf5File file) {
        this.path = path;
        this.file = file;
    }

    static Hdf5Arrays open(Path path, Hdf5Format format) throws IOException {
        Hdf5File file = Hdf5File.open(path);
        try {
            Hdf5Arrays opened = new Hdf5Arrays(path, file);
            for (Hdf5Format.Field field : format.fields()) {
                opened.add(field, format.dataset());
            }
            return opened;
        } catch (IOException | RuntimeException e) {
            file.close();
            throw e;
        }
    }

    private void add(Hdf5Format.Field field, @org.jspecify.annotations.Nullable String common) throws IOException {
        String named = field.dataset() == null ? String.valueOf(common) : field.dataset();
        String name = named.startsWith("/") ? named.substring(1) : named;
        Integer known = numbers.get(name);
        int number = known == null ? addDataset(name) : known;
        StoredDataset dataset = datasets.get(number);
        StoredType type = dataset.type();
        int offset = 0;
        int valueBytes = arrays.get(number).valueBytes;
        if (!dataset.members().isEmpty()) {
            Member member = member(dataset, field, name);
            type = member.type();
            offset = member.offset();
            taken.get(number).add(member.name());
        } else if (field.member() != null) {
            throw problem(name, "expected compound values with a member " + field.member() + ", found " + type);
        }
        if (!type.number()) {
            throw problem(name, "expected numbers for field " + field.name() + ", found " + type);
        }
        int columns = dataset.members().isEmpty() ? valueBytes / type.bytes() : 1;
        int column = field.column() == null ? 1 : field.column();
        if (column > columns || (columns > 1 && field.column() == null)) {
            throw problem(
                    name,
                    "expected column: 1 to " + columns + " for field " + field.name() + ", found "
                            + (field.column() == null ? "none" : field.column()));
        }
        offset += (column - 1) * type.bytes();
        BinaryFormat.Order order = type.bigEndian() ? BinaryFormat.Order.BIG : BinaryFormat.Order.LITTLE;
        BinaryFormat.Coding kind = type.kind() == StoredType.Kind.REAL
                ? BinaryFormat.Coding.FLOAT
                : type.signed() ? BinaryFormat.Coding.SIGNED : BinaryFormat.Coding.UNSIGNED;
        slots.add(new ArrayReader.Slot(
                field.name(), number, BitPlace.of(valueBytes, order, offset, type.bytes(), null, null), kind));
    }

    private Member member(StoredDataset dataset, Hdf5Format.Field field, String name) throws IOException {
        String wanted = field.member() == null ? field.name() : field.member();
        List<String> names = new ArrayList<>();
        for (Member member : dataset.members()) {
            if (member.name().equals(wanted)) {
                return member;
            }
            names.add(member.name());
        }
        throw problem(name, "expected a member " + wanted + ", found " + String.join(", ", names));
    }

    private int addDataset(String name) throws IOException {
        StoredDataset dataset = find(name);
        long[] shape = dataset.shape();
        if (shape.length < 1 || shape.length > 2) {
            throw problem(name, "expected one or two dimensions, found " + shape.length);
        }
        // A row is a column to those who count the other way round: so MATLAB stores a vector.
        boolean row = shape.length == 2 && shape[0] == 1;
        long columns = shape.length == 2 && !row ? shape[1] : 1;
        long bytes = dataset.type().bytes() * columns;
        if (columns < 1 || columns > LARGEST_VALUE || bytes > LARGEST_VALUE) {
            throw problem(name, "expected at most " + LARGEST_VALUE + " bytes per record, found " + bytes);
        }
        int number = arrays.size();
        long count = row ? shape[1] : shape[0];
        ValueBytes values = dataset.bytes();
        arrays.add(new ArrayReader.ValueArray(name, (int) bytes, count) {
            @Override
            void read(byte[] into, int offset, int length) throws IOException {
                values.read(into, offset, length);
            }
        });
        datasets.add(dataset);
        taken.add(new HashSet<>());
        numbers.put(name, number);
        return number;
    }

    private StoredDataset find(String name) throws IOException {
        StoredGroup group = file.root();
        String[] parts = name.split("/", -1);
        for (int i = 0; i + 1 < parts.length; i++) {
            StoredGroup outer = group;
            String part = parts[i];
            group = group.group(part)
                    .orElseThrow(() ->
                            problem(name, "expected a group " + part + ", found " + String.join(", ", outer.names())));
        }
        StoredGroup last = group;
        return group.dataset(parts[parts.length - 1])
                .orElseThrow(() -> problem(
                        name,
                        "expected a dataset of that name, found "
                                + (last.names().isEmpty() ? "nothing" : String.join(", ", last.names()))));
    }

    private RecordException problem(String name, String trouble) {
        return new RecordException(path + ", " + name + ": " + trouble);
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
        Set<String> left = new LinkedHashSet<>();
        try {
            for (int i = 0; i < datasets.size(); i++) {
                for (Member member : datasets.get(i).members()) {
                    if (!taken.get(i).contains(member.name())) {
                        left.add(arrays.get(i).place + "." + member.name());
                    }
                }
            }
            for (String name : file.root().names()) {
                boolean read = numbers.keySet().stream().anyMatch(n -> n.equals(name) || n.startsWith(name + "/"));
                if (!read) {
                    left.add(name);
                }
            }
        } catch (IOException e) {
            return List.copyOf(left); // only names for people; the data have been opened already
        }
        return List.copyOf(left);
    }

    @Override
    public void close() throws IOException {
        file.close();
    }
}
