package org.raysheaf.io.picture;

/**
 * The colours of values, from black through deep blue, teal and amber to white. Lightness L* of CIELAB grows linearly with the value, so
 * equal steps look equal, the map survives a grey printer, and it does not depend on telling red from green. Immutable.
 */
final class ColourMap {
    private static final int STEPS = 1024;
    private static final double DARKEST = 2;
    private static final double LIGHTEST = 98;

    /** Position, a*, b*: the way through the colours. In between, a smooth curve (Catmull-Rom). */
    private static final double[][] WAY = {
        {0.00, 0, -3},
        {0.20, 14, -44},
        {0.40, -14, -25},
        {0.58, -12, 12},
        {0.78, 13, 60},
        {0.90, 6, 40},
        {1.00, 0, 5}
    };

    /** The one map; it stands below the constants that it is made of. */
    static final ColourMap STANDARD = new ColourMap();

    private final int[] colours = new int[STEPS];

    private ColourMap() {
        for (int i = 0; i < STEPS; i++) {
            double t = i / (STEPS - 1.0);
            double lightness = DARKEST + t * (LIGHTEST - DARKEST);
            colours[i] = new LabColour(lightness, along(t, 1), along(t, 2)).rgb();
        }
    }

    /**
     * The colour of a value.
     *
     * @param t the value, scaled to 0 to 1; beyond, the end's colour
     * @return 0xRRGGBB
     */
    int rgb(double t) {
        double step = Math.rint(t * (STEPS - 1));
        return colours[(int) Math.max(0, Math.min(STEPS - 1, step))];
    }

    private static double along(double t, int coordinate) {
        int i = 0;
        while (i < WAY.length - 2 && t > WAY[i + 1][0]) {
            i++;
        }
        double width = WAY[i + 1][0] - WAY[i][0];
        double s = (t - WAY[i][0]) / width;
        double from = WAY[i][coordinate];
        double to = WAY[i + 1][coordinate];
        double slopeFrom = slope(i, coordinate) * width;
        double slopeTo = slope(i + 1, coordinate) * width;
        // Cubic Hermite polynomial.
        return from * (1 + 2 * s) * (1 - s) * (1 - s)
                + slopeFrom * s * (1 - s) * (1 - s)
                + to * s * s * (3 - 2 * s)
                + slopeTo * s * s * (s - 1);
    }

    private static double slope(int i, int coordinate) {
        double[] before = WAY[Math.max(0, i - 1)];
        double[] after = WAY[Math.min(WAY.length - 1, i + 1)];
        return (after[coordinate] - before[coordinate]) / (after[0] - before[0]);
    }
}
