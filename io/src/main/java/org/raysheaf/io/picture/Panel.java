package org.raysheaf.io.picture;

import java.awt.geom.Rectangle2D;
import org.raysheaf.geometry.frame.Vector3;

/**
 * A rectangle of the sheet that shows a part of the world.
 *
 * @param view where it looks
 * @param extent the part of the world that it shows
 * @param x left edge (pixels)
 * @param y upper edge (pixels)
 * @param width its width (pixels)
 * @param height its height (pixels)
 * @param pixelsPerMm its scale
 */
record Panel(View view, Extent extent, int x, int y, int width, int height, double pixelsPerMm) {
    /** From the lower edge to the names of the axis below it (pixels). */
    private static final int AXIS_GAP = 18;

    static Panel of(View view, Extent extent, int x, int y, double pixelsPerMm) {
        int width = pixels(extent.size().dot(view.right()), pixelsPerMm);
        int height = pixels(extent.size().dot(view.up()), pixelsPerMm);
        return new Panel(view, extent, x, y, width, height, pixelsPerMm);
    }

    static int pixels(double mm, double pixelsPerMm) {
        return Math.max(1, (int) Math.round(mm * pixelsPerMm));
    }

    double xOf(Vector3 point) {
        return x + point.minus(extent.low()).dot(view.right()) * pixelsPerMm;
    }

    double yOf(Vector3 point) {
        return y + extent.high().minus(point).dot(view.up()) * pixelsPerMm;
    }

    Rectangle2D area() {
        return new Rectangle2D.Double(x, y, width, height);
    }

    /** Names the ends of the axes, outside the lower and the left edge, where nothing else is written. */
    void drawAxes(Canvas canvas) {
        double below = y + height + AXIS_GAP;
        sign(canvas, "−" + view.rightName(), x + 10, below, Canvas.Anchor.MIDDLE);
        sign(canvas, "+" + view.rightName(), x + width - 10, below, Canvas.Anchor.MIDDLE);
        double beside = x - 10;
        sign(canvas, "+" + view.upName(), beside, y + 8, Canvas.Anchor.RIGHT);
        sign(canvas, "−" + view.upName(), beside, y + height - 8, Canvas.Anchor.RIGHT);
    }

    private static void sign(Canvas canvas, String text, double x, double y, Canvas.Anchor anchor) {
        canvas.text(text, x, y, anchor, Canvas.SMALL, Canvas.QUIET);
    }
}
