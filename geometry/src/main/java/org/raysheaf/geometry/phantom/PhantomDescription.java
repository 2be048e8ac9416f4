package org.raysheaf.geometry.phantom;

import java.util.HashSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.matter.Material;
import org.raysheaf.geometry.matter.Materials;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * A phantom as a description file ({@code raysheaf: phantom/1}) gives it.
 *
 * @param name how people call the phantom
 * @param materials materials of its own, beside those of the library
 * @param volume what is given voxel by voxel, if anything is
 * @param parts its solids, no two of the same name; a later one replaces earlier ones and the volume wherever they overlap
 * @param sources points, lines and surfaces with activity; they replace nothing
 */
public record PhantomDescription(
        String name,
        @Default("[]") List<Material> materials,
        @Nullable LabelledVolume volume,
        @Default("[]") List<PhantomPart> parts,
        @Default("[]") List<Source> sources) {
    public PhantomDescription {
        materials = List.copyOf(materials);
        parts = List.copyOf(parts);
        sources = List.copyOf(sources);
        Problems problems = new Problems("phantom " + name)
                .rule(!name.isBlank(), "name", "expected a name, found an empty text")
                .rule(
                        !parts.isEmpty() || !sources.isEmpty() || volume != null,
                        "parts",
                        "expected at least one part, source or volume, found none");
        Set<String> names = new HashSet<>();
        for (int i = 0; i < materials.size(); i++) {
            String material = materials.get(i).name();
            problems.rule(
                    names.add(material),
                    "materials[" + i + "].name",
                    "expected a new name, found " + material + " a second time");
        }
        names.clear();
        for (int i = 0; i < parts.size(); i++) {
            String part = parts.get(i).name();
            problems.rule(
                    names.add(part), "parts[" + i + "].name", "expected a new name, found " + part + " a second time");
            known(problems, "parts[" + i + "].material", parts.get(i).material(), materials);
        }
        if (volume != null) {
            for (int i = 0; i < volume.labels().size(); i++) {
                known(
                        problems,
                        "volume.labels[" + i + "].material",
                        volume.labels().get(i).material(),
                        materials);
            }
        }
        problems.orThrow();
    }

    private static void known(Problems problems, String field, String material, List<Material> own) {
        problems.rule(Materials.resolve(material, own).isPresent(), field, Materials.unknown(material, own));
    }

    /**
     * A phantom of solids only, of materials of the library.
     *
     * @param name how people call the phantom
     * @param parts its solids
     */
    public PhantomDescription(String name, List<PhantomPart> parts) {
        this(name, List.of(), null, parts, List.of());
    }
}
