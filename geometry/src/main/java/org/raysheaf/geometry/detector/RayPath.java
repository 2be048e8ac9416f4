package org.raysheaf.geometry.detector;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;

/**
 * What a ray meets: a growing list of segments, each inside one crystal. Made once and filled again and again by {@link
 * DetectorSystem#trace}. Distances are measured from the ray's origin. Not safe for use by several threads.
 */
public final class RayPath {
    private int size;
    private int[] element = new int[64];
    private double[] enter = new double[64];
    private double[] leave = new double[64];
    private double[] attenuationLength = new double[64];

    // Blocks that the ray crosses, nearest first; kept here so that tracing allocates nothing.
    private final List<double[]> directions = new ArrayList<>();
    private int blocks;
    private int[] block = new int[8];
    private double[] blockEnter = new double[8];

    /** Makes an empty path. */
    public RayPath() {}

    /**
     * Number of segments.
     *
     * @return the count
     */
    public int size() {
        return size;
    }

    /**
     * The crystal of a segment.
     *
     * @param i segment, nearest first
     * @return the element's number in the system
     */
    public int element(int i) {
        return element[i];
    }

    /**
     * Where the ray enters the crystal.
     *
     * @param i segment
     * @return distance from the ray's origin (mm), at least 0
     */
    public double enter(int i) {
        return enter[i];
    }

    /**
     * Where the ray leaves the crystal.
     *
     * @param i segment
     * @return distance from the ray's origin (mm), greater than {@link #enter}
     */
    public double leave(int i) {
        return leave[i];
    }

    /**
     * Mean free path in the crystal.
     *
     * @param i segment
     * @return the attenuation length (mm); 0 for a perfect absorber
     */
    public double attenuationLength(int i) {
        return attenuationLength[i];
    }

    void clear() {
        size = 0;
        blocks = 0;
    }

    void addSegment(int elementNumber, double in, double out, double attenuationLengthMm) {
        if (size == element.length) {
            element = Arrays.copyOf(element, 2 * size);
            enter = Arrays.copyOf(enter, 2 * size);
            leave = Arrays.copyOf(leave, 2 * size);
            attenuationLength = Arrays.copyOf(attenuationLength, 2 * size);
        }
        element[size] = elementNumber;
        enter[size] = in;
        leave[size] = out;
        attenuationLength[size++] = attenuationLengthMm;
    }

    /** Room for the ray's direction in the frame of a block, see {@link CrystalTracer#localDirection}. */
    double[] localDirection(int blockNumber) {
        while (blockNumber >= directions.size()) {
            directions.add(new double[6]);
        }
        return directions.get(blockNumber);
    }

    /** Keeps the crossed blocks ordered by entry; there are rarely more than a handful. */
    void addBlock(int number, double in) {
        if (blocks == block.length) {
            block = Arrays.copyOf(block, 2 * blocks);
            blockEnter = Arrays.copyOf(blockEnter, 2 * blocks);
        }
        int at = blocks++;
        while (at > 0 && blockEnter[at - 1] > in) {
            block[at] = block[at - 1];
            blockEnter[at] = blockEnter[--at];
        }
        block[at] = number;
        blockEnter[at] = in;
    }

    int crossedBlocks() {
        return blocks;
    }

    double crossedBlockEnter(int i) {
        return blockEnter[i];
    }

    int crossedBlock(int i) {
        return block[i];
    }
}
