package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.util.ArrayDeque;
import java.util.Arrays;
import java.util.Deque;

/**
 * Visits the chunks of a dataset in order, through its version-1 B-tree ({@link ChunkIndex} draws it). It cannot run in a circle: levels
 * fall by one on every step down, no node below the root is empty, and offsets only grow. Not safe for use by several threads.
 */
final class ChunkWalk {
    private static final int CHUNKS = 1;
    private static final int HIGHEST_LEVEL = 16;

    private final FileBytes file;
    private final String place;
    private final int rank;
    private final Deque<Node> open = new ArrayDeque<>();
    private long[] offset;
    private long address;
    private long size;
    private long leftOut;
    private boolean started;

    /** A tree node that still has children to visit. */
    private static final class Node {
        final Fields entries;
        final int level;
        int left;

        Node(Fields entries, int level, int left) {
            this.entries = entries;
            this.level = level;
            this.left = left;
        }
    }

    ChunkWalk(FileBytes file, String place, long root, int rank) throws IOException {
        this.file = file;
        this.place = place;
        this.rank = rank;
        this.offset = new long[rank];
        if (root != Messages.UNDEFINED) {
            enter(root, -1);
        }
    }

    private void enter(long node, int expectedLevel) throws IOException {
        Fields head = file.read(node, 24, place);
        head.signature("TREE");
        int type = head.u8();
        int level = head.u8();
        int children = head.u16();
        boolean fits = expectedLevel < 0 ? level <= HIGHEST_LEVEL : level == expectedLevel && children > 0;
        if (type != CHUNKS || !fits) {
            throw head.damaged("expected an index of chunks, found type " + type + ", level " + level + ", " + children
                    + " children");
        }
        long entryBytes = 8 + 8L * (rank + 1) + 8;
        open.push(new Node(file.read(node + 24, children * entryBytes, place), level, children));
    }

    /**
     * Goes to the next chunk.
     *
     * @return false if there is none
     * @throws IOException if the index is damaged or cannot be read
     */
    boolean next() throws IOException {
        while (!open.isEmpty()) {
            Node node = open.element();
            if (node.left == 0) {
                open.pop();
                continue;
            }
            node.left--;
            long bytes = node.entries.u32();
            long mask = node.entries.u32();
            long[] first = new long[rank];
            for (int i = 0; i < rank; i++) {
                first[i] = node.entries.i64();
            }
            node.entries.skip(8);
            long child = node.entries.i64();
            if (node.level > 0) {
                enter(child, node.level - 1);
                continue;
            }
            requireOrder(first);
            offset = first;
            size = bytes;
            leftOut = mask;
            address = child;
            started = true;
            return true;
        }
        return false;
    }

    private void requireOrder(long[] first) throws Hdf5Exception {
        if (started && Arrays.compare(offset, first) >= 0) {
            throw file.damaged(
                    place,
                    "expected a chunk after index " + Arrays.toString(offset) + ", found one at "
                            + Arrays.toString(first));
        }
    }

    /** Index of the chunk's first value along every axis. */
    long[] offset() {
        return offset;
    }

    long address() {
        return address;
    }

    /** Size of the chunk as stored (bytes). */
    long size() {
        return size;
    }

    /** Bit i is set if filter i was left out. */
    long leftOut() {
        return leftOut;
    }
}
