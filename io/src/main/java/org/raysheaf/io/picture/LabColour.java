package org.raysheaf.io.picture;

/**
 * A colour in CIELAB with white point D65 (CIE 15:2004; sRGB by IEC 61966-2-1:1999).
 *
 * @param lightness L*, 0 (black) to 100 (white)
 * @param a a*, green to red
 * @param b b*, blue to yellow
 */
record LabColour(double lightness, double a, double b) {
    private static final double WHITE_X = 0.95047;
    private static final double WHITE_Z = 1.08883;

    /** Below this cube root the curve is straight: 6/29. */
    private static final double KNEE = 6.0 / 29;

    static LabColour ofRgb(int rgb) {
        double red = linear(rgb >> 16 & 0xff);
        double green = linear(rgb >> 8 & 0xff);
        double blue = linear(rgb & 0xff);
        double x = curve((0.4124564 * red + 0.3575761 * green + 0.1804375 * blue) / WHITE_X);
        double y = curve(0.2126729 * red + 0.7151522 * green + 0.0721750 * blue);
        double z = curve((0.0193339 * red + 0.1191920 * green + 0.9503041 * blue) / WHITE_Z);
        return new LabColour(116 * y - 16, 500 * (x - y), 200 * (y - z));
    }

    /** The nearest sRGB colour of the same lightness and hue: chroma gives way where a screen cannot show it. */
    int rgb() {
        double low = isShowable() ? 1 : 0;
        double high = 1;
        for (int i = 0; i < 30 && low < 1; i++) {
            double middle = 0.5 * (low + high);
            if (new LabColour(lightness, middle * a, middle * b).isShowable()) {
                low = middle;
            } else {
                high = middle;
            }
        }
        double[] linear = new LabColour(lightness, low * a, low * b).linearRgb();
        return stored(linear[0]) << 16 | stored(linear[1]) << 8 | stored(linear[2]);
    }

    private boolean isShowable() {
        for (double part : linearRgb()) {
            if (!(part >= -1e-4 && part <= 1 + 1e-4)) {
                return false;
            }
        }
        return true;
    }

    private double[] linearRgb() {
        double fy = (lightness + 16) / 116;
        double x = WHITE_X * inverse(fy + a / 500);
        double y = inverse(fy);
        double z = WHITE_Z * inverse(fy - b / 200);
        return new double[] {
            3.2404542 * x - 1.5371385 * y - 0.4985314 * z,
            -0.9692660 * x + 1.8760108 * y + 0.0415560 * z,
            0.0556434 * x - 0.2040259 * y + 1.0572252 * z
        };
    }

    private static double curve(double t) {
        return t > KNEE * KNEE * KNEE ? Math.cbrt(t) : t / (3 * KNEE * KNEE) + 4.0 / 29;
    }

    private static double inverse(double f) {
        return f > KNEE ? f * f * f : 3 * KNEE * KNEE * (f - 4.0 / 29);
    }

    private static double linear(int stored) {
        double s = stored / 255.0;
        return s <= 0.04045 ? s / 12.92 : Math.pow((s + 0.055) / 1.055, 2.4);
    }

    private static int stored(double linear) {
        double s = linear <= 0.0031308 ? 12.92 * linear : 1.055 * Math.pow(linear, 1 / 2.4) - 0.055;
        return (int) Math.round(255 * Math.max(0, Math.min(1, s)));
    }
}
