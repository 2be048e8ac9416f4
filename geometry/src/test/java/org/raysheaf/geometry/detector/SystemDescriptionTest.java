package org.raysheaf.geometry.detector;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.Material;
import org.raysheaf.geometry.settings.InvalidSettingsException;

class SystemDescriptionTest {
    private static final FieldOfView VIEW = new FieldOfView(29, 62);
    private static final CrystalBlock TILE =
            new CrystalBlock("tile", 11, 11, 1, new Vector3(1.85, 1.85, 13), new Vector3(1.7, 1.7, 13), "scintillator");

    private static SystemDescription describe(BlockKind block, Placement... placements) {
        return new SystemDescription(
                "test",
                VIEW,
                new PairRule(1),
                List.of(new Material("scintillator", 12)),
                List.of(block),
                List.of(placements));
    }

    @Test
    void reportsAllProblemsOfABlockAtOnce() {
        assertThatThrownBy(() -> new CrystalBlock(
                        "tile", 0, 11, 1, new Vector3(1.6, 1.85, 13), new Vector3(1.7, 1.9, -2), "scintillator"))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("columns: expected a number from 1 to 1000, found 0")
                .hasMessageContaining("crystal_mm[2]: expected a number from 0.00001 to 1000, found -2")
                .hasMessageContaining(
                        "pitch_mm[1]: expected a pitch of at least the crystal's size 1.9 mm, found 1.85 mm");
    }

    @Test
    void namesBlocksThatOverlap() {
        assertThatThrownBy(() -> describe(TILE, new Placement.Rings("tile", 12, 36, 0, List.of(0.0))))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("placements[0]: block 1 overlaps block 0 by")
                .hasMessageContaining("block 2 overlaps block 1 by");
    }

    @Test
    void acceptsBlocksThatTouch() {
        // A square of four blocks whose inner radius lets the corners just meet.
        double touching = 0.5 * TILE.widthMm();
        CrystalBlock tile = new CrystalBlock(
                "tile", 11, 11, 1, new Vector3(1.85, 1.85, 13), new Vector3(1.7, 1.7, 13), "scintillator");
        SystemDescription square = new SystemDescription(
                "square",
                new FieldOfView(10, 20),
                new PairRule(1),
                List.of(new Material("scintillator", 12)),
                List.of(tile),
                List.of(new Placement.Rings("tile", 4, touching, 0, List.of(0.0))));
        assertThat(square.place()).hasSize(4);
    }

    @Test
    void namesBlocksThatLookAway() {
        assertThatThrownBy(() -> describe(
                        TILE,
                        new Placement.Single("tile", new Vector3(50, 0, 0), new Vector3(1, 0, 0), Vector3.Z),
                        new Placement.Single("tile", new Vector3(-50, 0, 0), new Vector3(1, 0, 0), Vector3.Z)))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("placements[0]: block 0 does not face the field of view");
    }

    @Test
    void namesBlocksInsideTheFieldOfView() {
        assertThatThrownBy(() -> describe(TILE, new Placement.Rings("tile", 2, 20, 0, List.of(0.0))))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("block 0 reaches into the field of view of radius 29.0 mm");
    }

    @Test
    void namesWhatDoesNotResolve() {
        assertThatThrownBy(() -> new SystemDescription(
                        "test",
                        VIEW,
                        new PairRule(1),
                        List.of(new Material("glass", 12), new Material("glass", 10)),
                        List.of(TILE),
                        List.of(new Placement.Rings("brick", 12, 42, 0, List.of(0.0)))))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("materials[1].name: expected a new name, found glass a second time")
                .hasMessageContaining("blocks[0].material: expected a material of the library (water, pmma, ")
                .hasMessageContaining(
                        "or one of the materials here (glass, glass), found scintillator; the nearest is ")
                .hasMessageContaining("placements[0].block: expected one of [tile], found brick");
    }

    @Test
    void refusesARuleThatAdmitsNoPair() {
        assertThatThrownBy(() -> Systems.system(
                        VIEW, 7, 12, List.of(TILE), List.of(new Placement.Rings("tile", 12, 42, 0, List.of(0.0)))))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining(
                        "pairs.blocks_apart: expected a distance that lets some pair of blocks through, found 7");
    }

    @Test
    void refusesAFacingThatIsNotPerpendicularToTheRows() {
        assertThatThrownBy(
                        () -> new Placement.Single("tile", new Vector3(50, 0, 0), new Vector3(-1, 0, 0.2), Vector3.Z))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("rows_along: expected a direction perpendicular to facing");
    }
}
