package org.raysheaf.geometry.response;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;

/**
 * Pairs of blocks that stand to each other alike, mirror images included, and where an element lies in its block as seen from the partner. Two
 * pairs are of a kind if from each of their blocks the partner, and all other blocks, are seen in the same places. Each block of a pair is
 * one of its two <em>ends</em>; ends are of a kind if block and partner are. Within an end columns and rows are counted from the same side in
 * all pairs of the kind, and where the view is its own mirror image, from either side to the middle. Immutable.
 */
public final class BlockPairKinds {
    private final DetectorSystem system;
    private final int blocks;
    private final int[] kinds;
    private final int[] ends;
    private final byte[] flips;
    private final byte[] folds;
    private final int[] blockKinds;
    private final byte[] blockFlips;
    private final byte[] blockFolds;
    private final List<int[]> endsOfKind = new ArrayList<>();
    private final List<Integer> blockKindOfEnd = new ArrayList<>();
    private final int columns;
    private final int rows;

    /**
     * Sorts the pairs of blocks of a system.
     *
     * @param system the system
     */
    public BlockPairKinds(DetectorSystem system) {
        this.system = system;
        blocks = system.blocks().size();
        kinds = new int[blocks * blocks];
        ends = new int[blocks * blocks];
        flips = new byte[blocks * blocks];
        folds = new byte[blocks * blocks];
        blockKinds = new int[blocks];
        blockFlips = new byte[blocks];
        blockFolds = new byte[blocks];
        int mostColumns = 1;
        int mostRows = 1;
        String[][] views = new String[blocks][];
        Map<String, Integer> numbers = new HashMap<>();
        for (PlacedBlock block : system.blocks()) {
            CrystalBlock lattice = block.kind().lattice();
            mostColumns = Math.max(mostColumns, lattice.columns());
            mostRows = Math.max(mostRows, lattice.rows());
            String[] seen = ElementClasses.views(system, block);
            int best = lowest(seen);
            blockKinds[block.index()] = numbers.computeIfAbsent(seen[best], key -> numbers.size());
            blockFlips[block.index()] = (byte) best;
            blockFolds[block.index()] = folds(seen, best);
            views[block.index()] = seen;
        }
        columns = mostColumns;
        rows = mostRows;
        Map<String, Integer> endNumbers = new HashMap<>();
        Map<List<Integer>, Integer> kindNumbers = new HashMap<>();
        Arrays.fill(kinds, -1);
        Arrays.fill(ends, -1);
        for (PlacedBlock a : system.blocks()) {
            for (PlacedBlock b : system.blocks().subList(0, a.index())) {
                if (system.pairs().admits(a, b)) {
                    int one = end(a, b, views[a.index()], endNumbers);
                    int other = end(b, a, views[b.index()], endNumbers);
                    List<Integer> key = List.of(Math.min(one, other), Math.max(one, other));
                    Integer kind = kindNumbers.get(key);
                    if (kind == null) {
                        kind = endsOfKind.size();
                        kindNumbers.put(key, kind);
                        endsOfKind.add(new int[] {key.get(0), key.get(1)});
                    }
                    kinds[a.index() * blocks + b.index()] = kind;
                    kinds[b.index() * blocks + a.index()] = kind;
                }
            }
        }
    }

    private int end(PlacedBlock block, PlacedBlock partner, String[] views, Map<String, Integer> numbers) {
        String[] seen = new String[4];
        for (int flip = 0; flip < 4; flip++) {
            seen[flip] = views[flip] + "|partner " + ElementClasses.token(block, partner, flip);
        }
        int best = lowest(seen);
        int at = block.index() * blocks + partner.index();
        flips[at] = (byte) best;
        folds[at] = folds(seen, best);
        Integer number = numbers.get(seen[best]);
        if (number == null) {
            number = blockKindOfEnd.size();
            numbers.put(seen[best], number);
            blockKindOfEnd.add(blockKinds[block.index()]);
        }
        ends[at] = number;
        return number;
    }

    private static int lowest(String[] views) {
        int best = 0;
        for (int flip = 1; flip < 4; flip++) {
            best = views[flip].compareTo(views[best]) < 0 ? flip : best;
        }
        return best;
    }

    /** Which axes may be mirrored without a difference. */
    private static byte folds(String[] views, int best) {
        return (byte) ((views[best ^ 1].equals(views[best]) ? 1 : 0) | (views[best ^ 2].equals(views[best]) ? 2 : 0));
    }

    /**
     * The system.
     *
     * @return the system whose blocks these are
     */
    public DetectorSystem system() {
        return system;
    }

    /**
     * How many kinds of pairs there are.
     *
     * @return the number
     */
    public int kinds() {
        return endsOfKind.size();
    }

    /**
     * How many kinds of ends there are.
     *
     * @return the number
     */
    public int ends() {
        return blockKindOfEnd.size();
    }

    /**
     * How many kinds of blocks there are: those that see the same surroundings.
     *
     * @return the number
     */
    public int blockKinds() {
        return 1 + Arrays.stream(blockKinds).max().orElse(-1);
    }

    /**
     * Room for all columns of any block.
     *
     * @return the largest number of columns
     */
    public int columns() {
        return columns;
    }

    /**
     * Room for all rows of any block.
     *
     * @return the largest number of rows
     */
    public int rows() {
        return rows;
    }

    /**
     * The kind of a pair of blocks.
     *
     * @param a index of one block
     * @param b index of the other
     * @return its number, or −1 if the system does not admit the pair
     */
    public int kindOf(int a, int b) {
        return kinds[a * blocks + b];
    }

    /**
     * The ends of a kind of pairs.
     *
     * @param kind its number
     * @return the numbers of two kinds of ends, the lower first; a copy
     */
    public int[] endsOf(int kind) {
        return endsOfKind.get(kind).clone();
    }

    /**
     * The kind of an end of a pair of blocks.
     *
     * @param block index of the block
     * @param partner index of the other
     * @return its number, or −1 if the system does not admit the pair
     */
    public int endOf(int block, int partner) {
        return ends[block * blocks + partner];
    }

    /**
     * The kind of a block.
     *
     * @param block its index
     * @return its number
     */
    public int blockKindOf(int block) {
        return blockKinds[block];
    }

    /**
     * The kind of the block at an end.
     *
     * @param end number of the end
     * @return number of the kind of block
     */
    public int blockKindOfEnd(int end) {
        return blockKindOfEnd.get(end);
    }

    /**
     * The column of an element as seen from a partner.
     *
     * @param element the element
     * @param partner index of the partner's block, which the system admits
     * @return its number, from 0
     */
    public int column(int element, int partner) {
        int at = system.blockIndexOf(element) * blocks + partner;
        return column(element, flips[at], folds[at]);
    }

    /**
     * The row of an element as seen from a partner.
     *
     * @param element the element
     * @param partner index of the partner's block, which the system admits
     * @return its number, from 0
     */
    public int row(int element, int partner) {
        int at = system.blockIndexOf(element) * blocks + partner;
        return row(element, flips[at], folds[at]);
    }

    /**
     * The column of an element as all blocks of its kind count it, whoever the partner.
     *
     * @param element the element
     * @return its number, from 0
     */
    public int column(int element) {
        int block = system.blockIndexOf(element);
        return column(element, blockFlips[block], blockFolds[block]);
    }

    /**
     * The row of an element as all blocks of its kind count it, whoever the partner.
     *
     * @param element the element
     * @return its number, from 0
     */
    public int row(int element) {
        int block = system.blockIndexOf(element);
        return row(element, blockFlips[block], blockFolds[block]);
    }

    private int column(int element, byte flip, byte fold) {
        PlacedBlock block = system.blockOf(element);
        CrystalBlock lattice = block.kind().lattice();
        int column = lattice.column(element - block.firstElement());
        int mirrored = lattice.columns() - 1 - column;
        return (fold & 1) != 0 ? Math.min(column, mirrored) : (flip & 1) != 0 ? mirrored : column;
    }

    private int row(int element, byte flip, byte fold) {
        PlacedBlock block = system.blockOf(element);
        CrystalBlock lattice = block.kind().lattice();
        int row = lattice.row(element - block.firstElement());
        int mirrored = lattice.rows() - 1 - row;
        return (fold & 2) != 0 ? Math.min(row, mirrored) : (flip & 2) != 0 ? mirrored : row;
    }
}
