package org.raysheaf.io.picture;

import java.awt.Color;
import java.awt.geom.Rectangle2D;
import java.io.IOException;
import java.nio.file.Path;
import java.util.List;
import java.util.Locale;

/** Square matrices of values about 0, beside each other: blue below, the sheet's grey at 0, amber above. Safe for use by several threads. */
public final class HeatMap {
    private static final int SIDE = 640;
    private static final int LEFT = 100;
    private static final int TOP = 150;
    private static final int GAP = 100;
    private static final int BAR = 26;
    private static final int FOOT = 90;
    private static final Color MIDDLE = new Color(0x3a4048);
    private static final Color BELOW = new Color(0x6aa9f0);
    private static final Color ABOVE = new Color(0xf0b24d);

    /**
     * One matrix.
     *
     * @param title what it shows
     * @param values row by row, as many columns as rows; NaN where there is nothing
     */
    public record Panel(String title, List<Double> values) {}

    private HeatMap() {}

    /**
     * Draws and writes a picture.
     *
     * @param title title of the picture
     * @param axis what rows and columns number
     * @param panels the matrices
     * @param most values of this size and beyond have the full colour, greater than 0
     * @param file the PNG file to make
     * @param replace whether an existing file may be overwritten
     * @throws IOException if the file exists and may not be overwritten, if Java finds no font, or if writing fails
     */
    public static void write(String title, String axis, List<Panel> panels, double most, Path file, boolean replace)
            throws IOException {
        int barLeft = LEFT + panels.size() * (SIDE + GAP);
        Canvas canvas = new Canvas(barLeft + BAR + 100, TOP + SIDE + FOOT);
        canvas.title(title, 60, 50);
        for (int i = 0; i < panels.size(); i++) {
            draw(canvas, panels.get(i), axis, LEFT + i * (SIDE + GAP), most);
        }
        bar(canvas, barLeft, most);
        canvas.write(file, replace);
    }

    private static void draw(Canvas canvas, Panel panel, String axis, int x, double most) {
        int n = (int) Math.round(Math.sqrt(panel.values().size()));
        double cell = (double) SIDE / n;
        double squares = 0;
        int known = 0;
        for (int i = 0; i < n * n; i++) {
            double value = panel.values().get(i);
            if (!Double.isNaN(value)) {
                squares += value * value;
                known++;
                int row = i / n;
                canvas.fill(
                        new Rectangle2D.Double(x + i % n * cell, TOP + row * cell, cell, cell), colour(value / most));
            }
        }
        String rms = String.format(Locale.ROOT, "%s, rms %.2f", panel.title(), Math.sqrt(squares / known));
        canvas.text(rms, x, TOP - 32, Canvas.Anchor.LEFT, Canvas.LABEL, Canvas.TEXT);
        canvas.frame(x, TOP, SIDE, SIDE, Canvas.FRAME);
        for (double tick : RoundScale.ticks(0, n - 1.0, 6)) {
            double at = (tick + 0.5) * cell;
            String label = RoundScale.text(tick);
            canvas.text(label, x + at, TOP + SIDE + 20, Canvas.Anchor.MIDDLE, Canvas.SMALL, Canvas.QUIET);
            canvas.text(label, x - 12, TOP + at, Canvas.Anchor.RIGHT, Canvas.SMALL, Canvas.QUIET);
        }
        canvas.text(axis, x + 0.5 * SIDE, TOP + SIDE + 50, Canvas.Anchor.MIDDLE, Canvas.SMALL, Canvas.QUIET);
    }

    private static void bar(Canvas canvas, int x, double most) {
        for (int i = 0; i < SIDE; i++) {
            double t = 1 - 2 * (i + 0.5) / SIDE;
            canvas.fill(new Rectangle2D.Double(x, TOP + i, BAR, 1.5), colour(t));
        }
        canvas.frame(x, TOP, BAR, SIDE, Canvas.FRAME);
        for (double tick : RoundScale.ticks(-most, most, 4)) {
            double at = TOP + 0.5 * SIDE * (1 - tick / most);
            canvas.text(RoundScale.text(tick), x + BAR + 12, at, Canvas.Anchor.LEFT, Canvas.SMALL, Canvas.QUIET);
        }
    }

    /** From −1 to 1, straight between three colours. */
    private static Color colour(double t) {
        Color end = t < 0 ? BELOW : ABOVE;
        double share = Math.min(1, Math.abs(t));
        return new Color(
                mixed(MIDDLE.getRed(), end.getRed(), share),
                mixed(MIDDLE.getGreen(), end.getGreen(), share),
                mixed(MIDDLE.getBlue(), end.getBlue(), share));
    }

    private static int mixed(int from, int to, double share) {
        return (int) Math.rint(from + share * (to - from));
    }
}
