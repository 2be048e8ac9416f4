package org.raysheaf.io.description;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.assertThatIllegalStateException;
import static org.assertj.core.api.Assertions.catchThrowableOfType;

import java.time.Instant;
import java.util.List;
import java.util.Optional;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Default;

class DescriptionReaderTest {
    private static void assertRefused(String text, String... lines) {
        assertThatExceptionOfType(DescriptionException.class)
                .isThrownBy(() -> Cabin.read(text))
                .withMessage(String.join("\n", lines));
    }

    @Test
    void readsEveryTypeOfComponent() throws Exception {
        String more = """
                choice: delayed
                origin: [1, -2.5, 3e-1]
                label: "no: quotes"
                events: 5
                tidy: false
                energy_keV: 511
                spare: {columns: 1, rows: 2, pitch_mm: .5, gap_mm: 0}
                start: 2026-03-01T09:30:00Z
                points: [[1, 2, 3], [4, 5, 6]]
                """;

        Cabin cabin = Cabin.read(Cabin.TEXT + more);

        assertThat(cabin.name()).isEqualTo("heron-12");
        assertThat(cabin.block()).isEqualTo(new Cabin.Block(11, 11, 1.85, 0.5));
        assertThat(cabin.placements())
                .containsExactly(
                        new Cabin.RingPlacement(42, 0), new Cabin.FreePlacement(new Vector3(0, 0, 60.5), null));
        assertThat(cabin.materials().keySet()).containsExactly("lso", "lead");
        assertThat(cabin.choice()).isEqualTo(Cabin.Choice.DELAYED);
        assertThat(cabin.origin()).isEqualTo(new Vector3(1, -2.5, 0.3));
        assertThat(cabin.label()).isEqualTo("no: quotes");
        assertThat(cabin.events()).isEqualTo(5);
        assertThat(cabin.tidy()).isFalse();
        assertThat(cabin.energyKeV()).isEqualTo(511);
        assertThat(cabin.spare()).isEqualTo(new Cabin.Block(1, 2, 0.5, 0));
        assertThat(cabin.start()).contains(Instant.parse("2026-03-01T09:30:00Z"));
        assertThat(cabin.points()).containsExactly(new Vector3(1, 2, 3), new Vector3(4, 5, 6));
    }

    @Test
    void takesDefaultsForWhatIsLeftOut() throws Exception {
        Cabin cabin = Cabin.read(Cabin.TEXT);

        assertThat(cabin.choice()).isEqualTo(Cabin.Choice.PROMPT_ONLY);
        assertThat(cabin.origin()).isEqualTo(Vector3.ZERO);
        assertThat(cabin.label()).isEqualTo("1_000");
        assertThat(cabin.events()).isEqualTo(2_000_000);
        assertThat(cabin.tidy()).isTrue();
        assertThat(cabin.energyKeV()).isNull();
        assertThat(cabin.spare()).isNull();
        assertThat(cabin.start()).isEqualTo(Optional.empty());
        assertThat(cabin.points()).isEmpty();
    }

    @Test
    void reportsAllProblemsTogetherInTheOrderOfTheFile() {
        String text = """
                # a comment above
                raysheaf: cabin/1
                block:
                  columns: 3.5
                  rows: 0
                  pich_mm: 1.85
                  rows: 4
                placements:
                  - kind: rung
                    radius_mm: 42
                  - kind: ring
                    radius_mm: wide
                  - {radius_mm: 3}
                  - 7
                materials:
                  lso: {}
                  lead: {attenuation_length_mm: "0"}
                choice: Prompt
                origin: [0, 0]
                events: 9e99
                tidy: yes
                energy_kev: 511
                start: yesterday
                points: [[1, 2, x]]
                """;

        assertRefused(
                text,
                "cabin.yaml, line 2, field name: expected a text, found no such key; add it",
                "cabin.yaml, line 3, field block.pitch_mm: expected a number, found no such key; add it",
                "cabin.yaml, line 4, field block.columns: expected a whole number, found 3.5",
                "cabin.yaml, line 6, field block.pich_mm: expected one of columns, rows, pitch_mm, gap_mm, found the key"
                        + " pich_mm; the nearest is pitch_mm",
                "cabin.yaml, line 7, field block.rows: expected each key once, found it also in line 5; remove one",
                "cabin.yaml, line 9, field placements[0].kind: expected one of ring, free, found \"rung\"; the nearest is"
                        + " ring",
                "cabin.yaml, line 12, field placements[1].radius_mm: expected a number, found \"wide\"",
                "cabin.yaml, line 13, field placements[2].kind: expected one of ring, free, found no such key; add it",
                "cabin.yaml, line 14, field placements[3]: expected a mapping with the key kind, found 7",
                "cabin.yaml, line 16, field materials.lso.attenuation_length_mm: expected a number, found no such key; add"
                        + " it",
                "cabin.yaml, line 17, field materials.lead.attenuation_length_mm: expected a number, found \"0\"; remove"
                        + " the quotes",
                "cabin.yaml, line 18, field choice: expected one of prompt_only, delayed, found \"Prompt\"; the nearest is"
                        + " prompt_only",
                "cabin.yaml, line 19, field origin: expected a list of three numbers [x, y, z], found a list of 2",
                "cabin.yaml, line 20, field events: expected a whole number, found 9e99, which is too large",
                "cabin.yaml, line 21, field tidy: expected true or false, found \"yes\"",
                "cabin.yaml, line 22, field energy_kev: expected one of name, block, placements, materials, choice,"
                        + " origin, label, events, tidy, energy_keV, spare, start, points, found the key energy_kev; the"
                        + " nearest is energy_keV",
                "cabin.yaml, line 23, field start: expected a time such as 2026-03-01T09:30:00Z, found \"yesterday\"",
                "cabin.yaml, line 24, field points[0][2]: expected a number, found \"x\"");
    }

    @Test
    void mapsTheRulesOfARecordToTheLinesOfItsFields() {
        assertRefused(
                Cabin.TEXT.replace("columns: 11", "columns: 0").replace("1.85", "-1"),
                "cabin.yaml, line 4, field block.columns: expected a number >= 1, found 0",
                "cabin.yaml, line 6, field block.pitch_mm: expected a number > 0, found -1");
    }

    @Test
    void reportsAnyOtherRefusalOfARecordAtItsLine() {
        assertRefused(
                Cabin.TEXT.replace("60.5", "6050"),
                "cabin.yaml, line 10, field placements[1]: expected a centre within a metre, found 6050.0 mm");
    }

    @ParameterizedTest
    @ValueSource(
            strings = {"011", "1:30", "0x1F", "NaN", ".nan", ".inf", "1e999", "1_000", "1,5", "true", "~", "''", "1."})
    void refusesWhatIsNoPlainDecimalNumber(String number) {
        String text = Cabin.TEXT.replace("1.85", number);

        if (number.equals("1.")) {
            // A trailing point is harmless and some programs write it.
            assertThat(catchThrowableOfType(DescriptionException.class, () -> Cabin.read(text)))
                    .isNull();
        } else {
            assertThatExceptionOfType(DescriptionException.class)
                    .isThrownBy(() -> Cabin.read(text))
                    .withMessageStartingWith("cabin.yaml, line 6, field block.pitch_mm: expected a number, found ");
        }
    }

    @ParameterizedTest
    @ValueSource(strings = {"3000000000", "-3000000000", "99999999999999999999"})
    void refusesWholeNumbersThatDoNotFit(String number) {
        assertRefused(
                Cabin.TEXT.replace("columns: 11", "columns: " + number),
                "cabin.yaml, line 4, field block.columns: expected a whole number, found " + number
                        + ", which is too large");
    }

    @Test
    void refusesNothingWhereSomethingIsNeeded() {
        assertRefused(
                Cabin.TEXT.replace("columns: 11", "columns:"),
                "cabin.yaml, line 4, field block.columns: expected a whole number, found nothing");
        assertRefused(Cabin.TEXT + "tidy:\n", "cabin.yaml, line 16, field tidy: expected true or false, found nothing");
    }

    @Test
    void takesHyphensForUnderscoresInChoices() throws Exception {
        assertThat(Cabin.read(Cabin.TEXT + "choice: prompt-only\n").choice()).isEqualTo(Cabin.Choice.PROMPT_ONLY);
    }

    @Test
    void followsAliases() throws Exception {
        String text = Cabin.TEXT.replace("block:", "block: &b") + "spare: *b\n";

        assertThat(Cabin.read(text).spare()).isEqualTo(new Cabin.Block(11, 11, 1.85, 0.5));
    }

    @Test
    void refusesAliasesThatMultiply() {
        StringBuilder text = new StringBuilder("raysheaf: cabin/1\na0: &a0 [1]\n");
        for (int i = 1; i < 12; i++) {
            text.append("a%d: &a%d [".formatted(i, i))
                    .append("*a%d, ".formatted(i - 1).repeat(9))
                    .append("]\n");
        }
        assertRefused(
                text.toString(), "cabin.yaml, line 9: expected at most 4000000 values, found more behind its aliases");
    }

    @Test
    void refusesAnAliasForItself() {
        assertRefused(
                Cabin.TEXT + "points: &p [*p]\n",
                "cabin.yaml, line 16: expected a value that ends, found an alias for something that holds it");
    }

    @Test
    void refusesDeepNesting() {
        assertThatExceptionOfType(DescriptionException.class)
                .isThrownBy(() -> Cabin.read(Cabin.TEXT + "points: " + "[".repeat(10_000) + "]".repeat(10_000)))
                .withMessage("cabin.yaml: expected readable YAML, found: Nesting Depth exceeded max 50");
    }

    @Test
    void refusesASecondDocument() {
        assertRefused(
                Cabin.TEXT + "---\nname: other\n",
                "cabin.yaml, line 17: expected one document, found a second one; put it into a file of its own");
    }

    @ParameterizedTest
    @CsvSource(
            delimiter = '|',
            quoteCharacter = '`',
            value = {
                "block: [1, 2|cabin.yaml, line 3, column 1: expected readable YAML, but while parsing a flow sequence:"
                        + " expected ',' or ']', but got <stream end>",
                "name: a: b|cabin.yaml, line 2, column 8: expected readable YAML, but: mapping values are not allowed"
                        + " here",
                "block:\\n\\tcolumns: 1|cabin.yaml, line 3, column 1: expected spaces, found a tab; YAML is indented with"
                        + " spaces only"
            })
    void namesLineAndColumnOfASyntaxError(String rest, String message) {
        assertRefused("raysheaf: cabin/1\n" + rest.replace("\\n", "\n").replace("\\t", "\t") + "\n", message);
    }

    @Test
    void showsTheFirstProblemsOfVeryManyAndCountsTheRest() {
        String text = Cabin.TEXT + "points: [" + "1, ".repeat(1000) + "]\n";

        DescriptionException e = catchThrowableOfType(DescriptionException.class, () -> Cabin.read(text));

        assertThat(e.problems()).hasSize(1000);
        assertThat(e.toString().lines()).hasSize(26);
        assertThat(e).hasMessageEndingWith("\nand 975 more");
    }

    record Lopsided(@Default("nine") int fingers) {}

    @Test
    void blamesTheRecordForAnUnreadableDefault() {
        assertThatIllegalStateException()
                .isThrownBy(() -> DescriptionReader.readText("raysheaf: x/1", "x.yaml", "x", Lopsided.class))
                .withMessage("default of Lopsided.fingers: expected a whole number, found \"nine\"");
    }

    record Odd(List<StringBuilder> builders) {}

    @Test
    void blamesTheRecordForATypeThatNoFileCanHold() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> DescriptionReader.readText("raysheaf: x/1\nbuilders: [1]", "x.yaml", "x", Odd.class))
                .withMessage("a description cannot hold a java.lang.StringBuilder");
    }

    record Tree(
            @Default("[]") List<Tree> branches,
            @Default("1") int leaves) {
        Tree {
            if (leaves > 9) {
                throw new org.raysheaf.geometry.settings.InvalidSettingsException(
                        "tree",
                        List.of(new org.raysheaf.geometry.settings.Problems.Problem(
                                "branches[1].branches[0].leaves", "expected fewer")));
            }
        }
    }

    @Test
    void findsTheLineOfAFieldFarBelowTheRecordThatComplains() {
        String text = """
                raysheaf: tree/1
                leaves: 10
                branches:
                  - {}
                  - leaves: 1
                    branches:
                      - branches: []
                        leaves: 2
                """;

        assertThatExceptionOfType(DescriptionException.class)
                .isThrownBy(() -> DescriptionReader.readText(text, "t", "tree", Tree.class))
                .withMessage("t, line 8, field branches[1].branches[0].leaves: expected fewer");
    }
}
