package org.raysheaf.engine;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.concurrent.ForkJoinPool;
import org.ejml.data.DMatrixRMaj;
import org.ejml.dense.row.CommonOps_DDRM;
import org.ejml.dense.row.NormOps_DDRM;
import org.junit.jupiter.api.Test;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.geometry.port.Progress;

/** List-mode MLEM against EM with a dense matrix in double precision: x ← x / s ∘ Aᵀ (1 / A x). */
final class DenseEmTest {
    /** Bar of the issue, for the image as a whole: rounding of single numbers in single precision is 6·10⁻⁸ of each. */
    private static final double AGREEMENT = 1e-6;

    @Test
    void listModeIsEmWithADenseMatrix() throws Exception {
        TinyScan scan = new TinyScan(1500, 3);
        DMatrixRMaj a = new DMatrixRMaj(scan.matrix());
        int voxels = TinyScan.GRID.voxels();
        DMatrixRMaj x = new DMatrixRMaj(voxels, 1);
        CommonOps_DDRM.fill(x, 1);
        DMatrixRMaj s = new DMatrixRMaj(voxels, 1);
        for (int j = 0; j < voxels; j++) {
            s.set(j, 0, scan.sensitivity.values()[j]);
        }
        ForkJoinPool pool = new ForkJoinPool(2);
        EventStore store = scan.storeWithoutBackground(pool);
        assertThat(store.events()).isEqualTo(1500);
        float[] image = new Estimator(store, scan.sensitivity, EstimationSettings.mlem(8), pool)
                .run(PassListener.SILENT, Progress.SILENT)
                .image()
                .values();
        pool.shutdown();
        for (int pass = 0; pass < 8; pass++) {
            DMatrixRMaj q = new DMatrixRMaj(a.numRows, 1);
            CommonOps_DDRM.mult(a, x, q);
            CommonOps_DDRM.divide(1, q, q);
            DMatrixRMaj ratio = new DMatrixRMaj(voxels, 1);
            CommonOps_DDRM.multTransA(a, q, ratio);
            CommonOps_DDRM.elementMult(x, ratio);
            CommonOps_DDRM.elementDiv(x, s);
        }
        DMatrixRMaj difference = new DMatrixRMaj(voxels, 1);
        for (int j = 0; j < voxels; j++) {
            difference.set(j, 0, image[j] - x.get(j, 0));
        }
        assertThat(NormOps_DDRM.normF(difference) / NormOps_DDRM.normF(x)).isLessThan(AGREEMENT);
    }
}
