package org.raysheaf.io.records;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Path;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class FormulaTest {
    private static final RecordsDescription NOTHING = describe();

    private static RecordsDescription describe() {
        try {
            return Lab.describe("""
                    format: {kind: text, fields: [{name: a, column: 1}]}
                    attributes: {element: {from: a}, time_ps: {from: a}}
                    """);
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    private final FieldBlock block = new FieldBlock();
    private final Column a = block.add("a", true);
    private final Column x = block.add("x", false);
    private final Column dotted = block.add("mark.count", true);
    private final Reasons reasons = new Reasons();

    private Column result(String formula) throws IOException {
        Pipeline pipeline = new Pipeline(
                NOTHING,
                block.fields(),
                List.of(formula),
                new Surroundings(Path.of("RECORDS.yaml"), Lab.system()),
                reasons,
                true);
        Column result = pipeline.formula("test", formula);
        block.set(1, 7);
        block.fates()[0] = 0;
        pipeline.run(block, 3);
        return result;
    }

    @ParameterizedTest
    @CsvSource(
            delimiter = '|',
            value = {
                "1 + 2 * 3 | 7",
                "(1 + 2) * 3 | 9",
                "7 // 2 | 3",
                "-7 // 2 | -4",
                "-7 % 4 | 1",
                "2 - 3 - 4 | -5",
                "0x1F + a | 131",
                "a == 100 and not (a < 3) | 1",
                "a > 100 or a >= 101 | 0",
                "a != 100 | 0",
                "if(a > 50, a, -a) | 100",
                "min(a, 3) + max(a, 3) | 103",
                "abs(3 - a) | 97",
                "bits(0xABCD, 4, 8) | 188",
                "bits(0xFFFFFFFFFFFFFFFF, 63, 1) | 1",
                "floor(x) | 2",
                "round(x + 0.3) | 3",
                "round(-x) | -2",
                "9007199254740993 + a - 100 | 9007199254740993",
                "mark.count * 2 | 10",
                "file * 10 + record | 37",
            })
    void wholeNumbersStayWhole(String formula, long expected) throws IOException {
        a.longs()[0] = 100;
        x.doubles()[0] = 2.5;
        dotted.longs()[0] = 5;
        Column result = result(formula);
        assertThat(result.whole()).isTrue();
        assertThat(result.longs()[0]).isEqualTo(expected);
        assertThat(block.fates()[0]).isZero();
    }

    @ParameterizedTest
    @CsvSource(
            delimiter = '|',
            value = {
                "a / 8 | 12.5",
                "1e3 * x | 2500",
                "2.5e-1 + x | 2.75",
                "x // 2 | 1",
                "x % 2 | 0.5",
                "sqrt(x * x) | 2.5",
                "log(exp(x)) | 2.5",
                "if(x > 2, 1, 0.5) | 1",
            })
    void realNumbersAreDoubles(String formula, double expected) throws IOException {
        a.longs()[0] = 100;
        x.doubles()[0] = 2.5;
        Column result = result(formula);
        assertThat(result.whole()).isFalse();
        assertThat(result.doubles()[0]).isEqualTo(expected);
    }

    @ParameterizedTest
    @CsvSource(
            delimiter = '|',
            value = {
                "a * a | too large",
                "a + a | too large",
                "-2 - a | too large",
                "1 // (a - a) | division by 0",
                "1 % (a - a) | division by 0",
                "floor(a / 1e-10) | no whole number",
                "round(0.0 / 0.0) | no whole number",
            })
    void recordsWithoutAResultAreSetAside(String formula, String reason) throws IOException {
        a.longs()[0] = Long.MAX_VALUE;
        result(formula);
        assertThat(block.fates()[0]).isNotZero();
        reasons.count(block.fates(), 1);
        assertThat(reasons.counts().keySet()).singleElement().asString().contains(reason);
    }

    @ParameterizedTest
    @CsvSource(
            delimiter = '|',
            value = {
                "1 + | character 4: expected a value, found its end",
                "(1 + 2 | expected \")\", found its end",
                "1 + b | expected one of the values file, record, a, x, mark.count, found \"b\"",
                "sin(x) | expected a function: abs",
                "1 2 | expected an operator or the end, found \"2\"",
                "bits(a, 60, 10) | expected a number from 1 to 4",
                "bits(x, 1, 2) | expected a whole number as the first argument of bits",
                "1.2.3 | expected a number",
                "1f | expected a number",
                "a & 3 | expected an operator or the end",
            })
    void mistakesAreShownWhereTheyAre(String formula, String message) {
        assertThatThrownBy(() -> result(formula))
                .isInstanceOf(RecordException.class)
                .hasMessageContaining("RECORDS.yaml, test: formula")
                .hasMessageContaining(message);
    }

    @Test
    void comparisonsWithNaNFail() throws IOException {
        x.doubles()[0] = Double.NaN;
        assertThat(result("x < 1 or x >= 1 or x == x").longs()[0]).isZero();
        assertThat(result("x != x").longs()[0]).isOne();
    }
}
