package org.raysheaf.geometry.phantom;

import java.util.HashSet;
import java.util.List;
import java.util.Set;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * Part of a phantom given voxel by voxel: a volume file of whole numbers, and a table of what each number stands for. Numbers that the
 * table does not name are nothing. Solids replace it wherever they overlap.
 *
 * @param file path of the volume, from the description's folder
 * @param labels what the numbers stand for, at least one
 */
public record LabelledVolume(String file, List<Label> labels) {
    public LabelledVolume {
        labels = List.copyOf(labels);
        Problems problems = new Problems("volume")
                .rule(!file.isBlank(), "file", "expected the path of a volume, found an empty text")
                .rule(!labels.isEmpty(), "labels", "expected at least one label, found none");
        Set<Integer> known = new HashSet<>();
        for (int i = 0; i < labels.size(); i++) {
            int label = labels.get(i).label();
            problems.rule(
                    known.add(label),
                    "labels[" + i + "].label",
                    "expected a new number, found " + label + " a second time");
        }
        problems.orThrow();
    }

    /**
     * What one number stands for.
     *
     * @param label the number in the volume, at least 0
     * @param name how reports call it
     * @param material name of what it is made of
     * @param concentrationKBqPerMl activity concentration at the start of the acquisition (kBq/mL), at least 0
     */
    public record Label(
            int label,
            String name,
            @Default("water") String material,
            @Default("0") double concentrationKBqPerMl) {
        public Label {
            new Problems("label " + name)
                    .within("label", label, 0, 65_535)
                    .rule(!name.isBlank(), "name", "expected a name, found an empty text")
                    .atLeast("concentration_kBq_per_mL", concentrationKBqPerMl, 0)
                    .orThrow();
        }
    }
}
