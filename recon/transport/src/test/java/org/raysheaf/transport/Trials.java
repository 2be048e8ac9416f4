package org.raysheaf.transport;

import java.time.Instant;
import java.util.List;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.PairRule;
import org.raysheaf.geometry.detector.Placement;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.Material;
import org.raysheaf.geometry.matter.Nuclide;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.geometry.phantom.PhantomPart;

/** Systems, phantoms and acquisitions to try things with. */
final class Trials {
    /** ENSDF: 109.77 min; the branching here is 1 unless a test says otherwise. */
    static final double F18_HALF_LIFE_S = 109.77 * 60;

    private Trials() {}

    /** Three rings of twelve blocks of small crystals. */
    static DetectorSystem rings(double attenuationLengthMm) {
        return new DetectorSystem(new SystemDescription(
                "rings",
                new FieldOfView(29, 60),
                new PairRule(3),
                List.of(new Material("crystal", attenuationLengthMm)),
                List.of(new CrystalBlock(
                        "block", 11, 11, 1, new Vector3(1.85, 1.85, 13), new Vector3(1.7, 1.7, 13), "crystal")),
                List.of(new Placement.Rings("block", 12, 42, 0, List.of(-20.8, 0.0, 20.8)))));
    }

    /**
     * Two wide single crystals that face each other along y, fronts at y = ±gap/2: photon directions, not edges,
     * matter.
     */
    static DetectorSystem slabs(double gapMm, double thicknessMm, double attenuationLengthMm) {
        Vector3 size = new Vector3(1000, 1000, thicknessMm);
        return facing(new CrystalBlock("slab", 1, 1, 1, size, size, "crystal"), gapMm, attenuationLengthMm);
    }

    static DetectorSystem facing(CrystalBlock block, double gapMm, double attenuationLengthMm) {
        Vector3 front = new Vector3(0, 0.5 * gapMm, 0);
        return new DetectorSystem(new SystemDescription(
                "facing",
                new FieldOfView(5, 10),
                new PairRule(1),
                List.of(new Material("crystal", attenuationLengthMm)),
                List.of(block),
                List.of(
                        new Placement.Single(block.name(), front, new Vector3(0, -1, 0), Vector3.Z),
                        new Placement.Single(block.name(), front.times(-1), Vector3.Y, Vector3.Z))));
    }

    static Phantom phantom(PhantomPart... parts) {
        return new Phantom(new PhantomDescription("trial", List.of(parts)));
    }

    static Acquisition lasting(double durationS, @Nullable Nuclide nuclide, long seed) {
        return new Acquisition("", "", nuclide, durationS, null, Instant.EPOCH, seed, null, true, false);
    }
}
