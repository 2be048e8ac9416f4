package org.raysheaf.io.picture;

/** The column of colours that tells values from colours. */
final class ColourBar {
    private static final int WIDTH = 26;
    private static final int TICK = 8;
    private static final int WANTED_TICKS = 6;

    private ColourBar() {}

    static void draw(Canvas canvas, ValueRange range, String unit, int x, int y, int height) {
        for (int row = 0; row < height; row++) {
            int rgb = ColourMap.STANDARD.rgb(1 - (row + 0.5) / height);
            for (int column = 0; column < WIDTH; column++) {
                canvas.image().setRGB(x + column, y + row, rgb);
            }
        }
        canvas.frame(x, y, WIDTH, height, Canvas.FRAME);
        for (double tick : RoundScale.ticks(range.low(), range.high(), WANTED_TICKS)) {
            double at = y + height * (1 - range.fraction(tick));
            canvas.line(x + WIDTH, at, x + WIDTH + TICK, at, 1.5, Canvas.QUIET);
            canvas.text(RoundScale.text(tick), x + WIDTH + 14, at, Canvas.Anchor.LEFT, Canvas.SMALL, Canvas.TEXT);
        }
        canvas.text(unit, x, y - 22, Canvas.Anchor.LEFT, Canvas.LABEL, Canvas.TEXT);
    }
}
