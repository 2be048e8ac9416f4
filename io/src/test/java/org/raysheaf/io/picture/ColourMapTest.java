package org.raysheaf.io.picture;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;

class ColourMapTest {
    /** Rounding to 8 bits per channel. */
    private static final double ROUNDING = 0.5;

    @Test
    void lightnessGrowsLinearlyWithTheValue() {
        for (int i = 0; i <= 200; i++) {
            double t = i / 200.0;
            LabColour colour = LabColour.ofRgb(ColourMap.STANDARD.rgb(t));
            assertThat(colour.lightness()).as("at %s", t).isCloseTo(2 + 96 * t, within(ROUNDING));
        }
    }

    @Test
    void lightnessNeverFallsAsPrinted() {
        double before = -1;
        for (int i = 0; i < 256; i++) {
            double lightness =
                    LabColour.ofRgb(ColourMap.STANDARD.rgb(i / 255.0)).lightness();
            assertThat(lightness).isGreaterThan(before);
            before = lightness;
        }
    }

    @Test
    void hasNoJumpsOfColour() {
        for (int i = 0; i < 255; i++) {
            LabColour a = LabColour.ofRgb(ColourMap.STANDARD.rgb(i / 255.0));
            LabColour b = LabColour.ofRgb(ColourMap.STANDARD.rgb((i + 1) / 255.0));
            double step = Math.hypot(b.lightness() - a.lightness(), Math.hypot(b.a() - a.a(), b.b() - a.b()));
            // The whole way is about 300 long in CIELAB, so 255 even steps are 1.2 each.
            assertThat(step).as("step %d", i).isLessThan(4);
        }
    }

    @Test
    void endsBeyondItsRange() {
        assertThat(ColourMap.STANDARD.rgb(-3)).isEqualTo(ColourMap.STANDARD.rgb(0));
        assertThat(ColourMap.STANDARD.rgb(7)).isEqualTo(ColourMap.STANDARD.rgb(1));
    }

    /** Values of the primaries as commonly tabulated, e.g. Lindbloom's CIE colour calculator (sRGB, D65, 2 degrees). */
    @Test
    void convertsThePrimariesAsTabulated() {
        assertLab(0xff0000, 53.24, 80.09, 67.20);
        assertLab(0x00ff00, 87.74, -86.18, 83.18);
        assertLab(0x0000ff, 32.30, 79.20, -107.86);
        assertLab(0xffffff, 100, 0, 0);
        assertThat(new LabColour(53.24, 80.09, 67.20).rgb()).isEqualTo(0xff0000);
    }

    private static void assertLab(int rgb, double lightness, double a, double b) {
        LabColour lab = LabColour.ofRgb(rgb);
        assertThat(lab.lightness()).isCloseTo(lightness, within(0.02));
        assertThat(lab.a()).isCloseTo(a, within(0.03));
        assertThat(lab.b()).isCloseTo(b, within(0.03));
    }
}
