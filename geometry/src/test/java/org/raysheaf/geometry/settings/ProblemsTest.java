package org.raysheaf.geometry.settings;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatCode;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import org.junit.jupiter.api.Test;

class ProblemsTest {
    @Test
    void everyBrokenRuleIsReportedInOrder() {
        Problems problems = new Problems("crystal block")
                .above("pitch_mm", 0, 0)
                .atLeast("columns", 11, 1)
                .within("rows", 0.5, 1, 100)
                .rule(false, "material", "expected a known name, found wood");
        assertThat(problems.found())
                .extracting(Problems.Problem::field)
                .containsExactly("pitch_mm", "rows", "material");
        assertThatThrownBy(problems::orThrow)
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessage("crystal block: pitch_mm: expected a number > 0, found 0; "
                        + "rows: expected a number from 1 to 100, found 0.5; "
                        + "material: expected a known name, found wood")
                .satisfies(thrown -> assertThat(((InvalidSettingsException) thrown).problems())
                        .isEqualTo(problems.found()));
    }

    @Test
    void everyRuleFailsOnNotANumber() {
        double nan = Double.NaN;
        assertThat(new Problems("x")
                        .above("a", nan, 0)
                        .atLeast("b", nan, 0)
                        .within("c", nan, 0, 1)
                        .finite("d", nan)
                        .found())
                .hasSize(4)
                .allMatch(problem -> problem.message().endsWith("found NaN"));
    }

    @Test
    void openRangesStillRefuseInfinity() {
        double infinity = Double.POSITIVE_INFINITY;
        assertThat(new Problems("x")
                        .above("a", infinity, 0)
                        .atLeast("b", infinity, 0)
                        .finite("c", infinity)
                        .found())
                .hasSize(3);
    }

    @Test
    void boundsBelongToClosedRangesOnly() {
        assertThatCode(() -> new Problems("x")
                        .atLeast("a", 1, 1)
                        .within("b", 0, 0, 1)
                        .within("c", 1, 0, 1)
                        .orThrow())
                .doesNotThrowAnyException();
        assertThat(new Problems("x").above("a", 1, 1).found()).hasSize(1);
    }
}
