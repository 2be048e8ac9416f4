package org.raysheaf.io.picture;

import java.awt.geom.Path2D;
import java.awt.image.BufferedImage;
import java.io.IOException;
import java.nio.file.Path;
import java.util.Arrays;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;

/**
 * A volume at a glance: the three planes through a point along the world's axes, and the largest value along y. All four panels have one
 * scale in mm and one scale of colours, which the picture states. Small marks at the edges show where the other planes cut.
 *
 * <p>Values are interpolated linearly between voxel centres, also where the grid is turned against the axes. Safe for use by several
 * threads on different files.
 */
public final class SlicePicture {
    /** Side of the square that the four panels fill between them (pixels). */
    private static final int PANELS = 1120;

    private static final int LEFT = 60;
    private static final int TOP = 150;
    private static final int GAP_X = 76;
    private static final int GAP_Y = 86;
    private static final int BAR_GAP = 60;
    private static final int RIGHT = 150;
    private static final int BOTTOM = 130;
    private static final int MARK = 9;

    private final Canvas canvas;
    private final Image image;
    private final Vector3 point;
    private final ValueRange range;
    private final PlaneSampler sampler;

    private SlicePicture(Canvas canvas, Image image, Vector3 point, ValueRange range) {
        this.canvas = canvas;
        this.image = image;
        this.point = point;
        this.range = range;
        this.sampler = new PlaneSampler(image);
    }

    /**
     * Draws and writes the picture.
     *
     * @param image the values, all finite; they may be negative, or all the same
     * @param unit the unit of the values, for example {@code kBq/mL}
     * @param point where the three planes meet (mm); a plane that misses the grid stays empty
     * @param title what the picture shows, one line
     * @param file the PNG file to make
     * @param replace whether an existing file may be overwritten
     * @throws IllegalArgumentException if a value is not finite
     * @throws IOException if the file exists and may not be overwritten, if Java finds no font, or if writing fails
     */
    public static void write(Image image, String unit, Vector3 point, String title, Path file, boolean replace)
            throws IOException {
        draw(image, unit, point, title).write(file, replace);
    }

    static Canvas draw(Image image, String unit, Vector3 point, String title) throws IOException {
        ValueRange range = ValueRange.of(image);
        Extent extent = Extent.of(image.grid());
        Vector3 size = extent.size();
        double firstColumn = Math.max(size.x(), size.z());
        double firstRow = size.y();
        double scale = PANELS / Math.max(firstColumn + size.z(), firstRow + size.x());
        int left = Panel.pixels(firstColumn, scale);
        int secondX = LEFT + left + GAP_X;
        int secondY = TOP + Panel.pixels(firstRow, scale) + GAP_Y;
        int barX = secondX + Panel.pixels(size.z(), scale) + BAR_GAP;
        int end = secondY + Panel.pixels(size.x(), scale);
        Canvas canvas = new Canvas(Math.max(barX + RIGHT, 900), end + BOTTOM);
        SlicePicture picture = new SlicePicture(canvas, image, point, range);

        int firstX = LEFT + (left - Panel.pixels(size.x(), scale)) / 2;
        Panel alongZ = Panel.of(View.ALONG_Z, extent, firstX, TOP, scale);
        Panel alongX = Panel.of(View.ALONG_X, extent, secondX, TOP, scale);
        Panel alongY = Panel.of(View.ALONG_Y, extent, secondX, secondY, scale);
        Panel largest =
                Panel.of(View.ALONG_Y, extent, LEFT + (left - Panel.pixels(size.z(), scale)) / 2, secondY, scale);
        picture.plane(alongZ, point.z());
        picture.plane(alongX, point.x());
        picture.plane(alongY, point.y());
        picture.values(largest, picture.sampler.maximum(largest), "largest along y");
        canvas.scaleBar(alongZ.x() + 8, alongZ.y() + alongZ.height() - 8, 0.3 * alongZ.width(), scale);
        ColourBar.draw(canvas, range, unit, barX, TOP, end - TOP);
        picture.words(title, unit, end);
        return canvas;
    }

    private void plane(Panel panel, double depth) {
        values(panel, sampler.plane(panel, point), panel.view().throughName() + " = " + RoundScale.text(depth) + " mm");
        double x = panel.xOf(point);
        double y = panel.yOf(point);
        if (x >= panel.x() && x <= panel.x() + panel.width()) {
            mark(x, panel.y(), 0, -MARK);
            mark(x, panel.y() + panel.height(), 0, MARK);
        }
        if (y >= panel.y() && y <= panel.y() + panel.height()) {
            mark(panel.x(), y, -MARK, 0);
            mark(panel.x() + panel.width(), y, MARK, 0);
        }
    }

    /** A small triangle outside an edge, its tip on the edge. */
    private void mark(double x, double y, double outX, double outY) {
        Path2D triangle = new Path2D.Double();
        triangle.moveTo(x, y);
        triangle.lineTo(x + outX + 0.6 * outY, y + outY + 0.6 * outX);
        triangle.lineTo(x + outX - 0.6 * outY, y + outY - 0.6 * outX);
        triangle.closePath();
        canvas.fill(triangle, Canvas.ACCENT);
    }

    private void values(Panel panel, float[] values, String caption) {
        BufferedImage part = new BufferedImage(panel.width(), panel.height(), BufferedImage.TYPE_INT_RGB);
        int outside = Canvas.SHEET.getRGB();
        for (int i = 0; i < values.length; i++) {
            int rgb = Float.isNaN(values[i]) ? outside : ColourMap.STANDARD.rgb(range.fraction(values[i]));
            part.setRGB(i % panel.width(), i / panel.width(), rgb);
        }
        canvas.picture(part, panel.x(), panel.y());
        canvas.frame(panel.x(), panel.y(), panel.width(), panel.height(), Canvas.FRAME);
        panel.drawAxes(canvas);
        canvas.text(caption, panel.x(), panel.y() - 22, Canvas.Anchor.LEFT, Canvas.LABEL, Canvas.TEXT);
    }

    private void words(String title, String unit, int end) {
        Grid grid = image.grid();
        canvas.title(title, LEFT, 46);
        quiet("planes through (%s, %s, %s) mm", 86, point.x(), point.y(), point.z());
        quiet("smallest %s, largest %s " + unit.replace("%", "%%"), end + 62, range.smallest(), range.largest());
        quiet(
                "%s × %s × %s voxels of %s × %s × %s mm, drawn by linear interpolation between their centres",
                end + 92, grid.nx(), grid.ny(), grid.nz(), grid.spacingXMm(), grid.spacingYMm(), grid.spacingZMm());
    }

    private void quiet(String form, double y, double... numbers) {
        Object[] texts = Arrays.stream(numbers).mapToObj(RoundScale::text).toArray();
        canvas.text(form.formatted(texts), LEFT, y, Canvas.Anchor.LEFT, Canvas.SMALL, Canvas.QUIET);
    }
}
