package org.raysheaf.io.description;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** The records that a sealed interface permits, by the name that the key {@code kind} gives them in files. */
final class Choices {
    /** The key that chooses. */
    static final String KEY = "kind";

    private Choices() {}

    /** The permitted records in the order of the permits clause; the rule of the names is in the package comment. */
    static Map<String, Class<?>> of(Class<?> sealed) {
        List<Class<?>> records = new ArrayList<>();
        collect(sealed, records);
        int shared = sharedWords(sealed, records);
        Map<String, Class<?>> choices = new LinkedHashMap<>();
        for (Class<?> record : records) {
            List<String> words = KeyName.words(record.getSimpleName());
            choices.put(String.join("_", words.subList(0, words.size() - shared)), record);
        }
        return choices;
    }

    /** The name of one of the permitted records. */
    static String nameOf(Class<?> record, Class<?> sealed) {
        return of(sealed).entrySet().stream()
                .filter(choice -> choice.getValue() == record)
                .map(Map.Entry::getKey)
                .findFirst()
                .orElseThrow(() -> new IllegalArgumentException(record + " is no choice of " + sealed));
    }

    private static void collect(Class<?> sealed, List<Class<?>> records) {
        for (Class<?> permitted : sealed.getPermittedSubclasses()) {
            if (permitted.isRecord()) {
                records.add(permitted);
            } else if (permitted.isInterface() && permitted.isSealed()) {
                collect(permitted, records);
            } else {
                throw new IllegalArgumentException("a description cannot choose " + permitted + ": it is no record");
            }
        }
    }

    private static int sharedWords(Class<?> sealed, List<Class<?>> records) {
        List<String> model = KeyName.words(sealed.getSimpleName());
        int shared = model.size();
        for (Class<?> record : records) {
            List<String> words = KeyName.words(record.getSimpleName());
            // At least one word of each record must be left.
            shared = Math.min(shared, words.size() - 1);
            int same = 0;
            while (same < shared && words.get(words.size() - 1 - same).equals(model.get(model.size() - 1 - same))) {
                same++;
            }
            shared = same;
        }
        return shared;
    }
}
