package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.util.Arrays;

/**
 * Remembers where the chunks of a column went and writes that down as a version-1 B-tree. A node holds up to 64 children between keys:
 *
 * <pre>
 * offset  bytes
 *      0      4  "TREE"
 *      4      1  node type, 1: chunks
 *      5      1  level, 0: children are chunks
 *      6      2  number of children
 *      8    8+8  addresses of the left and right neighbour
 *     24     24  key 0:   4 stored size, 4 filters left out, 8 first index, 8 zero
 *     48      8  child 0: address
 *     56      …  key 1, child 1, …, and one key more than children
 * </pre>
 *
 * <p>In memory a chunk costs 12 bytes.
 */
final class ChunkIndex {
    private static final int CHILDREN = 64;
    private static final int KEY_BYTES = 24;
    private static final int NODE_BYTES = 24 + CHILDREN * 8 + (CHILDREN + 1) * KEY_BYTES;

    private long[] addresses = new long[16];
    private int[] sizes = new int[16];
    private int chunks;

    /**
     * Adds the next chunk.
     *
     * @param address where it starts
     * @param size bytes as stored
     */
    void add(long address, int size) {
        if (chunks == addresses.length) {
            addresses = Arrays.copyOf(addresses, 2 * chunks);
            sizes = Arrays.copyOf(sizes, 2 * chunks);
        }
        addresses[chunks] = address;
        sizes[chunks++] = size;
    }

    /**
     * The number of chunks added.
     *
     * @return the count
     */
    int chunks() {
        return chunks;
    }

    /**
     * Appends the tree, level by level from its leaves.
     *
     * @param file where to
     * @param chunkLength values in a chunk
     * @return the address of the root, undefined without chunks
     * @throws IOException if the disk does not take it
     */
    long append(PendingFile file, int chunkLength) throws IOException {
        if (chunks == 0) {
            return Messages.UNDEFINED;
        }
        long[] children = Arrays.copyOf(addresses, chunks);
        long chunksPerChild = 1;
        int level = 0;
        do {
            children = appendLevel(file, children, chunksPerChild, level, chunkLength);
            chunksPerChild *= CHILDREN;
            level++;
        } while (children.length > 1);
        return children[0];
    }

    private long[] appendLevel(PendingFile file, long[] children, long chunksPerChild, int level, int chunkLength)
            throws IOException {
        int nodes = (children.length + CHILDREN - 1) / CHILDREN;
        long first = file.end();
        long[] starts = new long[nodes];
        for (int node = 0; node < nodes; node++) {
            int from = node * CHILDREN;
            int to = Math.min(children.length, from + CHILDREN);
            starts[node] = first + (long) node * NODE_BYTES;
            ByteBuffer bytes = Messages.buffer(NODE_BYTES);
            bytes.put(new byte[] {'T', 'R', 'E', 'E', 1, (byte) level}).putShort((short) (to - from));
            bytes.putLong(node == 0 ? Messages.UNDEFINED : starts[node] - NODE_BYTES);
            bytes.putLong(node == nodes - 1 ? Messages.UNDEFINED : starts[node] + NODE_BYTES);
            for (int child = from; child < to; child++) {
                putKey(bytes, child * chunksPerChild, chunkLength);
                bytes.putLong(children[child]);
            }
            putKey(bytes, to * chunksPerChild, chunkLength);
            file.append(bytes.rewind());
        }
        return starts;
    }

    private void putKey(ByteBuffer bytes, long chunk, int chunkLength) {
        long counted = Math.min(chunk, chunks);
        bytes.putInt(counted < chunks ? sizes[(int) counted] : 0);
        bytes.putInt(0);
        bytes.putLong(counted * chunkLength);
        bytes.putLong(0);
    }
}
