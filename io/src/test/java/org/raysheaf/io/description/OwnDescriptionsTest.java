package org.raysheaf.io.description;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.PairRule;
import org.raysheaf.geometry.detector.Placement;
import org.raysheaf.geometry.detector.Readout;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.geometry.phantom.PhantomPart;
import org.raysheaf.geometry.solid.Sphere;

class OwnDescriptionsTest {
    private static final String RINGS = """
            raysheaf: system/1
            name: three rings
            field_of_view: {radius_mm: 29, length_mm: 62}
            materials:
              - {name: crystal, attenuation_length_mm: 12}
            blocks:
              - kind: crystal_block
                name: block
                columns: 11
                rows: 11
                pitch_mm: [1.85, 1.85, 13]
                crystal_mm: [1.7, 1.7, 13]
                material: crystal
            placements:
              - kind: rings
                block: block
                count: 12
                inner_radius_mm: 42
                axial_mm: [-20.8, 0, 20.8]
            """;

    private static SystemDescription read(String text) throws DescriptionException {
        return DescriptionReader.readText(text, "rings.yaml", "system", SystemDescription.class);
    }

    @Test
    void readsAWholeDetectorSystem() throws DescriptionException {
        SystemDescription system = read(RINGS);

        assertThat(system.blocks())
                .containsExactly(new CrystalBlock(
                        "block", 11, 11, 1, new Vector3(1.85, 1.85, 13), new Vector3(1.7, 1.7, 13), "crystal"));
        assertThat(system.placements())
                .containsExactly(new Placement.Rings("block", 12, 42, 0, List.of(-20.8, 0.0, 20.8)));
        assertThat(system.pairs()).isEqualTo(new PairRule(1));
        assertThat(read(DescriptionWriter.render("system", system))).isEqualTo(system);
    }

    @Test
    void pointsAtTheLineOfARuleThatTheSystemStates() {
        String text =
                RINGS.replace("material: crystal", "material: cristal").replace("[1.7, 1.7, 13]", "[1.7, 1.7, 14]");

        assertThatExceptionOfType(DescriptionException.class)
                .isThrownBy(() -> read(text))
                .withMessageStartingWith(
                        "rings.yaml, line 13, field blocks[0].material: expected a material of the library (")
                .withMessageEndingWith("or one of the materials here (crystal), found cristal; the nearest is crystal");
    }

    @Test
    void readsReadoutsShieldsAndBlocksOfOnePiece() throws DescriptionException {
        String text = """
                raysheaf: system/1
                name: two
                field_of_view: {radius_mm: 10, length_mm: 20}
                materials:
                  - {name: glass, density_g_per_cm3: 3.2, formula: PbSiO3}
                  - {name: foam, like: polystyrene, density_g_per_cm3: 0.03}
                  - {name: brass, density_g_per_cm3: 8.5, mass_fractions: {Cu: 0.65, Zn: 0.35}}
                blocks:
                  - kind: monolithic_block
                    name: slab
                    size_mm: [30, 30, 10]
                    cell_mm: [5, 5, 5]
                    material: lyso
                    position_sd_mm: [0.5, 0.5, 1]
                    readout: {energy_resolution: 0.1, dead_time: paralysable, dead_time_ns: 500, lutetium: true}
                placements:
                  - {kind: rings, block: slab, count: 2, inner_radius_mm: 40}
                shields:
                  - {name: plate, shape: {kind: cylinder, radius_mm: 60, length_mm: 5}, centre_mm: [0, 0, 30], material: lead}
                """;

        SystemDescription system = read(text);

        assertThat(system.materials().get(2).composition()).containsEntry("Cu", 0.65);
        assertThat(system.blocks().get(0).readout().deadTime()).isEqualTo(Readout.DeadTime.PARALYSABLE);
        assertThat(system.blocks().get(0).elements()).isEqualTo(6 * 6 * 2);
        assertThat(system.shields().get(0).material()).isEqualTo("lead");
        assertThat(read(DescriptionWriter.render("system", system))).isEqualTo(system);
    }

    @Test
    void readsSourcesAndVolumesOfLabels() throws DescriptionException {
        String text = """
                raysheaf: phantom/1
                name: mouse
                materials:
                  - {name: fur, like: adipose, density_g_per_cm3: 0.2}
                volume:
                  file: mouse.nii.gz
                  labels:
                    - {label: 1, name: body, material: soft-tissue, concentration_kBq_per_mL: 10}
                    - {label: 2, name: coat, material: fur}
                sources:
                  - {kind: point, name: marker, at_mm: [1, 2, 3], activity_kBq: 5}
                  - {kind: line, name: tail, from_mm: [0, 0, -40], to_mm: [0, 0, -60], activity_kBq: 2}
                  - {kind: surface, name: skin, shape: {kind: sphere, radius_mm: 3}, activity_kBq: 1}
                """;

        PhantomDescription phantom = DescriptionReader.readText(text, "p.yaml", "phantom", PhantomDescription.class);

        assertThat(phantom.sources()).hasSize(3);
        assertThat(phantom.sources().get(1).activityKBq()).isEqualTo(2);
        assertThat(phantom.parts()).isEmpty();
        assertThat(DescriptionReader.readText(
                        DescriptionWriter.render("phantom", phantom), "p.yaml", "phantom", PhantomDescription.class))
                .isEqualTo(phantom);
    }

    @Test
    void readsAPhantom() throws DescriptionException {
        String text = """
                raysheaf: phantom/1
                name: one hot ball
                parts:
                  - name: ball
                    shape: {kind: sphere, radius_mm: 4}
                    concentration_kBq_per_mL: 120
                """;

        PhantomDescription phantom = DescriptionReader.readText(text, "p.yaml", "phantom", PhantomDescription.class);

        assertThat(phantom.parts())
                .containsExactly(PhantomPart.of("ball", new Sphere(4)).holding(120));
    }
}
