package org.raysheaf.geometry.detector;

import java.util.Arrays;
import java.util.List;
import org.raysheaf.geometry.frame.Vector3;

/**
 * A detector system in its place: all blocks, all elements (crystals), and what a ray meets.
 *
 * <p><b>Element numbers</b> are part of the list format and never change for a given description. Blocks are numbered in the order of the
 * placements, and within a placement as {@link Placement} says. The elements of a block follow each other: element = first element of the
 * block + (layer · rows + row) · columns + column, with layer 0 at the front, row 0 at −v and column 0 at −u.
 *
 * <p>Immutable, safe for use by several threads.
 */
public final class DetectorSystem {
    private final SystemDescription description;
    private final List<PlacedBlock> blocks;
    private final CrystalTracer[] tracers;
    private final int[] blockOfElement;
    // Bounding spheres, four doubles a block: centre and radius. Most blocks are passed over by these alone.
    private final double[] spheres;

    /**
     * Places the blocks of a description.
     *
     * @param description a sound description
     */
    public DetectorSystem(SystemDescription description) {
        this.description = description;
        this.blocks = description.place();
        this.tracers = new CrystalTracer[blocks.size()];
        this.spheres = new double[4 * blocks.size()];
        PlacedBlock last = blocks.get(blocks.size() - 1);
        this.blockOfElement = new int[last.firstElement() + last.kind().elements()];
        for (PlacedBlock block : blocks) {
            int b = block.index();
            tracers[b] = new CrystalTracer(block, block.kind().lattice());
            Vector3 centre = block.centre();
            double radius = block.boundingRadiusMm();
            spheres[4 * b] = centre.x();
            spheres[4 * b + 1] = centre.y();
            spheres[4 * b + 2] = centre.z();
            spheres[4 * b + 3] = radius;
            for (int i = 0; i < block.kind().elements(); i++) {
                blockOfElement[block.firstElement() + i] = b;
            }
        }
    }

    /**
     * The description that this system was placed from.
     *
     * @return the description
     */
    public SystemDescription description() {
        return description;
    }

    /**
     * The cylinder in which activity is looked for.
     *
     * @return the field of view
     */
    public FieldOfView fieldOfView() {
        return description.fieldOfView();
    }

    /**
     * The rule for coincident pairs.
     *
     * @return the rule
     */
    public PairRule pairs() {
        return description.pairs();
    }

    /**
     * All blocks.
     *
     * @return an unmodifiable list, in the order of their numbers
     */
    public List<PlacedBlock> blocks() {
        return blocks;
    }

    /**
     * Number of elements.
     *
     * @return the count; elements are numbered from 0
     */
    public int elements() {
        return blockOfElement.length;
    }

    /**
     * The block that holds an element.
     *
     * @param element the element, 0 to {@link #elements()} − 1
     * @return its block
     */
    public PlacedBlock blockOf(int element) {
        return blocks.get(blockOfElement[element]);
    }

    /**
     * The number of the block that holds an element.
     *
     * @param element the element, 0 to {@link #elements()} − 1
     * @return the block's number
     */
    public int blockIndexOf(int element) {
        return blockOfElement[element];
    }

    /**
     * Whether two elements may form a coincident pair by the distance of their blocks.
     *
     * @param a one element
     * @param b the other element
     * @return true if they may
     */
    public boolean admits(int a, int b) {
        int blockA = blockOfElement[a];
        int blockB = blockOfElement[b];
        return pairs().admits(blocks.get(blockA), blocks.get(blockB));
    }

    /**
     * Centre of an element.
     *
     * @param element the element
     * @return the middle of the crystal's box (mm)
     */
    public Vector3 centre(int element) {
        PlacedBlock block = blockOf(element);
        CrystalBlock kind = block.kind().lattice();
        return block.pose().apply(kind.centre(element - block.firstElement()));
    }

    /**
     * Size of an element along its block's u, v and w (mm); the first two make its face area, the third is its depth.
     *
     * @param element the element
     * @return the three edge lengths (mm)
     */
    public Vector3 size(int element) {
        return blockOf(element).kind().lattice().crystalMm();
    }

    /**
     * The element at a point.
     *
     * @param world the point (mm)
     * @return the element whose crystal holds the point, or −1 in a gap or outside all blocks
     */
    public int elementAt(Vector3 world) {
        for (PlacedBlock block : blocks) {
            if (world.minus(block.centre()).norm() <= block.boundingRadiusMm() * (1 + 1e-12)) {
                Vector3 local = block.pose().inverse().apply(world);
                int crystal = block.kind().lattice().crystalAt(local);
                if (crystal >= 0) {
                    return block.firstElement() + crystal;
                }
            }
        }
        return -1;
    }

    /**
     * Follows a ray through all blocks.
     *
     * @param ox origin (mm)
     * @param oy origin (mm)
     * @param oz origin (mm)
     * @param dx direction, of unit length
     * @param dy direction
     * @param dz direction
     * @param path is cleared and receives every crystal that the ray crosses, nearest first
     */
    public void trace(double ox, double oy, double oz, double dx, double dy, double dz, RayPath path) {
        path.clear();
        for (int b = 0; b < tracers.length; b++) {
            if (comesNear(b, ox, oy, oz, dx, dy, dz, 0)) {
                double[] local = path.localDirection(b);
                tracers[b].localDirection(dx, dy, dz, local);
                double in = tracers[b].enter(ox, oy, oz, local);
                if (in >= 0) {
                    path.addBlock(b, in);
                }
            }
        }
        for (int i = 0; i < path.crossedBlocks(); i++) {
            int b = path.crossedBlock(i);
            tracers[b].trace(
                    ox, oy, oz, path.localDirection(b), path.crossedBlockEnter(i), Double.POSITIVE_INFINITY, path);
        }
    }

    /**
     * Prepares to follow many parallel rays close to each other.
     *
     * @param ox origin of the central ray (mm)
     * @param oy origin (mm)
     * @param oz origin (mm)
     * @param dx direction, of unit length
     * @param dy direction
     * @param dz direction
     * @param radiusMm no ray of the bundle runs farther than this from the central one (mm)
     * @return the bundle
     */
    public ParallelRays parallelRays(
            double ox, double oy, double oz, double dx, double dy, double dz, double radiusMm) {
        CrystalTracer[] near = new CrystalTracer[tracers.length];
        int count = 0;
        for (int b = 0; b < tracers.length; b++) {
            if (comesNear(b, ox, oy, oz, dx, dy, dz, radiusMm)) {
                near[count++] = tracers[b];
            }
        }
        return new ParallelRays(Arrays.copyOf(near, count), dx, dy, dz);
    }

    /** Whether a ray comes within a margin of a block's bounding sphere, ahead of its origin or around it. */
    private boolean comesNear(
            int block, double ox, double oy, double oz, double dx, double dy, double dz, double margin) {
        double x = spheres[4 * block] - ox;
        double y = spheres[4 * block + 1] - oy;
        double z = spheres[4 * block + 2] - oz;
        double r = spheres[4 * block + 3] + margin;
        double along = x * dx + y * dy + z * dz;
        double square = x * x + y * y + z * z;
        return square - along * along <= r * r && (along >= 0 || square <= r * r);
    }
}
