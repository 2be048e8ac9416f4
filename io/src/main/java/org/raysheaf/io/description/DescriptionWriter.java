package org.raysheaf.io.description;

import java.lang.reflect.InvocationTargetException;
import java.lang.reflect.ParameterizedType;
import java.lang.reflect.Type;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import org.jspecify.annotations.Nullable;

/**
 * Writes settings as a description that {@link DescriptionReader} reads back to equal settings. The text is canonical: equal settings
 * give the same bytes on every machine, with every default spelled out and every absent value left out, so it may be digested. Safe
 * for use by several threads.
 */
public final class DescriptionWriter {
    private static final String STEP = "  ";

    private final StringBuilder out = new StringBuilder();

    private DescriptionWriter() {}

    /**
     * Renders settings.
     *
     * @param kind the kind that the first line names, for example {@code system}
     * @param settings a record of the types that the package comment lists
     * @return the whole description, lines ended by a line feed
     * @throws IllegalArgumentException if a value has no place in a description: a NaN, an infinity, an unknown type
     */
    public static String render(String kind, Record settings) {
        DescriptionWriter writer = new DescriptionWriter();
        writer.out.append(FirstLine.KEY + ": " + kind + "/" + FirstLine.VERSION + "\n");
        writer.components(settings, "");
        return writer.out.toString();
    }

    private void components(Object settings, String indent) {
        for (Setting setting : Setting.of(settings.getClass())) {
            Object value = valueOf(setting, settings);
            if (value != null) {
                entry(setting.key(), setting.type(), value, indent);
            }
        }
    }

    private void entry(String key, Type type, Object value, String indent) {
        String inline = InlineText.of(type, value);
        out.append(indent).append(key).append(':');
        if (inline != null) {
            out.append(' ').append(inline).append('\n');
        } else {
            out.append('\n');
            block(type, value, indent + STEP);
        }
    }

    private void block(Type type, Object value, String indent) {
        if (value instanceof List<?> list) {
            for (Object item : list) {
                item(argument(type, 0), item, indent);
            }
        } else if (value instanceof Map<?, ?> map) {
            map.forEach((key, item) -> entry(InlineText.quoted((String) key), argument(type, 1), item, indent));
        } else {
            if (type instanceof Class<?> declared && declared.isSealed()) {
                entry(Choices.KEY, String.class, Choices.nameOf(value.getClass(), declared), indent);
            }
            components(value, indent);
        }
    }

    private void item(Type type, Object item, String indent) {
        String inline = InlineText.of(type, item);
        if (inline != null) {
            out.append(indent).append("- ").append(inline).append('\n');
            return;
        }
        int start = out.length();
        block(type, item, indent + STEP);
        // The first line of the block carries the dash in its last two columns of indent.
        out.setCharAt(start + indent.length(), '-');
    }

    private static Type argument(Type type, int index) {
        return ((ParameterizedType) type).getActualTypeArguments()[index];
    }

    private static @Nullable Object valueOf(Setting setting, Object settings) {
        try {
            var accessor = setting.component().getAccessor();
            accessor.setAccessible(true);
            Object value = accessor.invoke(settings);
            return value instanceof Optional<?> optional ? optional.orElse(null) : value;
        } catch (InvocationTargetException | IllegalAccessException e) {
            throw new IllegalStateException("cannot read " + setting.component(), e);
        }
    }
}
