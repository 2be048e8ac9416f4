package org.raysheaf.geometry.matter;

import java.util.ArrayList;
import java.util.Collections;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Set;
import org.raysheaf.geometry.settings.Nearest;

/** The library of materials: composition, density and the source of both; the resource {@code materials.csv} lists them. Immutable. */
public final class Materials {
    private static final String RESOURCE = "materials.csv";
    private static final Map<String, Entry> LIBRARY = read();

    private Materials() {}

    /**
     * A material of the library.
     *
     * @param density density (g/cm³)
     * @param composition mass fractions of the elements, adding up to 1; empty for a vacuum
     * @param source where the figures come from
     */
    public record Entry(double density, Map<String, Double> composition, String source) {}

    /**
     * Names of all materials of the library.
     *
     * @return an unmodifiable set, in the order of the resource
     */
    public static Set<String> names() {
        return LIBRARY.keySet();
    }

    /**
     * Looks up a material.
     *
     * @param name its name
     * @return the material, or empty if the library has none of that name
     */
    public static Optional<Entry> find(String name) {
        return Optional.ofNullable(LIBRARY.get(name));
    }

    /**
     * The material that a name stands for: one of the description's own, else one of the library.
     *
     * @param name the name
     * @param own the description's own materials
     * @return the material, or empty if there is none of that name
     */
    public static Optional<Material> resolve(String name, List<Material> own) {
        Optional<Material> mine =
                own.stream().filter(material -> material.name().equals(name)).findFirst();
        return mine.isPresent() || find(name).isEmpty() ? mine : Optional.of(Material.named(name));
    }

    /**
     * What to tell someone whose material is not known.
     *
     * @param name the name that was not found
     * @param own the description's own materials
     * @return expected and found, and what the name may have been meant to be, in words
     */
    public static String unknown(String name, List<Material> own) {
        StringBuilder text = new StringBuilder("expected a material of the library (")
                .append(String.join(", ", names()))
                .append(')');
        List<String> known = new ArrayList<>(own.stream().map(Material::name).toList());
        if (!own.isEmpty()) {
            text.append(" or one of the materials here (")
                    .append(String.join(", ", known))
                    .append(')');
        }
        known.addAll(names());
        return text.append(", found ")
                .append(name)
                .append("; the nearest is ")
                .append(Nearest.to(name, known))
                .toString();
    }

    private static Map<String, Entry> read() {
        Map<String, Entry> library = new LinkedHashMap<>();
        for (List<String> row : Table.rows(Materials.class, RESOURCE, 4)) {
            String what = row.get(2);
            Map<String, Double> composition;
            if (what.isEmpty()) {
                composition = Map.of();
            } else if (what.contains(":")) {
                Map<String, Double> fractions = new HashMap<>();
                for (List<String> pair : Table.pairs(what)) {
                    fractions.put(pair.get(0), Double.parseDouble(pair.get(1)));
                }
                composition = Composition.ofFractions(fractions);
            } else {
                composition = Composition.ofFormula(what);
            }
            library.put(row.get(0), new Entry(Double.parseDouble(row.get(1)), composition, row.get(3)));
        }
        return Collections.unmodifiableMap(library);
    }
}
