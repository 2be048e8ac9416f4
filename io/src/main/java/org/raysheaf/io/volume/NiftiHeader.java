package org.raysheaf.io.volume;

import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;
import org.raysheaf.geometry.frame.Grid;

/**
 * The 352 bytes in front of the voxels of a NIfTI-1 file, as this program writes them and in the part of the standard that it reads.
 *
 * <table>
 *   <caption>Fields of the header (offset in bytes; the standard's names; all others are written as 0)</caption>
 *   <tr><th>offset</th><th>type</th><th>field</th><th>written</th></tr>
 *   <tr><td>0</td><td>int32</td><td>sizeof_hdr</td><td>348; tells the byte order</td></tr>
 *   <tr><td>39</td><td>uint8</td><td>dim_info</td><td>0</td></tr>
 *   <tr><td>40</td><td>int16 × 8</td><td>dim</td><td>3, nx, ny, nz, 1, 1, 1, 1; for a series of n volumes 4, nx, ny, nz, n, 1, 1, 1</td></tr>
 *   <tr><td>68</td><td>int16</td><td>intent_code</td><td>0: plain values</td></tr>
 *   <tr><td>70</td><td>int16</td><td>datatype</td><td>16: float32 ({@link NiftiType})</td></tr>
 *   <tr><td>72</td><td>int16</td><td>bitpix</td><td>32</td></tr>
 *   <tr><td>76</td><td>float32 × 8</td><td>pixdim</td><td>1 (right-handed), spacing along x, y, z (mm), 0, 0, 0, 0</td></tr>
 *   <tr><td>108</td><td>float32</td><td>vox_offset</td><td>352: first byte of the voxels</td></tr>
 *   <tr><td>112</td><td>float32</td><td>scl_slope</td><td>1; read: value = slope · stored + inter, unless the slope is 0</td></tr>
 *   <tr><td>116</td><td>float32</td><td>scl_inter</td><td>0</td></tr>
 *   <tr><td>123</td><td>uint8</td><td>xyzt_units</td><td>2: mm; read also 1 (m), 3 (µm) and 0 (taken for mm)</td></tr>
 *   <tr><td>124</td><td>float32</td><td>cal_max</td><td>0: viewers choose</td></tr>
 *   <tr><td>148</td><td>char × 80</td><td>descrip</td><td>{@code Raysheaf, values in} unit</td></tr>
 *   <tr><td>252</td><td>int16</td><td>qform_code</td><td>1: scanner coordinates</td></tr>
 *   <tr><td>254</td><td>int16</td><td>sform_code</td><td>1: scanner coordinates; read first, then qform, then pixdim alone</td></tr>
 *   <tr><td>256</td><td>float32 × 3</td><td>quatern_b, c, d</td><td>rotation of the grid</td></tr>
 *   <tr><td>268</td><td>float32 × 3</td><td>qoffset_x, y, z</td><td>centre of voxel (0, 0, 0) (mm)</td></tr>
 *   <tr><td>280</td><td>float32 × 12</td><td>srow_x, y, z</td><td>the affine map of {@link VoxelAffine}, row by row (mm)</td></tr>
 *   <tr><td>328</td><td>char × 16</td><td>intent_name</td><td>the unit; read back only from files that descrip calls ours</td></tr>
 *   <tr><td>344</td><td>char × 4</td><td>magic</td><td>{@code n+1}, 0</td></tr>
 *   <tr><td>348</td><td>uint8 × 4</td><td>extension</td><td>0: none; read: skipped</td></tr>
 * </table>
 *
 * <p>Source: NIfTI-1 data format, R. W. Cox et al., 2004 (public standard).
 */
final class NiftiHeader {
    /** Bytes of the header proper, and what its first field says. */
    static final int SIZE = 348;

    /** Where the voxels begin in files without extensions. */
    static final int VOXELS_AT = 352;

    /** Most voxels along one axis: the field is an int16. */
    static final int MOST = Short.MAX_VALUE;

    /** intent_name has 16 bytes and ends in 0. */
    static final int LONGEST_UNIT = 15;

    static final int DIM = 40;
    static final int DATATYPE = 70;
    static final int BITPIX = 72;
    static final int PIXDIM = 76;
    static final int VOX_OFFSET = 108;
    static final int SCL_SLOPE = 112;
    static final int SCL_INTER = 116;
    static final int XYZT_UNITS = 123;
    static final int DESCRIP = 148;
    static final int QFORM_CODE = 252;
    static final int SFORM_CODE = 254;
    static final int QUATERN = 256;
    static final int QOFFSET = 268;
    static final int SROW = 280;
    static final int INTENT_NAME = 328;
    static final int MAGIC = 344;

    static final String OURS = "Raysheaf, values in ";
    private static final int MILLIMETRES = 2;
    private static final int SCANNER = 1;

    private NiftiHeader() {}

    /** The header, with the empty extension, for so many volumes of float32 on one grid. */
    static ByteBuffer of(Grid grid, String unit, int volumes) {
        ByteBuffer out = ByteBuffer.allocate(VOXELS_AT).order(ByteOrder.LITTLE_ENDIAN);
        out.putInt(0, SIZE);
        short axes = (short) (volumes == 1 ? 3 : 4);
        short[] dim = {axes, (short) grid.nx(), (short) grid.ny(), (short) grid.nz(), (short) volumes, 1, 1, 1};
        for (int i = 0; i < dim.length; i++) {
            out.putShort(DIM + 2 * i, dim[i]);
        }
        out.putShort(DATATYPE, (short) NiftiType.FLOAT32.code());
        out.putShort(BITPIX, (short) 32);
        putFloats(out, PIXDIM, 1, grid.spacingXMm(), grid.spacingYMm(), grid.spacingZMm());
        putFloats(out, VOX_OFFSET, VOXELS_AT);
        putFloats(out, SCL_SLOPE, 1);
        out.put(XYZT_UNITS, (byte) MILLIMETRES);
        putText(out, DESCRIP, OURS + unit);
        out.putShort(QFORM_CODE, (short) SCANNER);
        out.putShort(SFORM_CODE, (short) SCANNER);
        VoxelAffine affine = VoxelAffine.of(grid);
        Quaternion turn = Quaternion.of(grid.pose());
        putFloats(out, QUATERN, turn.b(), turn.c(), turn.d());
        putFloats(
                out,
                QOFFSET,
                affine.first().x(),
                affine.first().y(),
                affine.first().z());
        for (int row = 0; row < 3; row++) {
            putFloats(out, SROW + 16 * row, affine.rows()[row]);
        }
        putText(out, INTENT_NAME, unit);
        putText(out, MAGIC, "n+1");
        return out;
    }

    private static void putFloats(ByteBuffer out, int at, double... values) {
        for (int i = 0; i < values.length; i++) {
            out.putFloat(at + 4 * i, (float) values[i]);
        }
    }

    private static void putText(ByteBuffer out, int at, String text) {
        out.put(at, text.getBytes(StandardCharsets.US_ASCII));
    }
}
