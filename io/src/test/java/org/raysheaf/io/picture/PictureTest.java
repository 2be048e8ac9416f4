package org.raysheaf.io.picture;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIOException;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import java.awt.image.BufferedImage;
import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import javax.imageio.ImageIO;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

class PictureTest {
    private static final Grid GRID = Grid.centred(12, 12, 16, 1);

    @TempDir
    private Path folder;

    private static int count(BufferedImage picture, int rgb) {
        int count = 0;
        for (int y = 0; y < picture.getHeight(); y++) {
            for (int x = 0; x < picture.getWidth(); x++) {
                count += (picture.getRGB(x, y) & 0xffffff) == rgb ? 1 : 0;
            }
        }
        return count;
    }

    private static BufferedImage slices(Image image) throws IOException {
        return SlicePicture.draw(image, "kBq/mL", Vector3.ZERO, "A title").image();
    }

    @Test
    void writesAPngThatShowsTheVolumeInAllFourPanels() throws IOException {
        Path file = folder.resolve("slices.png");

        SlicePicture.write(Image.filled(GRID, 3), "kBq/mL", Vector3.ZERO, "A title", file, false);

        BufferedImage picture = ImageIO.read(file.toFile());
        assertThat(picture.getWidth()).isBetween(1000, 1800);
        // Panels of 480 × 480, 640 × 480, 640 × 480 and 640 × 480 pixels at 40 pixels per mm or more, all at the top of
        // the scale.
        int panels = 12 * 12 + 3 * 16 * 12;
        assertThat(count(picture, ColourMap.STANDARD.rgb(1))).isGreaterThan(panels * 30 * 30);
    }

    @Test
    void doesNotOverwriteUnlessAllowed() throws IOException {
        Path file = folder.resolve("slices.png");
        SlicePicture.write(new Image(GRID), "1/mm", Vector3.ZERO, "", file, false);

        assertThatIOException()
                .isThrownBy(() -> SlicePicture.write(new Image(GRID), "1/mm", Vector3.ZERO, "", file, false))
                .withMessage(file + ": exists already; choose another name, or allow it with --replace");
    }

    @Test
    void drawsAnEmptyVolumeInTheFirstColour() throws IOException {
        BufferedImage picture = slices(new Image(GRID));

        assertThat(count(picture, ColourMap.STANDARD.rgb(0))).isGreaterThan(300_000);
        assertThat(count(picture, ColourMap.STANDARD.rgb(1))).isLessThan(1000);
    }

    @Test
    void drawsNegativeValuesAndSingleVoxelsAndFarPoints() throws IOException {
        assertThat(count(slices(Image.filled(GRID, -2)), ColourMap.STANDARD.rgb(0)))
                .isGreaterThan(300_000);
        assertThat(count(slices(Image.filled(Grid.centred(1, 1, 1, 0.1), 1e-30f)), ColourMap.STANDARD.rgb(1)))
                .isGreaterThan(300_000);
        assertThat(slices(Image.filled(Grid.centred(1, 1, 2000, 1), 1)).getWidth())
                .isLessThan(2000);
        BufferedImage missed = SlicePicture.draw(Image.filled(GRID, 1), "1", new Vector3(0, 0, 1e6), "t".repeat(500))
                .image();
        assertThat(missed.getWidth()).isLessThan(2000);
    }

    @Test
    void refusesValuesThatAreNotFinite() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> slices(Image.filled(GRID, Float.NaN)))
                .withMessage("a picture needs finite values: found NaN");
    }

    private static BoxOutline box(Pose pose, int colour) {
        List<Vector3> corners = new ArrayList<>();
        for (int depth = 0; depth <= 13; depth += 13) {
            for (int i = 0; i < 4; i++) {
                corners.add(pose.apply(new Vector3(depth, i == 0 || i == 3 ? -10 : 10, i < 2 ? -10 : 10)));
            }
        }
        return new BoxOutline(corners, colour);
    }

    @Test
    void drawsBoxesAndFieldOfViewInThreeViews() throws IOException {
        Path file = folder.resolve("detector.png");

        DetectorPicture.write(ring(7), 29, 10, "A ring", List.of("12 blocks"), file, false);

        BufferedImage ring = ImageIO.read(file.toFile());
        BufferedImage plain = DetectorPicture.draw(ring(0), 29, 10, "A ring", List.of("12 blocks"))
                .image();
        BufferedImage empty =
                DetectorPicture.draw(List.of(), 29, 10, "", List.of()).image();
        assertThat(ring.getWidth()).isBetween(900, 1800);
        // Views fill about 0.7 of the sheet; blocks cover a quarter of the first and nearly all of the others.
        assertThat(ground(empty)).isGreaterThan(0.7);
        assertThat(ground(ring)).isBetween(0.3, 0.6);
        // The block that stands out is teal: green well above red.
        assertThat(tealPixels(ring)).isGreaterThan(5000);
        assertThat(tealPixels(plain)).isZero();
    }

    private static List<BoxOutline> ring(int colour) {
        List<BoxOutline> boxes = new ArrayList<>();
        for (int i = 0; i < 12; i++) {
            Pose place = Pose.rotation(Vector3.Z, i * Math.PI / 6).after(Pose.shift(Vector3.X.times(42)));
            boxes.add(box(place, i == 3 ? colour : 0));
        }
        return boxes;
    }

    private static double ground(BufferedImage picture) {
        return count(picture, 0x121418) / (0.7 * picture.getWidth() * picture.getHeight());
    }

    private static int tealPixels(BufferedImage picture) {
        int count = 0;
        for (int y = 0; y < picture.getHeight(); y++) {
            for (int x = 0; x < picture.getWidth(); x++) {
                int rgb = picture.getRGB(x, y);
                count += (rgb >> 8 & 0xff) > (rgb >> 16 & 0xff) + 60 ? 1 : 0;
            }
        }
        return count;
    }

    @Test
    void findsTheOutsideOfABoxWhateverTheOrderOfItsCorners() {
        BoxOutline box = box(Pose.IDENTITY, 0);
        List<Vector3> mirrored = new ArrayList<>(box.corners().subList(4, 8));
        mirrored.addAll(box.corners().subList(0, 4));

        for (BoxOutline any : List.of(box, new BoxOutline(mirrored, 0))) {
            Vector3 middle = new Vector3(6.5, 0, 0);
            assertThat(BoxFace.of(any))
                    .hasSize(6)
                    .allSatisfy(
                            face -> assertThat(face.outwards().dot(face.middle().minus(middle)))
                                    .isPositive());
        }
    }

    @Test
    void refusesBoxesAndSizesThatCannotBe() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> new BoxOutline(List.of(Vector3.X), 0))
                .withMessage("a box needs 8 corners: found 1");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> new BoxOutline(box(Pose.IDENTITY, 0).corners(), -1))
                .withMessage("a colour needs a number >= 0: found -1");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> DetectorPicture.draw(List.of(), 0, Double.NaN, "", List.of()))
                .withMessage(
                        "detector picture: radius_mm: expected a number > 0, found 0; half_length_mm: expected a number"
                                + " > 0, found NaN");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> DetectorPicture.draw(
                        List.of(box(Pose.shift(new Vector3(Double.NaN, 0, 0)), 0)), 1, 1, "", List.of()))
                .withMessageStartingWith("a box needs finite corners: found ");
    }
}
