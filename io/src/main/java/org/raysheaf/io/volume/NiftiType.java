package org.raysheaf.io.volume;

import java.nio.ByteBuffer;
import java.util.Arrays;
import java.util.stream.Collectors;
import org.jspecify.annotations.Nullable;

/** The types of voxel values that are read from NIfTI-1 files; {@link #FLOAT32} is the one that is written. */
enum NiftiType {
    UINT8(2, 1) {
        @Override
        double value(ByteBuffer in, int at) {
            return Byte.toUnsignedInt(in.get(at));
        }
    },
    INT16(4, 2) {
        @Override
        double value(ByteBuffer in, int at) {
            return in.getShort(at);
        }
    },
    INT32(8, 4) {
        @Override
        double value(ByteBuffer in, int at) {
            return in.getInt(at);
        }
    },
    FLOAT32(16, 4) {
        @Override
        double value(ByteBuffer in, int at) {
            return in.getFloat(at);
        }
    },
    FLOAT64(64, 8) {
        @Override
        double value(ByteBuffer in, int at) {
            return in.getDouble(at);
        }
    },
    INT8(256, 1) {
        @Override
        double value(ByteBuffer in, int at) {
            return in.get(at);
        }
    },
    UINT16(512, 2) {
        @Override
        double value(ByteBuffer in, int at) {
            return Short.toUnsignedInt(in.getShort(at));
        }
    };

    private final int code;
    private final int bytes;

    NiftiType(int code, int bytes) {
        this.code = code;
        this.bytes = bytes;
    }

    /** The value that starts at a byte. */
    abstract double value(ByteBuffer in, int at);

    /** The datatype code of the standard. */
    int code() {
        return code;
    }

    int bytes() {
        return bytes;
    }

    static @Nullable NiftiType of(int code) {
        return Arrays.stream(values()).filter(t -> t.code == code).findFirst().orElse(null);
    }

    static String known() {
        return Arrays.stream(values()).map(t -> t.code + " (" + t + ")").collect(Collectors.joining(", "));
    }
}
