package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.OptionalLong;
import java.util.Set;

/** The attributes of a group or dataset, read when the object is opened. Immutable, safe for use by several threads. */
public final class StoredAttributes {
    private static final int LARGEST_COUNT = 1 << 16;

    private final Map<String, Object> values;

    private StoredAttributes(Map<String, Object> values) {
        this.values = values;
    }

    static StoredAttributes read(ObjectHeader header) throws IOException {
        Map<String, Object> values = new LinkedHashMap<>();
        for (Fields message : header.messages(Messages.ATTRIBUTE)) {
            readOne(message, values);
        }
        Optional<Fields> elsewhere = header.message(Messages.ATTRIBUTE_INFO);
        if (elsewhere.isPresent()) {
            refuseDense(elsewhere.get());
        }
        return new StoredAttributes(values);
    }

    private static void refuseDense(Fields info) throws Hdf5Exception {
        info.skip(1);
        info.skip((info.u8() & 1) != 0 ? 2 : 0);
        if (info.i64() != Messages.UNDEFINED) {
            throw info.unsupported("keeps its attributes in the newest way; write it without libver=\"latest\"");
        }
    }

    private static void readOne(Fields fields, Map<String, Object> values) throws IOException {
        int version = fields.u8();
        int flags = fields.u8();
        int nameBytes = fields.u16();
        int typeBytes = fields.u16();
        int spaceBytes = fields.u16();
        if (version < 1 || version > 3) {
            throw fields.damaged("expected an attribute of version 1 to 3, found " + version);
        }
        fields.skip(version == 3 ? 1 : 0);
        int grain = version == 1 ? 8 : 1;
        String name = fields.take(padded(nameBytes, grain), fields.place()).text(nameBytes);
        Fields typeFields = fields.take(padded(typeBytes, grain), fields.place());
        Fields spaceFields = fields.take(padded(spaceBytes, grain), fields.place());
        if (version > 1 && (flags & 3) != 0) {
            values.put(name, "(of a shared type)");
            return;
        }
        StoredType type = StoredType.read(typeFields);
        values.put(name, value(fields, type, Dataspace.read(spaceFields).count()));
    }

    private static int padded(int bytes, int grain) {
        return (bytes + grain - 1) / grain * grain;
    }

    private static Object value(Fields data, StoredType type, long count) throws IOException {
        if (count > LARGEST_COUNT) {
            throw data.damaged("expected an attribute of at most " + LARGEST_COUNT + " values, found " + count);
        }
        int n = (int) count;
        return switch (type.kind()) {
            case INTEGER -> {
                long[] whole = new long[n];
                for (int i = 0; i < n; i++) {
                    whole[i] = Numbers.whole(data, type);
                }
                yield whole;
            }
            case REAL -> {
                double[] real = new double[n];
                for (int i = 0; i < n; i++) {
                    real[i] = Numbers.real(data, type);
                }
                yield real;
            }
            case TEXT -> n == 1 ? data.text(type.bytes()) : type;
            case LONG_TEXT -> n == 1 ? GlobalHeap.text(data) : type;
            case OTHER -> type;
        };
    }

    /**
     * The names of all attributes.
     *
     * @return their names, in the order stored
     */
    public Set<String> names() {
        return Collections.unmodifiableSet(values.keySet());
    }

    /**
     * Whether there is an attribute of that name, whatever it holds.
     *
     * @param name its name
     * @return true if there is
     */
    public boolean has(String name) {
        return values.containsKey(name);
    }

    /**
     * An attribute as text.
     *
     * @param name its name
     * @return its text, or empty if there is no such attribute or it is no single text
     */
    public Optional<String> text(String name) {
        return values.get(name) instanceof String text ? Optional.of(text) : Optional.empty();
    }

    /**
     * An attribute as a number.
     *
     * @param name its name
     * @return its value, or empty if there is no such attribute or it is no single number
     */
    public OptionalDouble number(String name) {
        Optional<double[]> numbers = numbers(name);
        return numbers.isPresent() && numbers.get().length == 1
                ? OptionalDouble.of(numbers.get()[0])
                : OptionalDouble.empty();
    }

    /**
     * An attribute as a whole number.
     *
     * @param name its name
     * @return its value, or empty if there is no such attribute or it is no single whole number
     */
    public OptionalLong whole(String name) {
        return values.get(name) instanceof long[] whole && whole.length == 1
                ? OptionalLong.of(whole[0])
                : OptionalLong.empty();
    }

    /**
     * An attribute as a row of numbers.
     *
     * @param name its name
     * @return its values, or empty if there is no such attribute or it holds no numbers
     */
    public Optional<double[]> numbers(String name) {
        Object value = values.get(name);
        if (value instanceof double[] real) {
            return Optional.of(real.clone());
        }
        if (value instanceof long[] whole) {
            double[] real = new double[whole.length];
            for (int i = 0; i < real.length; i++) {
                real[i] = whole[i];
            }
            return Optional.of(real);
        }
        return Optional.empty();
    }
}
