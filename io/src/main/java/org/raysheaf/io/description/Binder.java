package org.raysheaf.io.description;

import java.lang.reflect.ParameterizedType;
import java.lang.reflect.Type;
import java.util.ArrayList;
import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Nearest;
import org.yaml.snakeyaml.nodes.MappingNode;
import org.yaml.snakeyaml.nodes.Node;
import org.yaml.snakeyaml.nodes.ScalarNode;
import org.yaml.snakeyaml.nodes.SequenceNode;

/** Turns a YAML node into a value of a Java type. What does not fit is reported, and stands as null. */
final class Binder {
    /** Stands for a value that was reported, where null cannot. */
    private static final Object REPORTED = new Object();

    private final Findings findings;
    private final RecordBinder records = new RecordBinder(this);

    Binder(Findings findings) {
        this.findings = findings;
    }

    Findings findings() {
        return findings;
    }

    /** The record of a whole description. */
    @Nullable
    Object bindRoot(Class<?> type, MappingNode root) {
        return records.bindRoot(type, root);
    }

    @Nullable
    Object bind(Type type, Node node, Place place) {
        if (type instanceof Class<?> plain) {
            return bindClass(plain, node, place);
        }
        if (type instanceof ParameterizedType generic) {
            Type[] arguments = generic.getActualTypeArguments();
            if (generic.getRawType() == List.class) {
                return list(arguments[0], node, place);
            }
            if (generic.getRawType() == Map.class && arguments[0] == String.class) {
                return map(arguments[1], node, place);
            }
        }
        throw new IllegalArgumentException("a description cannot hold a " + type.getTypeName());
    }

    private @Nullable Object bindClass(Class<?> type, Node node, Place place) {
        ScalarType scalar = ScalarType.of(type);
        if (scalar != null) {
            return scalar(scalar, node, place);
        }
        if (type.isEnum()) {
            return constant(type, node, place);
        }
        if (type == Vector3.class) {
            return vector(node, place);
        }
        if (type.isRecord()) {
            return records.bind(type, node, place);
        }
        if (type.isInterface() && type.isSealed()) {
            return records.bindChoice(type, node, place);
        }
        throw new IllegalArgumentException("a description cannot hold a " + type.getTypeName());
    }

    private @Nullable Object scalar(ScalarType type, Node node, Place place) {
        if (!(node instanceof ScalarNode scalar) || Found.isNothing(node)) {
            return mismatch(type.expected(), node, place);
        }
        Object value = type.read(scalar);
        if (value == null) {
            report(place, "expected " + type.expected() + ", found " + Found.describe(node) + type.remedy(scalar));
        }
        return value;
    }

    private @Nullable Object constant(Class<?> type, Node node, Place place) {
        Map<String, Object> constants = new LinkedHashMap<>();
        for (Object constant : type.getEnumConstants()) {
            constants.put(((Enum<?>) constant).name().toLowerCase(Locale.ROOT), constant);
        }
        return pick(constants, node, place);
    }

    /** The value that a word stands for; hyphens count as underscores. */
    <T> @Nullable T pick(Map<String, T> choices, Node node, Place place) {
        String expected = "one of " + String.join(", ", choices.keySet());
        if (!(node instanceof ScalarNode scalar) || Found.isNothing(node)) {
            mismatch(expected, node, place);
            return null;
        }
        T choice = choices.get(scalar.getValue().replace('-', '_'));
        if (choice == null) {
            String nearest = Nearest.to(scalar.getValue(), choices.keySet());
            report(place, "expected " + expected + ", found " + Found.describe(node) + "; the nearest is " + nearest);
        }
        return choice;
    }

    private @Nullable Object vector(Node node, Place place) {
        if (!(node instanceof SequenceNode sequence) || sequence.getValue().size() != 3) {
            return mismatch(Expected.VECTOR, node, place);
        }
        List<?> numbers = list(double.class, node, place);
        return numbers == null ? null : new Vector3(number(numbers, 0), number(numbers, 1), number(numbers, 2));
    }

    private static double number(List<?> numbers, int index) {
        return (Double) numbers.get(index);
    }

    private @Nullable List<?> list(Type item, Node node, Place place) {
        if (!(node instanceof SequenceNode sequence)) {
            mismatch("a list", node, place);
            return null;
        }
        List<Object> values = new ArrayList<>();
        for (Node child : sequence.getValue()) {
            Object value = bind(item, child, place.item(values.size(), child));
            values.add(value == null ? REPORTED : value);
        }
        return values.contains(REPORTED) ? null : List.copyOf(values);
    }

    private @Nullable Object map(Type type, Node node, Place place) {
        if (!(node instanceof MappingNode mapping)) {
            return mismatch("a mapping", node, place);
        }
        Entries entries = new Entries(mapping, place, findings);
        Map<String, Object> values = new LinkedHashMap<>();
        entries.values().forEach((key, value) -> {
            Object bound = bind(type, value, entries.placeOf(key));
            values.put(key, bound == null ? REPORTED : bound);
        });
        return values.containsValue(REPORTED) ? null : Collections.unmodifiableMap(values);
    }

    /** Reports that a node is not what was expected; returns null. */
    @Nullable
    Object mismatch(String expected, Node node, Place place) {
        return report(place, "expected " + expected + ", found " + Found.describe(node));
    }

    /** Reports a problem; returns null. */
    @Nullable
    Object report(Place place, String message) {
        findings.add(place, message);
        return null;
    }
}
