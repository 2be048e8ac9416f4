package org.raysheaf.io.result;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.node.ArrayNode;
import com.fasterxml.jackson.databind.node.JsonNodeFactory;
import com.fasterxml.jackson.databind.node.ObjectNode;
import java.lang.reflect.Array;
import java.lang.reflect.RecordComponent;
import java.nio.file.Path;
import java.time.Instant;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;
import java.util.SortedMap;
import java.util.TreeMap;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.io.description.KeyName;

/** Turns results into JSON nodes, and refuses what a reader could stumble over. */
final class JsonTree {
    private static final JsonNodeFactory NODES = JsonNodeFactory.instance;

    private JsonTree() {}

    static JsonNode of(@Nullable Object value, String field) {
        if (value == null) {
            return NODES.nullNode();
        }
        if (value instanceof Number number) {
            return number(number, field);
        }
        if (value instanceof Boolean flag) {
            return NODES.booleanNode(flag);
        }
        if (value instanceof Enum<?> constant) {
            return NODES.textNode(constant.name().toLowerCase(Locale.ROOT));
        }
        if (value instanceof String || value instanceof Instant || value instanceof Path) {
            return NODES.textNode(value.toString());
        }
        if (value instanceof Optional<?> optional) {
            return of(optional.orElse(null), field);
        }
        return group(value, field);
    }

    private static JsonNode group(Object value, String field) {
        if (value instanceof NotKnown unknown) {
            ObjectNode node = NODES.objectNode();
            node.putNull("value");
            return node.put("reason", unknown.reason());
        }
        if (value instanceof Vector3 vector) {
            return list(List.of(vector.x(), vector.y(), vector.z()), field);
        }
        if (value instanceof Record record) {
            return record(record, field);
        }
        if (value instanceof Map<?, ?> map) {
            return map(map, field);
        }
        if (value instanceof List<?> list) {
            return list(list, field);
        }
        if (value.getClass().isArray()) {
            return array(value, field);
        }
        throw new IllegalArgumentException("field " + field + ": a result cannot hold a "
                + value.getClass().getName());
    }

    private static JsonNode number(Number number, String field) {
        if (number instanceof Integer || number instanceof Long || number instanceof Short || number instanceof Byte) {
            return NODES.numberNode(number.longValue());
        }
        if (!(number instanceof Double) && !(number instanceof Float)) {
            throw new IllegalArgumentException("field " + field + ": a result cannot hold a "
                    + number.getClass().getName());
        }
        if (!Double.isFinite(number.doubleValue())) {
            throw new IllegalArgumentException("field " + field + ": expected a finite number, found " + number
                    + "; say why it is not known instead");
        }
        return number instanceof Float single ? NODES.numberNode(single) : NODES.numberNode(number.doubleValue());
    }

    private static JsonNode record(Record record, String field) {
        ObjectNode node = NODES.objectNode();
        String kind = KeyName.ofChoice(record.getClass());
        if (kind != null) {
            node.put("kind", kind);
        }
        for (RecordComponent component : record.getClass().getRecordComponents()) {
            String key = KeyName.of(component.getName());
            node.set(key, of(valueOf(component, record), within(field, key)));
        }
        return node;
    }

    private static @Nullable Object valueOf(RecordComponent component, Record record) {
        try {
            component.getAccessor().setAccessible(true);
            return component.getAccessor().invoke(record);
        } catch (ReflectiveOperationException e) {
            throw new IllegalStateException("cannot read " + component, e);
        }
    }

    private static JsonNode map(Map<?, ?> map, String field) {
        Map<String, Object> named = isOrdered(map) ? new LinkedHashMap<>() : new TreeMap<>();
        map.forEach((key, value) -> named.put(key.toString(), value));
        ObjectNode node = NODES.objectNode();
        named.forEach((key, value) -> node.set(key, of(value, within(field, key))));
        return node;
    }

    /** Map.of and HashMap have an order that changes from run to run; of wrappers it cannot be told, and they are trusted. */
    private static boolean isOrdered(Map<?, ?> map) {
        boolean immutable = map.getClass() == Map.of().getClass()
                || map.getClass() == Map.of(1, 1).getClass();
        boolean hashed = map.getClass() == HashMap.class;
        return map instanceof SortedMap || !(immutable || hashed);
    }

    private static JsonNode list(List<?> list, String field) {
        ArrayNode node = NODES.arrayNode(list.size());
        for (int i = 0; i < list.size(); i++) {
            node.add(of(list.get(i), field + "[" + i + "]"));
        }
        return node;
    }

    private static JsonNode array(Object array, String field) {
        ArrayNode node = NODES.arrayNode(Array.getLength(array));
        for (int i = 0; i < Array.getLength(array); i++) {
            node.add(of(Array.get(array, i), field + "[" + i + "]"));
        }
        return node;
    }

    private static String within(String field, String key) {
        return field.isEmpty() ? key : field + "." + key;
    }
}
