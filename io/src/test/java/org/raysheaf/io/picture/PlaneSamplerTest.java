package org.raysheaf.io.picture;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

class PlaneSamplerTest {
    private static final Grid UPRIGHT = new Grid(4, 3, 5, 1, 1, 2, Pose.shift(new Vector3(1, 2, 3)));

    /** float32 at values up to 100. */
    private static final float ROUNDING = 1e-5f;

    private static double ramp(Vector3 p) {
        return 3 * p.x() - 2 * p.y() + 0.5 * p.z();
    }

    private static Image ramp(Grid grid) {
        Image image = new Image(grid);
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    image.values()[grid.index(x, y, z)] = (float) ramp(grid.centre(x, y, z));
                }
            }
        }
        return image;
    }

    @Test
    void showsEachVoxelOfAnUprightGridInItsPlace() {
        Image image = ramp(UPRIGHT);
        Panel panel = Panel.of(View.ALONG_Z, Extent.of(UPRIGHT), 0, 0, 1);

        float[] values = new PlaneSampler(image).plane(panel, UPRIGHT.centre(0, 0, 1));

        assertThat(panel.width()).isEqualTo(4);
        assertThat(panel.height()).isEqualTo(3);
        for (int column = 0; column < 4; column++) {
            for (int row = 0; row < 3; row++) {
                assertThat(values[row * 4 + column]).isEqualTo(image.at(column, 2 - row, 1), within(ROUNDING));
            }
        }
    }

    @Test
    void interpolatesLinearlyInTheWorldWhateverTheGridsPose() {
        Grid turned = new Grid(9, 9, 9, 1, 1.2, 0.8, Pose.rotation(new Vector3(1, 2, 3), 0.7));
        Extent middle = Extent.ofPoint(new Vector3(-2, -2, -2)).with(new Vector3(2, 2, 2));

        for (View view : View.values()) {
            Panel panel = Panel.of(view, middle, 0, 0, 5);
            float[] values = new PlaneSampler(ramp(turned)).plane(panel, new Vector3(0.3, -0.4, 0.5));
            for (int i = 0; i < values.length; i++) {
                int row = i / 20;
                Vector3 at = view.right()
                        .times(-2 + (i % 20 + 0.5) / 5)
                        .plus(view.up().times(2 - (row + 0.5) / 5))
                        .plus(view.through().times(new Vector3(0.3, -0.4, 0.5).dot(view.through())));
                assertThat(values[i]).isEqualTo((float) ramp(at), within(1e-4f));
            }
        }
    }

    @Test
    void hasNoValuesOutsideTheGrid() {
        Panel panel = Panel.of(View.ALONG_Y, Extent.of(UPRIGHT), 0, 0, 3);

        assertThat(new PlaneSampler(ramp(UPRIGHT)).plane(panel, new Vector3(0, 99, 0)))
                .containsOnly(Float.NaN);
        assertThat(new PlaneSampler(ramp(UPRIGHT)).plane(panel, UPRIGHT.centre(0, -0.5, 0)))
                .doesNotContain(Float.NaN);
    }

    @Test
    void findsTheLargestVoxelAlongTheLineOfSight() {
        Image image = Image.filled(UPRIGHT, -5);
        image.values()[UPRIGHT.index(1, 2, 3)] = 7;
        Panel panel = Panel.of(View.ALONG_Y, Extent.of(UPRIGHT), 0, 0, 1);

        float[] values = new PlaneSampler(image).maximum(panel);

        // z runs to the right with two pixels per voxel, x upwards.
        assertThat(panel.width()).isEqualTo(10);
        assertThat(values[2 * 10 + 6]).isEqualTo(0.75f * 7 + 0.25f * -5, within(ROUNDING));
        assertThat(values[0]).isEqualTo(-5);
    }
}
