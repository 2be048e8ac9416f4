package org.raysheaf.io.hdf5;

import java.io.IOException;

/**
 * Finds texts of any length. A value is 4 bytes of length, 8 bytes of the address of a collection and 4 bytes of an index; a collection is
 *
 * <pre>
 * offset  bytes
 *      0      4  "GCOL"
 *      4      4  version 1, zeros
 *      8      8  size of the collection
 *     16      …  objects: 2 index (0 ends), 2 references, 4 zero, 8 size, data padded to 8
 * </pre>
 */
final class GlobalHeap {
    private GlobalHeap() {}

    static String text(Fields value) throws IOException {
        long length = value.u32();
        long address = value.i64();
        long wanted = value.u32();
        if (length == 0) {
            return "";
        }
        FileBytes file = value.file();
        Fields head = file.read(address, 16, value.place());
        head.signature("GCOL");
        head.skip(4);
        Fields objects = file.read(address, head.i64(), value.place());
        objects.skip(16);
        while (objects.remaining() >= 16) {
            int index = objects.u16();
            objects.skip(6);
            long size = objects.i64();
            if (index == 0) {
                break;
            }
            if (index == wanted && size >= length) {
                return objects.text(length);
            }
            objects.skip(size < 0 ? size : Math.min(objects.remaining(), (size + 7) / 8 * 8));
        }
        throw value.damaged("expected a text in the heap at address " + address + ", found none");
    }
}
