package org.raysheaf.transport;

import java.time.Instant;
import java.util.Arrays;
import java.util.List;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.PairRule;
import org.raysheaf.geometry.detector.Placement;
import org.raysheaf.geometry.detector.Readout;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.KleinNishina;
import org.raysheaf.geometry.matter.Material;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.geometry.phantom.PhantomPart;
import org.raysheaf.geometry.phantom.Source;

/** Systems, phantoms and acquisitions to try things with. */
final class Trials {
    private static final Material NOTHING = Material.named("vacuum");

    private Trials() {}

    /** Three rings of twelve blocks of small ideal crystals. */
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

    /** Two wide single ideal crystals that face each other along y, fronts at y = ±gap/2: directions, not edges, matter. */
    static DetectorSystem slabs(double gapMm, double thicknessMm, double attenuationLengthMm) {
        Vector3 size = new Vector3(1000, 1000, thicknessMm);
        return facing(new CrystalBlock("slab", 1, 1, 1, size, size, "crystal"), gapMm, attenuationLengthMm);
    }

    static DetectorSystem facing(CrystalBlock block, double gapMm, double attenuationLengthMm) {
        return facing(block, gapMm, List.of(new Material("crystal", attenuationLengthMm)));
    }

    /** Two crystals of a material of the library, of one size, with a readout. */
    static DetectorSystem facing(String material, Vector3 sizeMm, double gapMm, Readout readout) {
        return facing(new CrystalBlock("slab", 1, 1, 1, sizeMm, sizeMm, material, readout), gapMm, List.of());
    }

    private static DetectorSystem facing(CrystalBlock block, double gapMm, List<Material> materials) {
        Vector3 front = new Vector3(0, 0.5 * gapMm, 0);
        return new DetectorSystem(new SystemDescription(
                "facing",
                new FieldOfView(0.45 * gapMm, 10),
                new PairRule(1),
                materials,
                List.of(block),
                List.of(
                        new Placement.Single(block.name(), front, new Vector3(0, -1, 0), Vector3.Z),
                        new Placement.Single(block.name(), front.times(-1), Vector3.Y, Vector3.Z))));
    }

    /** A phantom whose parts hold activity but no matter. */
    static Phantom phantom(PhantomPart... parts) {
        List<PhantomPart> empty = Arrays.stream(parts)
                .map(part -> new PhantomPart(
                        part.name(),
                        part.shape(),
                        part.centreMm(),
                        part.turnDeg(),
                        NOTHING.name(),
                        part.concentrationKBqPerMl()))
                .toList();
        return new Phantom(new PhantomDescription("trial", empty));
    }

    /** Points and lines in empty space. */
    static Phantom sources(Source... sources) {
        return new Phantom(new PhantomDescription("trial", List.of(), null, List.of(), List.of(sources)));
    }

    /** Straight photons, pairs within 4 ns. */
    static Acquisition lasting(double durationS, @Nullable String nuclide, long seed) {
        return new Acquisition(
                "",
                "",
                nuclide,
                durationS,
                Instant.EPOCH,
                seed,
                null,
                ListKind.PAIRS,
                true,
                true,
                false,
                Physics.STRAIGHT,
                Pairing.within(4));
    }

    /** The same, with all singles in the list. */
    static Acquisition singles(double durationS, Physics physics, long seed) {
        return new Acquisition(
                "",
                "",
                null,
                durationS,
                Instant.EPOCH,
                seed,
                null,
                ListKind.SINGLES,
                true,
                true,
                true,
                physics,
                Pairing.within(4));
    }

    /** An annihilation photon. */
    static Photon photon(double x, double y, double z, Vector3 direction) {
        return photon(x, y, z, direction, KleinNishina.ELECTRON_KEV);
    }

    static Photon photon(double x, double y, double z, Vector3 direction, double energyKeV) {
        Vector3 unit = direction.unit();
        Photon photon = new Photon();
        photon.emit(new double[] {x, y, z}, energyKeV, Photon.ANNIHILATION);
        photon.dx = unit.x();
        photon.dy = unit.y();
        photon.dz = unit.z();
        return photon;
    }
}
