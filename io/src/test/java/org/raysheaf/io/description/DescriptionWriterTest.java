package org.raysheaf.io.description;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class DescriptionWriterTest {
    @Test
    void writesDefaultsOutAndLeavesAbsentValuesOut() throws Exception {
        assertThat(DescriptionWriter.render("cabin", Cabin.read(Cabin.TEXT))).isEqualTo("""
                        raysheaf: cabin/1
                        name: heron-12
                        block:
                          columns: 11
                          rows: 11
                          pitch_mm: 1.85
                          gap_mm: 0.5
                        placements:
                          - kind: ring
                            radius_mm: 42
                            start_angle_deg: 0
                          - kind: free
                            centre: [0, 0, 60.5]
                        materials:
                          lso:
                            attenuation_length_mm: 11.5
                          lead:
                            attenuation_length_mm: 0
                        choice: prompt_only
                        origin: [0, 0, 0]
                        label: "1_000"
                        events: 2000000
                        tidy: true
                        points: []
                        """);
    }

    @Test
    void isReadBackToEqualSettings() throws Exception {
        Cabin cabin = Cabin.read(Cabin.TEXT + """
                label: "yes \\" \\\\ \\n\\t: # é"
                energy_keV: 1.0e-300
                spare: {columns: 1, rows: 2, pitch_mm: 0.1, gap_mm: 1e23}
                start: 2026-03-01T09:30:00.25Z
                points: [[1, 2, 3], [4, 5, 6e10]]
                """);

        assertThat(Cabin.read(DescriptionWriter.render("cabin", cabin))).isEqualTo(cabin);
    }

    record Texts(Map<String, List<String>> texts) {}

    @ParameterizedTest
    @ValueSource(strings = {"", " ", "yes", "~", "1e5", "a: b", "- a", "a #b", "é", "\u0007", "[", "a b", "x/y.yaml"})
    void keepsEveryText(String text) throws Exception {
        Texts texts = new Texts(Map.of("k" + text, List.of(text)));

        String rendered = DescriptionWriter.render("texts", texts);

        assertThat(DescriptionReader.readText(rendered, "t", "texts", Texts.class))
                .isEqualTo(texts);
    }

    record Forest(List<List<Cabin.Material>> rows) {}

    @Test
    void nestsListsOfListsOfRecords() throws Exception {
        Forest forest = new Forest(List.of(
                List.of(new Cabin.Material(1), new Cabin.Material(2)), List.of(), List.of(new Cabin.Material(3))));

        String rendered = DescriptionWriter.render("forest", forest);

        assertThat(DescriptionReader.readText(rendered, "t", "forest", Forest.class))
                .isEqualTo(forest);
    }

    @Test
    void refusesNumbersThatNoDescriptionHolds() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> DescriptionWriter.render("material", new Cabin.Material(Double.NaN)))
                .withMessage("a description cannot hold the number NaN");
    }
}
