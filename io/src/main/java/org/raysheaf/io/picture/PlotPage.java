package org.raysheaf.io.picture;

import java.awt.BasicStroke;
import java.awt.Color;
import java.awt.geom.Path2D;
import java.io.IOException;
import java.nio.file.Path;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** A page of histograms, two beside each other, with a few lines of text. Safe for use by several threads on different files. */
public final class PlotPage {
    private static final int WIDTH = 1640;
    private static final int PLOT_WIDTH = 660;
    private static final int PLOT_HEIGHT = 300;
    private static final int LEFT = 120;
    private static final int GAP_X = 140;
    private static final int ROW = 450;
    private static final int LINE = 30;
    private static final Color FILL = new Color(0x5f, 0x8d, 0xc4, 150);
    private static final Color EDGE = new Color(0x8f, 0xb8, 0xe8);

    /**
     * One histogram.
     *
     * @param title what it shows, with a unit if that helps
     * @param horizontal the quantity and unit along the horizontal axis
     * @param low lower edge of the first bin
     * @param step width of a bin, greater than 0
     * @param counts heights of the bins, all finite and at least 0
     * @param mark a value to be marked by a line, or null
     * @param note a remark below the title, may be empty
     */
    public record Plot(
            String title,
            String horizontal,
            double low,
            double step,
            List<Double> counts,
            @Nullable Double mark,
            String note) {}

    private PlotPage() {}

    /**
     * Draws and writes a page.
     *
     * @param title title of the page
     * @param lines lines of text under it
     * @param plots the histograms
     * @param file the PNG file to make
     * @param replace whether an existing file may be overwritten
     * @throws IOException if the file exists and may not be overwritten, if Java finds no font, or if writing fails
     */
    public static void write(String title, List<String> lines, List<Plot> plots, Path file, boolean replace)
            throws IOException {
        int head = 110 + LINE * lines.size();
        int rows = (plots.size() + 1) / 2;
        Canvas canvas = new Canvas(WIDTH, head + rows * ROW + 40);
        canvas.title(title, 60, 50);
        for (int i = 0; i < lines.size(); i++) {
            canvas.text(
                    fitting(canvas, lines.get(i)), 60, 96 + LINE * i, Canvas.Anchor.LEFT, Canvas.SMALL, Canvas.QUIET);
        }
        for (int i = 0; i < plots.size(); i++) {
            draw(canvas, plots.get(i), LEFT + i % 2 * (PLOT_WIDTH + GAP_X), head + i / 2 * ROW + 70);
        }
        canvas.write(file, replace);
    }

    private static String fitting(Canvas canvas, String text) {
        String shown = text;
        while (canvas.width(shown, Canvas.SMALL) > WIDTH - 120 && shown.length() > 1) {
            shown = shown.substring(0, shown.length() - 2) + "…";
        }
        return shown;
    }

    private static void draw(Canvas canvas, Plot plot, int x, int y) {
        canvas.text(plot.title(), x, y - 44, Canvas.Anchor.LEFT, Canvas.LABEL, Canvas.TEXT);
        canvas.text(plot.note(), x, y - 18, Canvas.Anchor.LEFT, Canvas.SMALL, Canvas.ACCENT);
        double highest = 0;
        for (double count : plot.counts()) {
            highest = Math.max(highest, count);
        }
        double top = highest > 0 ? 1.08 * highest : 1;
        double bottom = y + PLOT_HEIGHT;
        int n = plot.counts().size();
        Path2D outline = new Path2D.Double();
        outline.moveTo(x, bottom);
        for (int i = 0; i < n; i++) {
            double height = bottom - plot.counts().get(i) / top * PLOT_HEIGHT;
            outline.lineTo(x + (double) i * PLOT_WIDTH / n, height);
            outline.lineTo(x + (i + 1.0) * PLOT_WIDTH / n, height);
        }
        outline.lineTo(x + PLOT_WIDTH, bottom);
        canvas.fill(outline, FILL);
        canvas.outline(outline, new BasicStroke(1.4f), EDGE);
        Double mark = plot.mark();
        if (mark != null) {
            double at = x + (mark - plot.low()) / (plot.step() * n) * PLOT_WIDTH;
            if (at >= x && at <= x + PLOT_WIDTH) {
                canvas.line(at, y, at, bottom, 1.5, Canvas.ACCENT);
            }
        }
        canvas.frame(x, y, PLOT_WIDTH, PLOT_HEIGHT, Canvas.FRAME);
        double high = plot.low() + plot.step() * n;
        for (double tick : RoundScale.ticks(plot.low(), high, 4)) {
            double at = x + (tick - plot.low()) / (high - plot.low()) * PLOT_WIDTH;
            canvas.line(at, bottom, at, bottom + 6, 1.5, Canvas.FRAME);
            canvas.text(RoundScale.text(tick), at, bottom + 22, Canvas.Anchor.MIDDLE, Canvas.SMALL, Canvas.QUIET);
        }
        for (double tick : RoundScale.ticks(0, top, 4)) {
            double at = bottom - tick / top * PLOT_HEIGHT;
            canvas.line(x - 6, at, x, at, 1.5, Canvas.FRAME);
            canvas.text(RoundScale.text(tick), x - 12, at, Canvas.Anchor.RIGHT, Canvas.SMALL, Canvas.QUIET);
        }
        canvas.text(
                plot.horizontal(), x + 0.5 * PLOT_WIDTH, bottom + 50, Canvas.Anchor.MIDDLE, Canvas.SMALL, Canvas.QUIET);
    }
}
