package org.raysheaf.io.volume;

import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import org.raysheaf.geometry.frame.Vector3;

/** The fields of a NIfTI-1 header that was read, each checked. */
final class NiftiFields {
    private final Path file;
    private final ByteBuffer header;
    private final int[] counts;
    private final NiftiType type;
    private final long voxelsAt;
    private final double slope;
    private final double intercept;

    NiftiFields(Path file, byte[] bytes) throws VolumeException {
        this.file = file;
        this.header = ByteBuffer.wrap(bytes);
        requireNifti(bytes);
        this.counts = readCounts();
        this.type = readType();
        this.voxelsAt = readVoxelsAt();
        double stated = decimal(NiftiHeader.SCL_SLOPE);
        this.slope = stated == 0 ? 1 : stated;
        this.intercept = stated == 0 ? 0 : decimal(NiftiHeader.SCL_INTER);
        require(
                Double.isFinite(slope) && Double.isFinite(intercept),
                "scl_slope",
                "finite scaling",
                slope + " and " + intercept);
    }

    private void requireNifti(byte[] bytes) throws VolumeException {
        if (bytes.length < NiftiHeader.SIZE) {
            throw new VolumeException(
                    file,
                    "expected a NIfTI-1 header of 348 bytes, found " + bytes.length
                            + "; the file is cut short or no NIfTI");
        }
        if (header.getInt(0) != NiftiHeader.SIZE) {
            header.order(ByteOrder.LITTLE_ENDIAN);
        }
        String magic = text(NiftiHeader.MAGIC, 4);
        int size = header.getInt(0);
        if (size == 540 || Integer.reverseBytes(size) == 540) {
            throw new VolumeException(file, "expected NIfTI-1, found NIfTI-2; save it as NIfTI-1");
        }
        if (size != NiftiHeader.SIZE) {
            throw new VolumeException(
                    file, "expected a NIfTI-1 file, found none: its header size is " + size + ", not 348");
        }
        require(!magic.equals("ni1"), "magic", "a single file (n+1)", "a pair of files (ni1); save it as one .nii");
        require(magic.equals("n+1"), "magic", "n+1", "\"" + magic + "\"");
    }

    private int[] readCounts() throws VolumeException {
        int axes = header.getShort(NiftiHeader.DIM);
        require(axes >= 3 && axes <= 7, "dim[0]", "3 axes", String.valueOf(axes));
        int[] found = new int[3];
        for (int axis = 1; axis <= axes; axis++) {
            int count = header.getShort(NiftiHeader.DIM + 2 * axis);
            if (axis <= 3) {
                require(count >= 1, "dim[" + axis + "]", "at least 1 voxel", String.valueOf(count));
                found[axis - 1] = count;
            } else {
                require(count <= 1, "dim[" + axis + "]", "one volume", count + "; split the series");
            }
        }
        return found;
    }

    private NiftiType readType() throws VolumeException {
        int code = header.getShort(NiftiHeader.DATATYPE);
        NiftiType known = NiftiType.of(code);
        if (known == null) {
            throw new VolumeException(file, "field datatype: expected one of " + NiftiType.known() + ", found " + code);
        }
        int bits = header.getShort(NiftiHeader.BITPIX);
        require(bits == 8 * known.bytes(), "bitpix", String.valueOf(8 * known.bytes()), String.valueOf(bits));
        return known;
    }

    private long readVoxelsAt() throws VolumeException {
        double offset = decimal(NiftiHeader.VOX_OFFSET);
        boolean whole = offset == Math.rint(offset) && offset >= NiftiHeader.VOXELS_AT && offset < 1L << 40;
        require(whole, "vox_offset", "a whole number >= 352", String.valueOf(offset));
        return (long) offset;
    }

    ByteOrder byteOrder() {
        return header.order();
    }

    /** Voxels along the three axes of the file; a copy. */
    int[] counts() {
        return counts.clone();
    }

    long voxels() {
        return (long) counts[0] * counts[1] * counts[2];
    }

    NiftiType type() {
        return type;
    }

    /** Offset of the first voxel in bytes. */
    long voxelsAt() {
        return voxelsAt;
    }

    /** A value of a row, scaled. */
    float value(ByteBuffer row, int index) {
        return (float) (slope * type.value(row, index * type.bytes()) + intercept);
    }

    /** The unit, from files of our own; others use the field for other things. */
    String unit() {
        return text(NiftiHeader.DESCRIP, 80).startsWith(NiftiHeader.OURS) ? text(NiftiHeader.INTENT_NAME, 16) : "";
    }

    VoxelAffine affine() throws VolumeException {
        VoxelAffine stated;
        if (header.getShort(NiftiHeader.SFORM_CODE) > 0) {
            stated = VoxelAffine.ofRows(
                    decimals(NiftiHeader.SROW, 4),
                    decimals(NiftiHeader.SROW + 16, 4),
                    decimals(NiftiHeader.SROW + 32, 4));
        } else if (header.getShort(NiftiHeader.QFORM_CODE) > 0) {
            stated = qform();
        } else {
            double[] spacing = decimals(NiftiHeader.PIXDIM + 4, 3);
            stated = VoxelAffine.centred(
                    counts[0], counts[1], counts[2], new Vector3(spacing[0], spacing[1], spacing[2]));
        }
        return stated.scaled(millimetres());
    }

    private VoxelAffine qform() {
        double[] stored = decimals(NiftiHeader.QUATERN, 3);
        Quaternion turn = Quaternion.ofStored(stored[0], stored[1], stored[2]);
        double[] spacing = decimals(NiftiHeader.PIXDIM, 4);
        double[] first = decimals(NiftiHeader.QOFFSET, 3);
        // pixdim[0], "qfac", is −1 where the third axis makes the frame left-handed.
        double handedness = spacing[0] < 0 ? -1 : 1;
        return new VoxelAffine(
                turn.u().times(spacing[1]),
                turn.v().times(spacing[2]),
                turn.w().times(spacing[3] * handedness),
                new Vector3(first[0], first[1], first[2]));
    }

    /** Millimetres per unit of length in the file; the lowest three bits name it. */
    private double millimetres() throws VolumeException {
        int unit = header.get(NiftiHeader.XYZT_UNITS) & 7;
        require(unit <= 3, "xyzt_units", "m, mm or µm (1, 2, 3)", String.valueOf(unit));
        return unit == 1 ? 1000 : unit == 3 ? 0.001 : 1;
    }

    private double[] decimals(int at, int count) {
        double[] values = new double[count];
        for (int i = 0; i < count; i++) {
            values[i] = decimal(at + 4 * i);
        }
        return values;
    }

    /** The decimal that was probably meant: 0.925 rather than 0.925000012. */
    private double decimal(int at) {
        return Double.parseDouble(Float.toString(header.getFloat(at)));
    }

    private String text(int at, int length) {
        String all = new String(header.array(), at, length, StandardCharsets.ISO_8859_1);
        int end = all.indexOf(0);
        return end < 0 ? all : all.substring(0, end);
    }

    private void require(boolean holds, String field, String expected, String found) throws VolumeException {
        if (!holds) {
            throw new VolumeException(file, "field " + field + ": expected " + expected + ", found " + found);
        }
    }
}
