package org.raysheaf.geometry.detector;

import java.util.List;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.Material;

/** Invented systems that tests share. */
public final class Systems {
    private Systems() {}

    /** Three rings of 12 blocks of 11 × 11 crystals, 13 mm deep. */
    public static DetectorSystem heron12(double attenuationLengthMm, double depthMm) {
        CrystalBlock tile = new CrystalBlock(
                "tile", 11, 11, 1, new Vector3(1.85, 1.85, depthMm), new Vector3(1.7, 1.7, depthMm), "scintillator");
        return system(
                new FieldOfView(29, 62),
                3,
                attenuationLengthMm,
                List.of(tile),
                List.of(new Placement.Rings("tile", 12, 42, 0, List.of(-20.8, 0.0, 20.8))));
    }

    /** A system of one material. */
    public static DetectorSystem system(
            FieldOfView view,
            int blocksApart,
            double attenuationLengthMm,
            List<BlockKind> blocks,
            List<Placement> placements) {
        return new DetectorSystem(new SystemDescription(
                "test",
                view,
                new PairRule(blocksApart),
                List.of(new Material("scintillator", attenuationLengthMm)),
                blocks,
                placements));
    }

    /** A flat plate of perfectly absorbing faces without gaps, so thin that its sides do not count. */
    public static CrystalBlock plate(String name, int columns, int rows, double widthMm, double heightMm) {
        return new CrystalBlock(
                name,
                columns,
                rows,
                1,
                new Vector3(widthMm / columns, heightMm / rows, 1),
                new Vector3(widthMm / columns, heightMm / rows, 1e-4),
                "scintillator");
    }
}
