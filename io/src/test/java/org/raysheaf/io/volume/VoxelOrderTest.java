package org.raysheaf.io.volume;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

class VoxelOrderTest {
    private static final int[] COUNTS = {4, 3, 2};
    private static final Vector3 FIRST = new Vector3(7, -3, 2);

    /** Rounding of double precision at a few mm. */
    private static final double ROUNDING = 1e-12;

    private static VoxelOrder order(Vector3 i, Vector3 j, Vector3 k) {
        VoxelOrder order = VoxelOrder.of(COUNTS, new VoxelAffine(i, j, k, FIRST));
        assertEveryVoxelStaysInPlace(order, i, j, k);
        return order;
    }

    private static void assertEveryVoxelStaysInPlace(VoxelOrder order, Vector3 i, Vector3 j, Vector3 k) {
        Grid grid = order.grid();
        Vector3[] places = new Vector3[grid.voxels()];
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    places[grid.index(x, y, z)] = grid.centre(x, y, z);
                }
            }
        }
        for (int a = 0; a < COUNTS[0]; a++) {
            for (int b = 0; b < COUNTS[1]; b++) {
                for (int c = 0; c < COUNTS[2]; c++) {
                    Vector3 expected = FIRST.plus(i.times(a)).plus(j.times(b)).plus(k.times(c));
                    int index = order.first() + a * order.stepI() + b * order.stepJ() + c * order.stepK();
                    assertThat(places[index].minus(expected).norm()).isCloseTo(0, within(ROUNDING));
                }
            }
        }
    }

    @Test
    void leavesRightHandedAxesInTheirOrder() {
        VoxelOrder order = order(Vector3.Y.times(2), Vector3.Z.times(3), Vector3.X);

        assertThat(order.grid().nx()).isEqualTo(4);
        assertThat(order.grid().spacingXMm()).isEqualTo(2);
        assertThat(order.grid().pose().u()).isEqualTo(Vector3.Y);
    }

    @Test
    void turnsAMirroredAxisRound() {
        VoxelOrder order = order(Vector3.X.times(-2), Vector3.Y, Vector3.Z);

        assertThat(order.grid().pose().u()).isEqualTo(Vector3.X);
        assertThat(order.grid().centre(0, 0, 0)).isEqualTo(new Vector3(1, -3, 2));
        assertThat(order.stepI()).isNegative();
    }

    @Test
    void exchangesAxesThatWereExchanged() {
        VoxelOrder order = order(Vector3.Y.times(2), Vector3.X, Vector3.Z);

        assertThat(order.grid()).isEqualTo(new Grid(3, 4, 2, 1, 2, 1, Pose.shift(new Vector3(8, 0, 2.5))));
    }

    @Test
    void keepsEveryVoxelInPlaceForObliqueMirroredAxes() {
        Pose pose = Pose.rotation(new Vector3(1, 2, -0.5), 0.6);

        order(pose.u(), pose.v().times(1.5), pose.w().times(-2));
        order(pose.v(), pose.u(), pose.w().times(2));
        order(pose.u().times(-1), pose.v().times(-1), pose.w().times(-1));
    }

    @Test
    void refusesSkewedAxesAndBadSpacings() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> order(Vector3.X, new Vector3(0.1, 1, 0), Vector3.Z))
                .withMessage("expected voxel axes at right angles, found 84.289 degrees; resample the volume onto a"
                        + " box-shaped grid");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> order(Vector3.X, Vector3.ZERO, Vector3.Z))
                .withMessage("expected a finite voxel spacing > 0, found 0.0");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> order(Vector3.X, new Vector3(0, Double.NaN, 0), Vector3.Z))
                .withMessage("expected a finite voxel spacing > 0, found NaN");
    }
}
