package org.raysheaf.io.description;

import java.lang.reflect.Constructor;
import java.lang.reflect.InvocationTargetException;
import java.lang.reflect.RecordComponent;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import java.util.Optional;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.InvalidSettingsException;
import org.raysheaf.geometry.settings.Nearest;
import org.raysheaf.geometry.settings.Problems;
import org.yaml.snakeyaml.nodes.MappingNode;
import org.yaml.snakeyaml.nodes.Node;

/** Turns a YAML mapping into a record: unknown, doubled and missing keys, defaults, and the record's own rules. */
final class RecordBinder {
    /** Stands for a value that may be absent and is. */
    private static final Object ABSENT = new Object();

    private final Binder values;

    RecordBinder(Binder values) {
        this.values = values;
    }

    /** The record of a whole description, beside the key of its first line. */
    @Nullable
    Object bindRoot(Class<?> type, MappingNode root) {
        return bind(type, new Entries(root, Place.root(root), values.findings()), Set.of(FirstLine.KEY));
    }

    @Nullable
    Object bind(Class<?> type, Node node, Place place) {
        if (!(node instanceof MappingNode mapping)) {
            return values.mismatch(Expected.of(type), node, place);
        }
        return bind(type, new Entries(mapping, place, values.findings()), Set.of());
    }

    /** The record that the key {@code kind} chooses. */
    @Nullable
    Object bindChoice(Class<?> sealed, Node node, Place place) {
        Map<String, Class<?>> choices = Choices.of(sealed);
        if (!(node instanceof MappingNode mapping)) {
            return values.mismatch(Expected.of(sealed), node, place);
        }
        Entries entries = new Entries(mapping, place, values.findings());
        Node kind = entries.value(Choices.KEY);
        if (kind == null) {
            String names = String.join(", ", choices.keySet());
            return values.report(
                    entries.placeOf(Choices.KEY), "expected one of " + names + ", found no such key; add it");
        }
        Class<?> choice = values.pick(choices, kind, entries.placeOf(Choices.KEY));
        return choice == null ? null : bind(choice, entries, Set.of(Choices.KEY));
    }

    private @Nullable Object bind(Class<?> type, Entries entries, Set<String> beside) {
        List<Setting> settings = Setting.of(type);
        reportUnknown(type, settings, entries, beside);
        List<@Nullable Object> arguments = new ArrayList<>();
        boolean complete = true;
        for (Setting setting : settings) {
            Object argument = argument(setting, entries);
            complete &= argument != null;
            arguments.add(argument == ABSENT ? null : argument);
        }
        return complete ? construct(type, arguments.toArray(), entries) : null;
    }

    private void reportUnknown(Class<?> type, List<Setting> settings, Entries entries, Set<String> beside) {
        List<String> known = settings.stream().map(Setting::key).toList();
        for (String key : entries.values().keySet()) {
            if (known.contains(key) || beside.contains(key)) {
                continue;
            }
            // A key that is already there was hardly meant a second time.
            List<String> open =
                    known.stream().filter(k -> entries.value(k) == null).toList();
            String nearest =
                    known.isEmpty() ? "" : "; the nearest is " + Nearest.to(key, open.isEmpty() ? known : open);
            values.report(
                    entries.placeOf(key),
                    "expected one of " + keys(type, beside) + ", found the key " + Found.excerpt(key) + nearest);
        }
    }

    /** The value for a component; {@link #ABSENT} if there rightly is none; null if a problem was reported. */
    private @Nullable Object argument(Setting setting, Entries entries) {
        Node node = entries.value(setting.key());
        String standard = setting.defaultText();
        boolean absent = node == null || (Found.isNothing(node) && setting.mayBeAbsent());
        if (absent && standard != null) {
            return wrap(setting, defaultOf(setting, standard));
        }
        if (absent && setting.mayBeAbsent()) {
            return setting.isOptional() ? Optional.empty() : ABSENT;
        }
        if (node == null) {
            return values.report(
                    entries.placeOf(setting.key()),
                    "expected " + Expected.of(setting.type()) + ", found no such key; add it");
        }
        Object value = values.bind(setting.type(), node, entries.placeOf(setting.key()));
        return value == null ? null : wrap(setting, value);
    }

    private static Object wrap(Setting setting, Object value) {
        return setting.isOptional() ? Optional.of(value) : value;
    }

    private static Object defaultOf(Setting setting, String text) {
        String source = "default of " + setting.component().getDeclaringRecord().getSimpleName() + "." + setting.key();
        Findings findings = new Findings(source);
        try {
            Node node = YamlTree.value(text, source);
            Object value = new Binder(findings).bind(setting.type(), node, new Place("", 0));
            findings.orThrow();
            return Objects.requireNonNull(value);
        } catch (DescriptionException e) {
            throw new IllegalStateException(e.getMessage(), e); // a mistake in the record, not in the file
        }
    }

    private @Nullable Object construct(Class<?> type, @Nullable Object[] arguments, Entries entries) {
        Class<?>[] types = Arrays.stream(type.getRecordComponents())
                .map(RecordComponent::getType)
                .toArray(Class<?>[]::new);
        try {
            Constructor<?> constructor = type.getDeclaredConstructor(types);
            constructor.setAccessible(true);
            return constructor.newInstance(arguments);
        } catch (InvocationTargetException e) {
            if (e.getCause() instanceof InvalidSettingsException invalid) {
                for (Problems.Problem problem : invalid.problems()) {
                    values.report(FieldPath.place(entries, problem.field()), problem.message());
                }
                return null;
            }
            if (e.getCause() instanceof IllegalArgumentException invalid) {
                return values.report(entries.place(), String.valueOf(invalid.getMessage()));
            }
            throw new IllegalStateException("the constructor of " + type.getName() + " failed", e.getCause());
        } catch (ReflectiveOperationException e) {
            throw new IllegalStateException("cannot construct " + type.getName(), e);
        }
    }

    private static String keys(Class<?> type, Set<String> beside) {
        List<String> keys = new ArrayList<>(beside);
        keys.remove(FirstLine.KEY);
        Setting.of(type).forEach(setting -> keys.add(setting.key()));
        return String.join(", ", keys);
    }
}
