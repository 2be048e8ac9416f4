package org.raysheaf.io.description;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.jspecify.annotations.Nullable;

/**
 * Spells Java names as keys of files: words joined by underscores, units as physicists write them. {@code energyKeV} becomes {@code
 * energy_keV}, {@code concentrationKBqPerMl} becomes {@code concentration_kBq_per_mL}, {@code spacingXMm} becomes {@code spacing_x_mm}.
 */
public final class KeyName {
    /** Units whose spelling is not plain lower case. */
    private static final Map<String, String> UNITS = Map.ofEntries(
            Map.entry("Bq", "Bq"),
            Map.entry("KBq", "kBq"),
            Map.entry("MBq", "MBq"),
            Map.entry("GBq", "GBq"),
            Map.entry("EV", "eV"),
            Map.entry("KeV", "keV"),
            Map.entry("MeV", "MeV"),
            Map.entry("Ml", "mL"),
            Map.entry("Hz", "Hz"),
            Map.entry("KHz", "kHz"),
            Map.entry("MHz", "MHz"));

    /** A unit, a single capital (an axis, an element), or an ordinary word. */
    private static final Pattern WORD =
            Pattern.compile("(?:[KMG]?Bq|[KM]eV|EV|Ml|[KM]?Hz)(?![a-z])|[A-Z](?![a-z])|[A-Z]?[a-z0-9]+");

    private KeyName() {}

    /**
     * The key for a name.
     *
     * @param javaName the name of a record component in camel case, or the simple name of a class
     * @return the key
     */
    public static String of(String javaName) {
        return String.join("_", words(javaName));
    }

    /**
     * The name by which descriptions choose a record, as the value of the key {@code kind}.
     *
     * @param record the class of a record
     * @return the name, or null if the record implements no sealed interface and so is no choice
     */
    public static @Nullable String ofChoice(Class<?> record) {
        return Arrays.stream(record.getInterfaces())
                .filter(Class::isSealed)
                .findFirst()
                .map(choice -> Choices.nameOf(record, choice))
                .orElse(null);
    }

    static List<String> words(String javaName) {
        List<String> words = new ArrayList<>();
        for (Matcher word = WORD.matcher(javaName); word.find(); ) {
            String spelled = word.group();
            words.add(UNITS.getOrDefault(spelled, spelled.toLowerCase(Locale.ROOT)));
        }
        return words;
    }
}
