package org.raysheaf.io.picture;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class RoundScaleTest {
    @ParameterizedTest
    @CsvSource({"1, 1", "1.9, 1", "2, 2", "4.99, 2", "5, 5", "9.9, 5", "10, 10", "0.3, 0.2", "7e-9, 5e-9", "1000, 1000"
    })
    void takesTheLargestRoundNumberBelow(double limit, double expected) {
        assertThat(RoundScale.atMost(limit)).isCloseTo(expected, within(1e-12 * expected));
    }

    @Test
    void putsTicksAtRoundNumbersWithinTheRange() {
        assertThat(RoundScale.ticks(0, 221, 6)).first().isEqualTo(0.0);
        assertThat(RoundScale.ticks(0, 221, 6)).last().isEqualTo(220.0);
        assertThat(RoundScale.ticks(-1, 1, 4)).containsExactly(-1.0, -0.5, 0.0, 0.5, 1.0);
        assertThat(RoundScale.ticks(0, 1e-30, 5)).hasSize(6);
    }

    @ParameterizedTest
    @CsvSource({
        "0, 0",
        "-0.0, 0",
        "12, 12",
        "221.17, 221.2",
        "0.925, 0.925",
        "-1.85, −1.85",
        "123456, 123456",
        "1234567, 1.235×10⁶",
        "0.00012, 1.2×10⁻⁴",
        "1e-12, 1×10⁻¹²"
    })
    void writesNumbersInFewSigns(double value, String expected) {
        assertThat(RoundScale.text(value)).isEqualTo(expected);
    }
}
