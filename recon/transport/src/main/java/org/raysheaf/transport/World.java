package org.raysheaf.transport;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.stream.IntStream;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.detector.Shield;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.Material;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.solid.Bounds;
import org.raysheaf.geometry.solid.Placed;

/**
 * All matter that photons can meet, each kind with its table: crystals, then the phantom, then shields, then what surrounds them, the
 * earlier one where two claim the same place.
 *
 * <p>Crystals are walked exactly, by their lattice. The phantom and the shields are walked by delta tracking (Woodcock et al. 1965,
 * ANL-7050; from memory): inside the box around them a photon flies as if everything were the densest material, and a collision counts
 * with the probability that the true material has. It needs to know only what fills a point, so overlapping solids and voxels are
 * treated alike, and a mouse is thin: most photons leave it after one draw. Heavy shields make many such draws come to nothing; that
 * costs time, never truth.
 *
 * <p>Immutable, safe for use by several threads.
 */
final class World {
    private static final double MARGIN_MM = 1e-6;

    private final DetectorSystem system;
    private final Phantom phantom;
    private final Placed[] shields;
    private final List<Material> materials = new ArrayList<>();
    private final PhotonTable[] tables;
    private final CoherentScatter[] coherent;
    private final int surroundings;
    private final int[] ofBlock;
    private final int[] ofRegion;
    private final int[] ofShield;
    private final Vector3 low;
    private final Vector3 high;
    private final int[] mayBeDensest;
    private final boolean apart;

    World(DetectorSystem system, Phantom phantom, Physics physics) {
        this.system = system;
        this.phantom = phantom;

        Map<Material, Integer> known = new HashMap<>();
        surroundings = index(known, Material.named(physics.surroundings()));
        ofBlock = system.blocks().stream()
                .mapToInt(block -> index(known, block.material()))
                .toArray();
        ofRegion = new int[phantom.regions()];
        for (int i = 0; i < ofRegion.length; i++) {
            ofRegion[i] = index(known, phantom.material(i));
        }
        List<Shield> described = system.description().shields();
        shields = described.stream().map(Shield::placed).toArray(Placed[]::new);
        ofShield = described.stream()
                .mapToInt(shield -> index(known, system.description().materialNamed(shield.material())))
                .toArray();
        tables = materials.stream()
                .map(material -> PhotonTable.of(material, physics.coherent()))
                .toArray(PhotonTable[]::new);
        coherent = materials.stream().map(CoherentScatter::of).toArray(CoherentScatter[]::new);
        mayBeDensest = IntStream.concat(
                        IntStream.of(surroundings), IntStream.concat(Arrays.stream(ofRegion), Arrays.stream(ofShield)))
                .distinct()
                .toArray();
        Bounds bounds = phantom.bounds();
        for (Placed shield : shields) {
            bounds = bounds.with(shield.bounds());
        }
        Vector3 margin = new Vector3(MARGIN_MM, MARGIN_MM, MARGIN_MM);
        low = bounds.low().minus(margin);
        high = bounds.high().plus(margin);
        apart = system.blocks().stream().noneMatch(this::touchesBox);
    }

    private int index(Map<Material, Integer> known, Material material) {
        return known.computeIfAbsent(material, m -> {
            materials.add(m);
            return materials.size() - 1;
        });
    }

    /** Whether a block's bounding sphere reaches into the box; rather too often than too seldom. */
    private boolean touchesBox(PlacedBlock block) {
        Vector3 c = block.centre();
        double x = outside(c.x(), low.x(), high.x());
        double y = outside(c.y(), low.y(), high.y());
        double z = outside(c.z(), low.z(), high.z());
        return Math.sqrt(x * x + y * y + z * z) < block.boundingRadiusMm();
    }

    private static double outside(double value, double from, double to) {
        return Math.max(0, Math.max(from - value, value - to));
    }

    DetectorSystem system() {
        return system;
    }

    /** Whether no block reaches into the box around phantom and shields. */
    boolean boxIsApart() {
        return apart;
    }

    /** Where a ray runs inside the box: entry (at least 0) and exit; false if it does not. */
    boolean clipBox(double x, double y, double z, double dx, double dy, double dz, double[] span) {
        span[0] = 0;
        span[1] = Double.POSITIVE_INFINITY;
        return slab(x, dx, low.x(), high.x(), span)
                && slab(y, dy, low.y(), high.y(), span)
                && slab(z, dz, low.z(), high.z(), span);
    }

    private static boolean slab(double p, double d, double from, double to, double[] span) {
        if (d == 0) {
            return p >= from && p <= to;
        }
        double a = (from - p) / d;
        double b = (to - p) / d;
        span[0] = Math.max(span[0], Math.min(a, b));
        span[1] = Math.min(span[1], Math.max(a, b));
        return span[0] < span[1];
    }

    /** Whether a point lies in the box around phantom and shields. */
    boolean inBox(double x, double y, double z) {
        return x >= low.x() && x <= high.x() && y >= low.y() && y <= high.y() && z >= low.z() && z <= high.z();
    }

    /** Number of the material at a point that no crystal fills. */
    int materialAt(double x, double y, double z) {
        int region = phantom.regionAt(x, y, z);
        if (region >= 0) {
            return ofRegion[region];
        }
        for (int i = shields.length - 1; i >= 0; i--) {
            if (shields[i].contains(x, y, z)) {
                return ofShield[i];
            }
        }
        return surroundings;
    }

    /** Number of the material of a block. */
    int materialOf(int block) {
        return ofBlock[block];
    }

    /** Number of the material outside everything. */
    int surroundings() {
        return surroundings;
    }

    PhotonTable table(int material) {
        return tables[material];
    }

    /** Linear attenuation of the densest material that can be in the box (1/mm). */
    double densestPerMm(double energyKeV) {
        double densest = 0;
        for (int material : mayBeDensest) {
            densest = Math.max(densest, tables[material].perMm(energyKeV));
        }
        return densest;
    }

    CoherentScatter coherent(int material) {
        return coherent[material];
    }
}
