package org.raysheaf.io.description;

import com.fasterxml.jackson.core.io.NumberOutput;
import java.lang.reflect.ParameterizedType;
import java.lang.reflect.Type;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Set;
import java.util.regex.Pattern;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.frame.Vector3;

/** Spells values that fit on the line of their key. */
final class InlineText {
    private static final Pattern PLAIN = Pattern.compile("[A-Za-z](?:[A-Za-z0-9 _./()-]*[A-Za-z0-9_./()-])?");

    /** Words that some YAML readers take for something else than text. */
    private static final Set<String> RESERVED = Set.of("true", "false", "yes", "no", "on", "off", "y", "n", "null");

    private InlineText() {}

    /** The text, or null if the value needs lines of its own. */
    static @Nullable String of(Type type, Object value) {
        if (value instanceof Double number) {
            return number(number);
        }
        if (value instanceof Integer || value instanceof Long || value instanceof Boolean) {
            return value.toString();
        }
        if (value instanceof String || value instanceof Instant) {
            return quoted(value.toString());
        }
        if (value instanceof Enum<?> constant) {
            return constant.name().toLowerCase(Locale.ROOT);
        }
        if (value instanceof Vector3 v) {
            return "[" + number(v.x()) + ", " + number(v.y()) + ", " + number(v.z()) + "]";
        }
        if (value instanceof List<?> list) {
            return list(((ParameterizedType) type).getActualTypeArguments()[0], list);
        }
        if (value instanceof Map<?, ?> map) {
            return map.isEmpty() ? "{}" : null;
        }
        if (value instanceof Record record) {
            boolean bare = record.getClass() == type && record.getClass().getRecordComponents().length == 0;
            return bare ? "{}" : null;
        }
        throw new IllegalArgumentException(
                "a description cannot hold a " + value.getClass().getName());
    }

    private static @Nullable String list(Type type, List<?> list) {
        List<String> items = new ArrayList<>();
        for (Object item : list) {
            String inline = of(type, item);
            if (inline == null) {
                return null;
            }
            items.add(inline);
        }
        return "[" + String.join(", ", items) + "]";
    }

    /** The shortest decimal that reads back to the same number, the same on every Java version. */
    private static String number(double value) {
        if (!Double.isFinite(value)) {
            throw new IllegalArgumentException("a description cannot hold the number " + value);
        }
        String text = NumberOutput.toString(value, true);
        return text.endsWith(".0") ? text.substring(0, text.length() - 2) : text;
    }

    /** Text, in quotes where YAML could take it for something else. */
    static String quoted(String text) {
        if (PLAIN.matcher(text).matches() && !RESERVED.contains(text.toLowerCase(Locale.ROOT))) {
            return text;
        }
        StringBuilder quoted = new StringBuilder("\"");
        for (int i = 0; i < text.length(); i++) {
            char c = text.charAt(i);
            switch (c) {
                case '"' -> quoted.append("\\\"");
                case '\\' -> quoted.append("\\\\");
                case '\n' -> quoted.append("\\n");
                case '\t' -> quoted.append("\\t");
                default -> quoted.append(Character.isISOControl(c) ? "\\u%04x".formatted((int) c) : c);
            }
        }
        return quoted.append('"').toString();
    }
}
