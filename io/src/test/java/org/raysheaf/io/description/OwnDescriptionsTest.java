package org.raysheaf.io.description;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.PairRule;
import org.raysheaf.geometry.detector.Placement;
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
        String text = RINGS.replace("material: crystal", "material: glass").replace("[1.7, 1.7, 13]", "[1.7, 1.7, 14]");

        assertThatExceptionOfType(DescriptionException.class)
                .isThrownBy(() -> read(text))
                .withMessage("rings.yaml, line 13, field blocks[0].material: expected one of [crystal], found glass");
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
