package org.raysheaf.io.hdf5;

import java.io.IOException;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.Optional;
import java.util.Set;

/**
 * The messages of an object, from a header of version 1 or 2 and its continuation blocks. {@link NodeWriter} draws version 2; version 1 is
 * 16 bytes (version, zero, number of messages, references, size, padding), then messages of an 8-byte head (type, size, flags, padding) and
 * a body. Version 2 is verified by its checksums.
 */
final class ObjectHeader {
    private static final int MOST_BLOCKS = 4096;
    private static final int SHARED = 2;

    private final FileBytes file;
    private final String place;
    private final List<Message> messages = new ArrayList<>();
    private final List<Block> blocks = new ArrayList<>();
    private final Set<Long> seen = new HashSet<>();

    /** A message: its type, and its body as it was stored. */
    private record Message(int type, boolean shared, Fields body) {}

    /** A continuation of the header elsewhere in the file. */
    private record Block(long address, long bytes) {}

    private ObjectHeader(FileBytes file, String place) {
        this.file = file;
        this.place = place;
    }

    static ObjectHeader read(FileBytes file, long address, String place) throws IOException {
        ObjectHeader header = new ObjectHeader(file, place);
        int first = file.read(address, 1, place).u8();
        if (first == 1) {
            header.readVersion1(address);
        } else {
            header.readVersion2(address);
        }
        return header;
    }

    private void readVersion1(long address) throws IOException {
        Fields prefix = file.read(address, 16, place);
        prefix.skip(8);
        blocks.add(new Block(address + 16, prefix.u32()));
        for (int block = 0; block < blocks.size(); block++) {
            Fields fields = nextBlock(block);
            while (fields.remaining() >= 8) {
                int type = fields.u16();
                int size = fields.u16();
                int flags = fields.u8();
                fields.skip(3);
                add(type, flags, fields.take(size, place));
            }
        }
    }

    private void readVersion2(long address) throws IOException {
        Fields start = file.read(address, Math.min(34, Math.max(0, file.size() - address)), place);
        start.signature("OHDR");
        int version = start.u8();
        if (version != 2) {
            throw start.damaged("expected a header of version 2, found " + version);
        }
        int flags = start.u8();
        start.skip((flags & 0x20) != 0 ? 16 : 0); // times
        start.skip((flags & 0x10) != 0 ? 4 : 0); // limits for attributes
        long size = start.unsigned(1 << (flags & 3));
        int prefix = start.position();
        file.requireInside(address, size, place);
        Fields whole = file.read(address, prefix + size + 4, place);
        whole.requireChecksum();
        whole.skip(prefix);
        boolean ordered = (flags & 0x04) != 0;
        addVersion2(whole.take(size, place), ordered);
        for (int block = 0; block < blocks.size(); block++) {
            Fields fields = nextBlock(block);
            fields.signature("OCHK");
            fields.requireChecksum();
            addVersion2(fields.take(fields.remaining() - 4, place), ordered);
        }
    }

    private void addVersion2(Fields fields, boolean ordered) throws Hdf5Exception {
        int head = ordered ? 6 : 4;
        while (fields.remaining() >= head) {
            int type = fields.u8();
            int size = fields.u16();
            int flags = fields.u8();
            fields.skip(ordered ? 2 : 0);
            add(type, flags, fields.take(size, place));
        }
    }

    private Fields nextBlock(int block) throws IOException {
        Block extent = blocks.get(block);
        if (!seen.add(extent.address) || block > MOST_BLOCKS) {
            throw file.damaged(place, "expected a header that ends, found one that runs in a circle");
        }
        return file.read(extent.address, extent.bytes, place);
    }

    private void add(int type, int flags, Fields body) throws Hdf5Exception {
        if (type == Messages.CONTINUATION) {
            blocks.add(new Block(body.i64(), body.i64()));
        } else {
            messages.add(new Message(type, (flags & SHARED) != 0, body));
        }
    }

    /**
     * The only message of a type.
     *
     * @param type the type, from {@link Messages}
     * @return its body, or empty if there is none
     * @throws Hdf5Exception if it is kept elsewhere in the file
     */
    Optional<Fields> message(int type) throws Hdf5Exception {
        List<Fields> all = messages(type);
        return all.isEmpty() ? Optional.empty() : Optional.of(all.get(0));
    }

    /**
     * The message of a type that must be there.
     *
     * @param type the type, from {@link Messages}
     * @param name what it says, for messages
     * @return its body
     * @throws Hdf5Exception if there is none, or it is kept elsewhere in the file
     */
    Fields required(int type, String name) throws Hdf5Exception {
        return message(type).orElseThrow(() -> file.damaged(place, "expected its " + name + ", found none"));
    }

    /**
     * All messages of a type.
     *
     * @param type the type, from {@link Messages}
     * @return their bodies, in order
     * @throws Hdf5Exception if one is kept elsewhere in the file
     */
    List<Fields> messages(int type) throws Hdf5Exception {
        List<Fields> bodies = new ArrayList<>();
        for (Message message : messages) {
            if (message.type == type) {
                if (message.shared) {
                    throw file.unsupported(place, "uses a shared header message; store types and attributes directly");
                }
                bodies.add(message.body.fromStart());
            }
        }
        return bodies;
    }
}
