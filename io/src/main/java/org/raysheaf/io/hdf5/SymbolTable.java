package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.util.HashSet;
import java.util.Map;
import java.util.Set;

/**
 * The members of a group of the older kind: a version-1 B-tree of type 0 whose leaves are symbol nodes, with the names in a local heap.
 *
 * <pre>
 * heap          "HEAP", 4 version and zeros, 8 size of names, 8 free, 8 address of names
 * tree node     "TREE", 1 type, 1 level, 2 children, 8+8 neighbours, then 8 key, 8 child, …, 8 key
 * symbol node   "SNOD", 2 version and zero, 2 symbols, then per symbol 8 offset of its name, 8 address of its header, 4 kind, 20 more
 * </pre>
 */
final class SymbolTable {
    private static final int MOST_MEMBERS = 1 << 16;
    private static final int SYMBOLIC_LINK = 2;

    private final FileBytes file;
    private final String place;
    private final byte[] names;
    private final Map<String, Long> links;
    private final Set<Long> seen = new HashSet<>();

    private SymbolTable(FileBytes file, String place, byte[] names, Map<String, Long> links) {
        this.file = file;
        this.place = place;
        this.names = names;
        this.links = links;
    }

    /**
     * Collects the members of a group.
     *
     * @param message the group's symbol table message
     * @param links receives name and header address of every hard link
     * @throws IOException if the table is damaged or cannot be read
     */
    static void read(Fields message, Map<String, Long> links) throws IOException {
        FileBytes file = message.file();
        long tree = message.i64();
        Fields heap = file.read(message.i64(), 32, message.place());
        heap.signature("HEAP");
        heap.skip(4);
        long size = heap.i64();
        heap.skip(8);
        byte[] names = file.read(heap.i64(), size, message.place()).bytes(size);
        new SymbolTable(file, message.place(), names, links).readTree(tree, -1);
    }

    private void readTree(long address, int expectedLevel) throws IOException {
        requireNew(address);
        Fields head = file.read(address, 24, place);
        head.signature("TREE");
        int type = head.u8();
        int level = head.u8();
        int children = head.u16();
        if (type != 0 || (expectedLevel >= 0 && level != expectedLevel) || level > 16) {
            throw head.damaged("expected an index of names, found type " + type + ", level " + level);
        }
        Fields entries = file.read(address + 24, 16L * children, place);
        for (int i = 0; i < children; i++) {
            entries.skip(8);
            long child = entries.i64();
            if (level > 0) {
                readTree(child, level - 1);
            } else {
                readSymbols(child);
            }
        }
    }

    private void readSymbols(long address) throws IOException {
        requireNew(address);
        Fields head = file.read(address, 8, place);
        head.signature("SNOD");
        head.skip(2);
        int count = head.u16();
        Fields symbols = file.read(address + 8, 40L * count, place);
        for (int i = 0; i < count; i++) {
            long name = symbols.i64();
            long header = symbols.i64();
            long kind = symbols.u32();
            symbols.skip(20);
            if (kind != SYMBOLIC_LINK) {
                links.put(name(symbols, name), header);
            }
        }
    }

    private String name(Fields symbols, long offset) throws Hdf5Exception {
        if (offset < 0 || offset >= names.length) {
            throw symbols.damaged("expected the names within " + names.length + " bytes, found one at " + offset);
        }
        Fields rest = new Fields(file, place, ByteBuffer.wrap(names, (int) offset, names.length - (int) offset));
        return rest.text(rest.remaining());
    }

    private void requireNew(long address) throws Hdf5Exception {
        if (!seen.add(address) || links.size() > MOST_MEMBERS) {
            throw file.damaged(
                    place, "expected an index of at most " + MOST_MEMBERS + " names, found one that does not end");
        }
    }
}
