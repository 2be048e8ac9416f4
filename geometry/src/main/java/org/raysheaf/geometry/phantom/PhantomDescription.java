package org.raysheaf.geometry.phantom;

import java.util.HashSet;
import java.util.List;
import java.util.Set;
import org.raysheaf.geometry.settings.Problems;

/**
 * A phantom as a description file ({@code raysheaf: phantom/1}) gives it.
 *
 * @param name how people call the phantom
 * @param parts its parts, at least one, no two of the same name; a later part replaces earlier ones wherever they
 *     overlap
 */
public record PhantomDescription(String name, List<PhantomPart> parts) {
    public PhantomDescription {
        parts = List.copyOf(parts);
        Problems problems = new Problems("phantom " + name)
                .rule(!name.isBlank(), "name", "expected a name, found an empty text")
                .rule(!parts.isEmpty(), "parts", "expected at least one part, found none");
        Set<String> names = new HashSet<>();
        for (int i = 0; i < parts.size(); i++) {
            String part = parts.get(i).name();
            problems.rule(
                    names.add(part), "parts[" + i + "].name", "expected a new name, found " + part + " a second time");
        }
        problems.orThrow();
    }
}
