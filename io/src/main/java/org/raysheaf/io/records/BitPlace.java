package org.raysheaf.io.records;

import java.lang.invoke.MethodHandles;
import java.lang.invoke.VarHandle;
import java.nio.ByteOrder;
import org.jspecify.annotations.Nullable;

/**
 * Where up to 64 bits lie in a record, ready to be read fast: eight bytes are loaded in the record's byte order, shifted and masked; a ninth byte joins
 * if the bits reach beyond. Bits are counted as {@link BinaryFormat} says. Immutable and safe for use by several threads.
 */
final class BitPlace {
    /** Bytes that a buffer must have before the first and after the last record, so that loads stay inside it. */
    static final int MARGIN = 16;

    private static final VarHandle LITTLE = MethodHandles.byteArrayViewVarHandle(long[].class, ByteOrder.LITTLE_ENDIAN);
    private static final VarHandle BIG = MethodHandles.byteArrayViewVarHandle(long[].class, ByteOrder.BIG_ENDIAN);

    private final boolean big;
    private final int load;
    private final int shift;
    private final int bits;
    private final long mask;

    private BitPlace(boolean big, int load, int shift, int bits) {
        this.big = big;
        this.load = load;
        this.shift = shift;
        this.bits = bits;
        this.mask = bits == 64 ? -1 : (1L << bits) - 1;
    }

    /**
     * Finds the place.
     *
     * @param record length of the record (bytes)
     * @param order byte order of the record or word
     * @param atByte first byte of a word in the record, or null for the record
     * @param bytes length of the word, or null
     * @param bit lowest bit, or null for all of the word
     * @param bits number of bits, or null
     * @throws IllegalArgumentException if that is no place in the record
     */
    static BitPlace of(
            int record,
            BinaryFormat.Order order,
            @Nullable Integer atByte,
            @Nullable Integer bytes,
            @Nullable Integer bit,
            @Nullable Integer bits) {
        if ((atByte == null) != (bytes == null) || (bit == null) != (bits == null)) {
            throw new IllegalArgumentException(
                    "expected at_byte and bytes together, and bit and bits together, found one without the other");
        }
        if (atByte == null && bit == null && record > 8) {
            throw new IllegalArgumentException("expected bit and bits, or at_byte and bytes, found neither");
        }
        int word = bytes == null ? record : bytes;
        int start = atByte == null ? 0 : atByte;
        if (word < 1 || start < 0 || start > record - word) {
            throw new IllegalArgumentException("expected a word inside the record of " + record + " bytes, found bytes "
                    + start + " to " + ((long) start + word - 1));
        }
        int low = bit == null ? 0 : bit;
        int width = bits == null ? (word > 8 ? 0 : 8 * word) : bits;
        if (width < 1 || width > 64) {
            throw new IllegalArgumentException("expected 1 to 64 bits, found " + (bits == null ? 8L * word : width));
        }
        if (low < 0 || low > 8 * word - width) {
            throw new IllegalArgumentException("expected bits inside the " + 8 * word + " bits of the word, found bits "
                    + low + " to " + ((long) low + width - 1));
        }
        boolean big = order == BinaryFormat.Order.BIG;
        // The byte with the lowest bit; big-endian loads end there, little-endian ones begin there.
        int lowest = big ? start + word - 1 - low / 8 : start + low / 8;
        return new BitPlace(big, big ? lowest - 7 : lowest, low % 8, width);
    }

    int bits() {
        return bits;
    }

    /** The bits as an unsigned number, in a record that starts at a position of a buffer with margins. */
    long read(byte[] buffer, int start) {
        int at = start + load;
        long word = (long) (big ? BIG : LITTLE).get(buffer, at) >>> shift;
        if (shift + bits > 64) {
            long ninth = buffer[big ? at - 1 : at + 8] & 0xffL;
            word |= ninth << (64 - shift);
        }
        return word & mask;
    }

    /** Reads the same bits of many records. */
    void readAll(byte[] buffer, int[] starts, int count, long[] into) {
        if (shift + bits > 64) {
            for (int i = 0; i < count; i++) {
                into[i] = read(buffer, starts[i]);
            }
        } else if (big) {
            for (int i = 0; i < count; i++) {
                into[i] = ((long) BIG.get(buffer, starts[i] + load) >>> shift) & mask;
            }
        } else {
            for (int i = 0; i < count; i++) {
                into[i] = ((long) LITTLE.get(buffer, starts[i] + load) >>> shift) & mask;
            }
        }
    }
}
