package org.raysheaf.geometry.response;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

/**
 * Groups crystals that see the same surroundings, so that each group needs one table. Two blocks are alike when every other block, and the axis
 * and centre of the field of view, lie in the same place seen from them, possibly after mirroring their u or v axis. Within a block that is its
 * own mirror image, crystals are grouped with their mirror images.
 *
 * <p>Places are compared after rounding to a nanometre; a pair of blocks that rounding tears apart costs a second table, never a wrong answer.
 */
final class ElementClasses {
    private static final double GRAIN = 1e6;

    private final int[] classOf;
    private final byte[] flips;
    private final List<Integer> representatives = new ArrayList<>();
    private final List<Integer> representativeFlips = new ArrayList<>();

    ElementClasses(DetectorSystem system) {
        classOf = new int[system.elements()];
        flips = new byte[system.elements()];
        Map<String, BlockClass> blockClasses = new HashMap<>();
        for (PlacedBlock block : system.blocks()) {
            String[] views = views(system, block);
            int best = 0;
            for (int flip = 1; flip < 4; flip++) {
                best = views[flip].compareTo(views[best]) < 0 ? flip : best;
            }
            BlockClass alike = blockClasses.computeIfAbsent(views[best], key -> new BlockClass(block));
            assign(block, alike, best, views);
        }
    }

    /** Tables of one class of blocks: crystal number after mirroring to the class number. */
    private static final class BlockClass {
        final CrystalBlock kind;
        final Map<Integer, Integer> tables = new HashMap<>();

        BlockClass(PlacedBlock block) {
            kind = block.kind().lattice();
        }
    }

    private void assign(PlacedBlock block, BlockClass alike, int toCanonical, String[] views) {
        for (int crystal = 0; crystal < alike.kind.elements(); crystal++) {
            // Any mirror image that leads to the canonical view will do; take the one with the lowest crystal number.
            int lowest = Integer.MAX_VALUE;
            int with = 0;
            for (int flip = 0; flip < 4; flip++) {
                int image = mirror(alike.kind, crystal, flip);
                if (views[flip].equals(views[toCanonical]) && image < lowest) {
                    lowest = image;
                    with = flip;
                }
            }
            int element = block.firstElement() + crystal;
            Integer known = alike.tables.get(lowest);
            if (known == null) {
                known = representatives.size();
                alike.tables.put(lowest, known);
                representatives.add(element);
                representativeFlips.add(with);
            }
            classOf[element] = known;
            flips[element] = (byte) (with ^ representativeFlips.get(known));
        }
    }

    private static int mirror(CrystalBlock kind, int crystal, int flip) {
        int column = kind.column(crystal);
        int row = kind.row(crystal);
        return kind.crystal(
                (flip & 1) != 0 ? kind.columns() - 1 - column : column,
                (flip & 2) != 0 ? kind.rows() - 1 - row : row,
                kind.layer(crystal));
    }

    /** What a block sees, by how its frame is mirrored, see {@link #view}. */
    static String[] views(DetectorSystem system, PlacedBlock block) {
        String[] views = new String[4];
        for (int flip = 0; flip < 4; flip++) {
            views[flip] = view(system, block, flip);
        }
        return views;
    }

    /** How one block sees another, from its own frame with u (bit 0) or v (bit 1) mirrored. */
    static String token(PlacedBlock from, PlacedBlock other, int flip) {
        Pose toLocal = from.pose().inverse();
        return other.kind()
                + place(toLocal.apply(other.pose().origin()), flip)
                + axis(toLocal.turn(other.pose().u()), flip)
                + axis(toLocal.turn(other.pose().v()), flip)
                + place(toLocal.turn(other.pose().w()), flip);
    }

    /** Everything that a block sees, from its own frame with u (bit 0) or v (bit 1) mirrored, in an order that does not depend on numbering. */
    private static String view(DetectorSystem system, PlacedBlock block, int flip) {
        Pose toLocal = block.pose().inverse();
        List<String> seen = new ArrayList<>();
        for (PlacedBlock other : system.blocks()) {
            seen.add(other.index() == block.index() ? "self " + block.kind() : token(block, other, flip));
        }
        String[] tokens = seen.toArray(new String[0]);
        Arrays.sort(tokens);
        String field = place(toLocal.apply(Vector3.ZERO), flip) + axis(toLocal.turn(Vector3.Z), flip);
        return field + String.join("|", tokens);
    }

    private static String place(Vector3 p, int flip) {
        return "(" + rounded((flip & 1) != 0 ? -p.x() : p.x()) + "," + rounded((flip & 2) != 0 ? -p.y() : p.y()) + ","
                + rounded(p.z()) + ")";
    }

    /** An axis of a lattice, which is the same lattice seen from its other end: the sign is taken out. */
    private static String axis(Vector3 a, int flip) {
        String one = place(a, flip);
        String other = place(a.times(-1), flip);
        return one.compareTo(other) < 0 ? one : other;
    }

    private static long rounded(double value) {
        return Math.round(value * GRAIN);
    }

    int classes() {
        return representatives.size();
    }

    /** The element whose table stands for a class. */
    int representative(int classNumber) {
        return representatives.get(classNumber);
    }

    int classOf(int element) {
        return classOf[element];
    }

    /** Whether u must be mirrored to go from an element to the representative of its class. */
    boolean flipsU(int element) {
        return (flips[element] & 1) != 0;
    }

    /** Whether v must be mirrored to go from an element to the representative of its class. */
    boolean flipsV(int element) {
        return (flips[element] & 2) != 0;
    }
}
