package org.raysheaf.io.picture;

import java.awt.BasicStroke;
import java.awt.Color;
import java.awt.Font;
import java.awt.Graphics2D;
import java.awt.RenderingHints;
import java.awt.Shape;
import java.awt.geom.Line2D;
import java.awt.geom.Rectangle2D;
import java.awt.geom.RoundRectangle2D;
import java.awt.image.BufferedImage;
import java.io.IOException;
import java.nio.file.Path;
import javax.imageio.ImageIO;
import org.jspecify.annotations.Nullable;
import org.raysheaf.io.file.AtomicFile;

/** A sheet to draw on, in the look that all our pictures share. Positions are pixels from the upper left corner. One thread. */
final class Canvas {
    /** The sheet: a dark neutral grey, so that neither black nor white data drown in it. */
    static final Color SHEET = new Color(0x1b1e23);

    static final Color FRAME = new Color(0x434a54);
    static final Color TEXT = new Color(0xe6e8eb);
    static final Color QUIET = new Color(0x9aa2ad);
    static final Color ACCENT = new Color(0xf0b24d);

    private static final Color PLATE = new Color(0x1b, 0x1e, 0x23, 200);

    static final Font TITLE = new Font(Font.SANS_SERIF, Font.BOLD, 30);
    static final Font LABEL = new Font(Font.SANS_SERIF, Font.PLAIN, 21);
    static final Font SMALL = new Font(Font.SANS_SERIF, Font.PLAIN, 18);

    /** Which part of a text stands at the given place. */
    enum Anchor {
        LEFT,
        MIDDLE,
        RIGHT
    }

    private final BufferedImage image;
    private final Graphics2D graphics;

    /**
     * Makes an empty sheet.
     *
     * @throws IOException if Java finds no font to write with
     */
    Canvas(int width, int height) throws IOException {
        image = new BufferedImage(width, height, BufferedImage.TYPE_INT_RGB);
        graphics = image.createGraphics();
        graphics.setRenderingHint(RenderingHints.KEY_ANTIALIASING, RenderingHints.VALUE_ANTIALIAS_ON);
        graphics.setRenderingHint(RenderingHints.KEY_TEXT_ANTIALIASING, RenderingHints.VALUE_TEXT_ANTIALIAS_ON);
        graphics.setRenderingHint(RenderingHints.KEY_FRACTIONALMETRICS, RenderingHints.VALUE_FRACTIONALMETRICS_ON);
        graphics.setRenderingHint(RenderingHints.KEY_STROKE_CONTROL, RenderingHints.VALUE_STROKE_PURE);
        graphics.setColor(SHEET);
        graphics.fillRect(0, 0, width, height);
        try {
            width("0", LABEL);
        } catch (RuntimeException | LinkageError | InternalError e) {
            // On a bare system Java meets the lack of fonts with errors of several kinds.
            throw new IOException("a picture needs a font: found none; install one, for example DejaVu Sans", e);
        }
    }

    BufferedImage image() {
        return image;
    }

    double width(String text, Font font) {
        return graphics.getFontMetrics(font).getStringBounds(text, graphics).getWidth();
    }

    /** Writes a text whose capitals are centred on the height y. */
    void text(String text, double x, double y, Anchor anchor, Font font, Color colour) {
        double width = width(text, font);
        double left = anchor == Anchor.LEFT ? x : anchor == Anchor.MIDDLE ? x - 0.5 * width : x - width;
        graphics.setFont(font);
        graphics.setColor(colour);
        graphics.drawString(text, (float) left, (float) (y + 0.36 * font.getSize2D()));
    }

    void line(double x1, double y1, double x2, double y2, double width, Color colour) {
        outline(new Line2D.Double(x1, y1, x2, y2), new BasicStroke((float) width), colour);
    }

    void frame(double x, double y, double width, double height, Color colour) {
        outline(new Rectangle2D.Double(x, y, width, height), new BasicStroke(1.5f), colour);
    }

    void outline(Shape shape, BasicStroke stroke, Color colour) {
        graphics.setStroke(stroke);
        graphics.setColor(colour);
        graphics.draw(shape);
    }

    void fill(Shape shape, Color colour) {
        graphics.setColor(colour);
        graphics.fill(shape);
    }

    void clip(@Nullable Shape area) {
        graphics.setClip(area);
    }

    void picture(BufferedImage part, int x, int y) {
        graphics.drawImage(part, x, y, null);
    }

    /** The title in the upper left corner, cut if it is too long for the sheet. */
    void title(String text, double x, double y) {
        double room = image.getWidth() - 2 * x;
        String shown = text;
        while (width(shown, TITLE) > room && shown.length() > 1) {
            shown = shown.substring(0, shown.length() - 2) + "…";
        }
        text(shown, x, y, Anchor.LEFT, TITLE, TEXT);
    }

    /** A bar of a round length, at most as long as given, with its length above it, on a plate that keeps it legible on any ground. */
    void scaleBar(double x, double y, double longest, double pixelsPerMm) {
        double lengthMm = RoundScale.atMost(longest / pixelsPerMm);
        double length = lengthMm * pixelsPerMm;
        String label = RoundScale.text(lengthMm) + " mm";
        double plate = Math.max(length, width(label, SMALL)) + 24;
        double middle = x + 0.5 * plate;
        fill(new RoundRectangle2D.Double(x, y - 52, plate, 52, 10, 10), PLATE);
        fill(new Rectangle2D.Double(middle - 0.5 * length, y - 16, length, 5), TEXT);
        text(label, middle, y - 34, Anchor.MIDDLE, SMALL, TEXT);
    }

    /** Writes the sheet as a PNG file, completely or not at all. */
    void write(Path file, boolean replace) throws IOException {
        AtomicFile.write(file, replace, temporary -> {
            if (!ImageIO.write(image, "png", temporary.toFile())) {
                throw new IOException(file + ": expected a PNG writer in this Java, found none");
            }
        });
    }
}
