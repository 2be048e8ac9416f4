package org.raysheaf.io.description;

import java.lang.reflect.ParameterizedType;
import java.lang.reflect.Type;
import java.util.Arrays;
import java.util.List;
import java.util.Locale;
import java.util.stream.Collectors;
import org.raysheaf.geometry.frame.Vector3;

/** Says in a few words what a file should hold for a type, for the first half of a message. */
final class Expected {
    /** What a vector looks like. */
    static final String VECTOR = "a list of three numbers [x, y, z]";

    private Expected() {}

    static String of(Type type) {
        if (type instanceof ParameterizedType generic) {
            return generic.getRawType() == List.class ? "a list" : "a mapping";
        }
        Class<?> plain = (Class<?>) type;
        ScalarType scalar = ScalarType.of(plain);
        if (scalar != null) {
            return scalar.expected();
        }
        if (plain == Vector3.class) {
            return VECTOR;
        }
        if (plain.isEnum()) {
            return oneOf(plain);
        }
        if (plain.isRecord()) {
            return "a mapping with the keys "
                    + Setting.of(plain).stream().map(Setting::key).collect(Collectors.joining(", "));
        }
        return "a mapping with the key " + Choices.KEY;
    }

    private static String oneOf(Class<?> type) {
        return "one of "
                + Arrays.stream(type.getEnumConstants())
                        .map(constant -> ((Enum<?>) constant).name().toLowerCase(Locale.ROOT))
                        .collect(Collectors.joining(", "));
    }
}
