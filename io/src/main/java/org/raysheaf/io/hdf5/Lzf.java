package org.raysheaf.io.hdf5;

/**
 * Undoes the LZF filter, with which h5py compresses on request. A control byte below 32 is followed by that many literal bytes plus one; any other holds a length
 * in its upper three bits (7: another byte is added) and, with the byte after, how far back to copy from. Format: the description of LZF by its author
 * (liblzf 3.6), from memory.
 */
final class Lzf {
    private Lzf() {}

    /**
     * Decompresses.
     *
     * @param stored the compressed bytes
     * @param expected how many bytes must come out
     * @return the bytes, or an empty array if the data are no sound LZF of that length
     */
    static byte[] decode(byte[] stored, int expected) {
        byte[] out = new byte[expected];
        int to = 0;
        int at = 0;
        while (at < stored.length) {
            int control = stored[at++] & 0xff;
            if (control < 32) {
                int length = control + 1;
                if (at + length > stored.length || to + length > expected) {
                    return new byte[0];
                }
                System.arraycopy(stored, at, out, to, length);
                at += length;
                to += length;
                continue;
            }
            int length = (control >> 5) + 2;
            if (length == 9) {
                if (at == stored.length) {
                    return new byte[0];
                }
                length += stored[at++] & 0xff;
            }
            if (at == stored.length) {
                return new byte[0];
            }
            int from = to - (((control & 0x1f) << 8) | (stored[at++] & 0xff)) - 1;
            if (from < 0 || to + length > expected) {
                return new byte[0];
            }
            for (int i = 0; i < length; i++) {
                out[to++] = out[from++]; // one by one: source and target may overlap
            }
        }
        return to == expected ? out : new byte[0];
    }
}
