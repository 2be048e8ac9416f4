package org.raysheaf.geometry.detector;

import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import org.raysheaf.geometry.matter.Material;
import org.raysheaf.geometry.matter.Materials;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * A detector system as a description file ({@code raysheaf: system/1}) gives it. A description that could be made is sound: every name
 * resolves, no two blocks overlap, and every block looks at the field of view without reaching into it.
 *
 * @param name how people call the system
 * @param fieldOfView where activity is looked for
 * @param pairs which blocks may form a coincident pair
 * @param materials materials of its own, beside those of the library
 * @param blocks the kinds of block that placements refer to
 * @param placements where blocks stand; blocks are numbered in this order
 * @param shields matter that detects nothing
 */
public record SystemDescription(
        String name,
        FieldOfView fieldOfView,
        @Default("{}") PairRule pairs,
        @Default("[]") List<Material> materials,
        List<BlockKind> blocks,
        List<Placement> placements,
        @Default("[]") List<Shield> shields) {
    /** Most elements in one system; beyond it a count was surely mistaken. */
    private static final long MOST_ELEMENTS = 1 << 24;

    public SystemDescription {
        materials = List.copyOf(materials);
        blocks = List.copyOf(blocks);
        placements = List.copyOf(placements);
        shields = List.copyOf(shields);
        Problems problems = new Problems("system " + name);
        checkNames(problems, materials, blocks, placements);
        for (int i = 0; i < shields.size(); i++) {
            String material = shields.get(i).material();
            problems.rule(
                    Materials.resolve(material, materials).isPresent(),
                    "shields[" + i + "].material",
                    Materials.unknown(material, materials));
        }
        if (problems.found().isEmpty()) {
            problems.rule(
                    elements(blocks, placements) <= MOST_ELEMENTS,
                    "placements",
                    "expected at most " + MOST_ELEMENTS + " elements, found " + elements(blocks, placements));
        }
        if (problems.found().isEmpty()) {
            LayoutCheck.check(problems, fieldOfView, pairs, place(materials, blocks, placements));
        }
        problems.orThrow();
    }

    /**
     * A system without shields.
     *
     * @param name how people call the system
     * @param fieldOfView where activity is looked for
     * @param pairs which blocks may form a coincident pair
     * @param materials materials of its own
     * @param blocks the kinds of block
     * @param placements where blocks stand
     */
    public SystemDescription(
            String name,
            FieldOfView fieldOfView,
            PairRule pairs,
            List<Material> materials,
            List<BlockKind> blocks,
            List<Placement> placements) {
        this(name, fieldOfView, pairs, materials, blocks, placements, List.of());
    }

    /**
     * The material that a name stands for in this description.
     *
     * @param material the name of one of its own materials or of the library
     * @return the material
     */
    public Material materialNamed(String material) {
        return Materials.resolve(material, materials).orElseThrow();
    }

    private static void checkNames(
            Problems problems, List<Material> materials, List<BlockKind> blocks, List<Placement> placements) {
        Map<String, Integer> materialNames = new HashMap<>();
        Map<String, Integer> blockNames = new HashMap<>();
        for (int i = 0; i < materials.size(); i++) {
            String field = "materials[" + i + "].name";
            unique(problems, materialNames, field, materials.get(i).name(), i);
        }
        for (int i = 0; i < blocks.size(); i++) {
            unique(problems, blockNames, "blocks[" + i + "].name", blocks.get(i).name(), i);
            String material = blocks.get(i).material();
            problems.rule(
                    Materials.resolve(material, materials).isPresent(),
                    "blocks[" + i + "].material",
                    Materials.unknown(material, materials));
        }
        for (int i = 0; i < placements.size(); i++) {
            String block = placements.get(i).block();
            problems.rule(
                    blockNames.containsKey(block),
                    "placements[" + i + "].block",
                    "expected one of " + blockNames.keySet() + ", found " + block);
        }
        problems.rule(!placements.isEmpty(), "placements", "expected at least one placement, found none");
    }

    private static void unique(Problems problems, Map<String, Integer> names, String field, String name, int index) {
        Integer before = names.putIfAbsent(name, index);
        problems.rule(before == null, field, "expected a new name, found " + name + " a second time");
    }

    private static long elements(List<BlockKind> blocks, List<Placement> placements) {
        long sum = 0;
        for (Placement placement : placements) {
            BlockKind kind = find(blocks, placement.block());
            sum += (long) kind.elements() * placement.sites(kind).size();
        }
        return sum;
    }

    private static BlockKind find(List<BlockKind> blocks, String name) {
        return blocks.stream().filter(b -> b.name().equals(name)).findFirst().orElseThrow();
    }

    private static List<PlacedBlock> place(
            List<Material> materials, List<BlockKind> blocks, List<Placement> placements) {
        List<PlacedBlock> placed = new ArrayList<>();
        int element = 0;
        for (int p = 0; p < placements.size(); p++) {
            BlockKind kind = find(blocks, placements.get(p).block());
            Material material = Materials.resolve(kind.material(), materials).orElseThrow();
            for (Placement.Site site : placements.get(p).sites(kind)) {
                placed.add(new PlacedBlock(
                        placed.size(), kind, material, site.pose(), element, p, site.station(), site.stations()));
                element += kind.elements();
            }
        }
        return List.copyOf(placed);
    }

    /**
     * All blocks at their places, in the order of their numbers.
     *
     * @return an unmodifiable list
     */
    List<PlacedBlock> place() {
        return place(materials, blocks, placements);
    }
}
