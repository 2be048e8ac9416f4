package org.raysheaf.io.description;

import java.math.BigDecimal;
import java.time.Instant;
import java.time.format.DateTimeParseException;
import java.util.regex.Pattern;
import org.jspecify.annotations.Nullable;
import org.yaml.snakeyaml.DumperOptions.ScalarStyle;
import org.yaml.snakeyaml.nodes.ScalarNode;

/** The types whose values are one word in a file, each with the spelling that it accepts. */
enum ScalarType {
    NUMBER("a number") {
        @Override
        @Nullable
        Object read(ScalarNode node) {
            if (!isPlain(node) || !DECIMAL.matcher(node.getValue()).matches()) {
                return null;
            }
            double value = Double.parseDouble(node.getValue());
            return Double.isFinite(value) ? value : null;
        }
    },
    INT("a whole number") {
        @Override
        @Nullable
        Object read(ScalarNode node) {
            Long value = whole(node);
            return value == null || value != value.intValue() ? null : (Object) value.intValue();
        }
    },
    LONG("a whole number") {
        @Override
        @Nullable
        Object read(ScalarNode node) {
            return whole(node);
        }
    },
    BOOLEAN("true or false") {
        @Override
        @Nullable
        Object read(ScalarNode node) {
            return switch (isPlain(node) ? node.getValue() : "") {
                case "true" -> true;
                case "false" -> false;
                default -> null;
            };
        }
    },
    TEXT("a text") {
        @Override
        Object read(ScalarNode node) {
            return node.getValue();
        }
    },
    INSTANT("a time such as 2026-03-01T09:30:00Z") {
        @Override
        @Nullable
        Object read(ScalarNode node) {
            try {
                return Instant.parse(node.getValue());
            } catch (DateTimeParseException e) {
                return null;
            }
        }
    };

    // No leading zeros: YAML 1.1 takes 010 for eight, YAML 1.2 for ten.
    private static final String DIGITS = "[-+]?(?:0|[1-9][0-9]*)";
    private static final Pattern DECIMAL =
            Pattern.compile("(?:" + DIGITS + "(?:\\.[0-9]*)?|[-+]?\\.[0-9]+)(?:[eE][-+]?[0-9]{1,4})?");
    private static final Pattern WHOLE = Pattern.compile(DIGITS + "(?:[eE]\\+?[0-9]{1,2})?");

    private final String expected;

    ScalarType(String expected) {
        this.expected = expected;
    }

    /** The value, or null if the text is not one of this type. */
    abstract @Nullable Object read(ScalarNode node);

    String expected() {
        return expected;
    }

    /** What to add to a message about a text that was not accepted; mostly nothing. */
    String remedy(ScalarNode node) {
        boolean wantsWhole = this == INT || this == LONG;
        if (!isPlain(node) && (wantsWhole || this == NUMBER || this == BOOLEAN)) {
            return "; remove the quotes";
        }
        return wantsWhole && WHOLE.matcher(node.getValue()).matches() ? ", which is too large" : "";
    }

    static @Nullable ScalarType of(Class<?> type) {
        if (type == double.class || type == Double.class) {
            return NUMBER;
        }
        if (type == int.class || type == Integer.class) {
            return INT;
        }
        if (type == long.class || type == Long.class) {
            return LONG;
        }
        if (type == boolean.class || type == Boolean.class) {
            return BOOLEAN;
        }
        if (type == String.class) {
            return TEXT;
        }
        return type == Instant.class ? INSTANT : null;
    }

    private static boolean isPlain(ScalarNode node) {
        return node.getScalarStyle() == ScalarStyle.PLAIN;
    }

    private static @Nullable Long whole(ScalarNode node) {
        if (!isPlain(node) || !WHOLE.matcher(node.getValue()).matches()) {
            return null;
        }
        try {
            return new BigDecimal(node.getValue()).longValueExact();
        } catch (ArithmeticException e) {
            return null;
        }
    }
}
