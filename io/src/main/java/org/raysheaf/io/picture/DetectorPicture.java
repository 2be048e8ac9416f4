package org.raysheaf.io.picture;

import java.awt.BasicStroke;
import java.awt.Color;
import java.awt.Shape;
import java.awt.geom.Ellipse2D;
import java.awt.geom.Line2D;
import java.awt.geom.Rectangle2D;
import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Problems;

/**
 * A detector in three views of one scale: along z, along x and along y, with the cylinder of the field of view dashed. Boxes are drawn
 * half transparent, the farther ones first. Safe for use by several threads on different files.
 */
public final class DetectorPicture {
    /** Room for the three views side by side (pixels). */
    private static final double WIDTH = 1400;

    private static final double HEIGHT = 800;
    private static final int NARROWEST = 900;
    private static final int MARGIN = 60;
    private static final int TOP = 130;
    private static final int GAP = 76;
    private static final int LEGEND = 100;
    private static final int REMARK = 30;

    /** Colours of boxes by number: the ordinary one, then five that stand out from it and from each other. */
    private static final Color[] COLOURS = {
        new Color(0x6f8fb3),
        new Color(0xf0b24d),
        new Color(0x45b5a3),
        new Color(0xd9707e),
        new Color(0xa58bd6),
        new Color(0x9bbf5a)
    };

    private static final Color GROUND = new Color(0x121418);
    private static final BasicStroke EDGE = new BasicStroke(1.4f, BasicStroke.CAP_ROUND, BasicStroke.JOIN_ROUND);

    /** Where the light comes from, in the frame right, up, towards the eye. */
    private static final Vector3 LIGHT = new Vector3(-0.35, 0.5, 0.8).unit();

    private final Canvas canvas;
    private final List<BoxFace> faces;
    private final double radiusMm;
    private final double halfLengthMm;

    private DetectorPicture(Canvas canvas, List<BoxFace> faces, double radiusMm, double halfLengthMm) {
        this.canvas = canvas;
        this.faces = faces;
        this.radiusMm = radiusMm;
        this.halfLengthMm = halfLengthMm;
    }

    /**
     * Draws and writes the picture.
     *
     * @param boxes the boxes of the detector; may be none
     * @param radiusMm radius of the field of view (mm), greater than 0
     * @param halfLengthMm half the length of the field of view along z (mm), greater than 0
     * @param title what the picture shows, one line
     * @param remarks lines to write beside the views, for example counts and sizes; may be none
     * @param file the PNG file to make
     * @param replace whether an existing file may be overwritten
     * @throws IllegalArgumentException if a size is out of range or a corner is not finite
     * @throws IOException if the file exists and may not be overwritten, if Java finds no font, or if writing fails
     */
    public static void write(
            List<BoxOutline> boxes,
            double radiusMm,
            double halfLengthMm,
            String title,
            List<String> remarks,
            Path file,
            boolean replace)
            throws IOException {
        draw(boxes, radiusMm, halfLengthMm, title, remarks).write(file, replace);
    }

    static Canvas draw(List<BoxOutline> boxes, double radiusMm, double halfLengthMm, String title, List<String> remarks)
            throws IOException {
        Extent extent = extent(boxes, radiusMm, halfLengthMm);
        Vector3 size = extent.size();
        double scale = Math.min(WIDTH / (size.x() + 2 * size.z()), HEIGHT / Math.max(size.x(), size.y()));
        Panel alongZ = Panel.of(View.ALONG_Z, extent, MARGIN, TOP, scale);
        Panel alongX = Panel.of(View.ALONG_X, extent, alongZ.x() + alongZ.width() + GAP, TOP, scale);
        Panel alongY = Panel.of(View.ALONG_Y, extent, alongX.x() + alongX.width() + GAP, TOP, scale);
        int end = TOP + Math.max(alongX.height(), alongY.height());
        int width = Math.max(alongY.x() + alongY.width() + MARGIN, NARROWEST);
        Canvas canvas = new Canvas(width, end + LEGEND + REMARK * remarks.size());
        List<BoxFace> faces = new ArrayList<>();
        boxes.forEach(box -> faces.addAll(BoxFace.of(box)));
        DetectorPicture picture = new DetectorPicture(canvas, faces, radiusMm, halfLengthMm);
        picture.view(alongZ);
        picture.view(alongX);
        picture.view(alongY);
        canvas.title(title, MARGIN, 46);
        canvas.scaleBar(alongZ.x() + 8, TOP + alongZ.height() - 8, 0.3 * alongZ.width(), scale);
        picture.legend(remarks, end + 66);
        return canvas;
    }

    private static Extent extent(List<BoxOutline> boxes, double radiusMm, double halfLengthMm) {
        new Problems("detector picture")
                .above("radius_mm", radiusMm, 0)
                .above("half_length_mm", halfLengthMm, 0)
                .orThrow();
        Vector3 fieldOfView = new Vector3(radiusMm, radiusMm, halfLengthMm);
        Extent extent = new Extent(fieldOfView.times(-1), fieldOfView);
        for (BoxOutline box : boxes) {
            for (Vector3 corner : box.corners()) {
                if (!Double.isFinite(corner.norm())) {
                    throw new IllegalArgumentException("a box needs finite corners: found " + corner);
                }
                extent = extent.with(corner);
            }
        }
        Vector3 size = extent.size();
        return extent.grownBy(0.03 * Math.max(size.x(), Math.max(size.y(), size.z())));
    }

    private void view(Panel panel) {
        canvas.fill(panel.area(), GROUND);
        canvas.clip(panel.area());
        Vector3 towards = panel.view().towards();
        faces.stream()
                .filter(face -> face.outwards().dot(towards) > 1e-9)
                .sorted(Comparator.comparingDouble(face -> face.middle().dot(towards)))
                .forEach(face -> face(face, panel));
        faces.stream().filter(face -> face.colour() > 0).forEach(face -> edges(face, panel));
        fieldOfView(panel);
        canvas.clip(null);
        canvas.frame(panel.x(), panel.y(), panel.width(), panel.height(), Canvas.FRAME);
        panel.drawAxes(canvas);
        String caption = "along " + panel.view().throughName();
        canvas.text(caption, panel.x(), panel.y() - 22, Canvas.Anchor.LEFT, Canvas.LABEL, Canvas.TEXT);
    }

    private void face(BoxFace face, Panel panel) {
        Color base = base(face);
        View view = panel.view();
        Vector3 out = face.outwards();
        Vector3 seen = new Vector3(out.dot(view.right()), out.dot(view.up()), out.dot(view.towards()));
        double light = 0.35 + 0.65 * Math.max(0, seen.dot(LIGHT));
        Shape shape = face.shape(panel);
        canvas.fill(shape, shade(base, light, 150));
        canvas.outline(shape, EDGE, shade(base, 1, 230));
    }

    /** The edges of a box that stands out, drawn over all that may hide it. */
    private void edges(BoxFace face, Panel panel) {
        canvas.outline(face.shape(panel), EDGE, shade(base(face), 1, 200));
    }

    private static Color base(BoxFace face) {
        return COLOURS[face.colour() == 0 ? 0 : 1 + (face.colour() - 1) % (COLOURS.length - 1)];
    }

    private static Color shade(Color base, double light, int opacity) {
        return new Color(
                (int) (base.getRed() * light),
                (int) (base.getGreen() * light),
                (int) (base.getBlue() * light),
                opacity);
    }

    private void fieldOfView(Panel panel) {
        Vector3 corner = new Vector3(radiusMm, radiusMm, halfLengthMm);
        double left = panel.xOf(corner.times(-1));
        double top = panel.yOf(corner);
        double width = panel.xOf(corner) - left;
        double height = panel.yOf(corner.times(-1)) - top;
        Shape outline = panel.view() == View.ALONG_Z
                ? new Ellipse2D.Double(left, top, width, height)
                : new Rectangle2D.Double(left, top, width, height);
        float[] dashes = {9, 6};
        BasicStroke dashed = new BasicStroke(2, BasicStroke.CAP_BUTT, BasicStroke.JOIN_ROUND, 10, dashes, 0);
        canvas.outline(outline, dashed, Canvas.ACCENT);
        double x = panel.xOf(Vector3.ZERO);
        double y = panel.yOf(Vector3.ZERO);
        BasicStroke thin = new BasicStroke(1.5f);
        canvas.outline(new Line2D.Double(x - 8, y, x + 8, y), thin, Canvas.ACCENT);
        canvas.outline(new Line2D.Double(x, y - 8, x, y + 8), thin, Canvas.ACCENT);
    }

    private void legend(List<String> remarks, double top) {
        String fieldOfView = "dashed: field of view, radius " + RoundScale.text(radiusMm) + " mm, length "
                + RoundScale.text(2 * halfLengthMm) + " mm";
        canvas.text(fieldOfView, MARGIN, top, Canvas.Anchor.LEFT, Canvas.SMALL, Canvas.ACCENT);
        double y = top;
        for (String remark : remarks) {
            y += REMARK;
            canvas.text(remark, MARGIN, y, Canvas.Anchor.LEFT, Canvas.SMALL, Canvas.QUIET);
        }
    }
}
