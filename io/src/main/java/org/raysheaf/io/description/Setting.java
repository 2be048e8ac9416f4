package org.raysheaf.io.description;

import java.lang.reflect.ParameterizedType;
import java.lang.reflect.RecordComponent;
import java.lang.reflect.Type;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Default;

/**
 * One component of a settings record, as descriptions see it.
 *
 * @param component the component
 * @param key its key in files
 * @param type what its value must be; the T of an {@code Optional<T>}
 */
record Setting(RecordComponent component, String key, Type type) {
    static List<Setting> of(Class<?> record) {
        List<Setting> settings = new ArrayList<>();
        for (RecordComponent component : record.getRecordComponents()) {
            Type type = component.getGenericType();
            if (component.getType() == Optional.class) {
                type = ((ParameterizedType) type).getActualTypeArguments()[0];
            }
            settings.add(new Setting(component, KeyName.of(component.getName()), type));
        }
        return settings;
    }

    boolean mayBeAbsent() {
        return isOptional() || component.getAnnotatedType().isAnnotationPresent(Nullable.class);
    }

    boolean isOptional() {
        return component.getType() == Optional.class;
    }

    @Nullable
    String defaultText() {
        Default annotation = component.getAnnotation(Default.class);
        return annotation == null ? null : annotation.value();
    }
}
