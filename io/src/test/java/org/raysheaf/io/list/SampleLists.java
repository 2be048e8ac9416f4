package org.raysheaf.io.list;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.file.Path;
import java.time.Instant;
import java.util.Set;
import java.util.SplittableRandom;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.matter.Nuclide;
import org.raysheaf.io.hdf5.Compression;

/** Lists for tests: made from a seed, written, and read back whole. */
final class SampleLists {
    static final Set<Attribute> ALL = ListKind.PAIRS.measured();
    static final int ELEMENTS = 4356;
    static final ListHeader HEADER = new ListHeader(
            "raysheaf: system/1\nname: a ring of 12 µ-blocks\n",
            600,
            580.5,
            Instant.parse("2026-03-01T09:30:00Z"),
            new Nuclide("F-18", 6586.2, 0.9686));

    private SampleLists() {}

    static EventBlock block(int events, long seed) {
        return block(ALL, events, seed);
    }

    static EventBlock block(Set<Attribute> attributes, int events, long seed) {
        EventBlock block = new EventBlock(attributes, Math.max(1, events));
        SplittableRandom random = new SplittableRandom(seed);
        long time = 0;
        for (int i = 0; i < events; i++) {
            time += random.nextLong(2_000_000_000L);
            for (Attribute attribute : attributes) {
                switch (attribute.type()) {
                    case UINT8 -> block.bytes(attribute)[i] = (byte) random.nextInt(2);
                    case UINT32 -> block.ints(attribute)[i] = random.nextInt(ELEMENTS);
                    case INT64 -> block.longs(attribute)[i] = time;
                    case FLOAT32 -> block.floats(attribute)[i] = (float) random.nextDouble(350, 650);
                }
            }
        }
        block.resize(events);
        return block;
    }

    static Path write(Path path, EventBlock... blocks) throws IOException {
        return write(path, Compression.DEFLATE, blocks);
    }

    static Path write(Path path, Compression compression, EventBlock... blocks) throws IOException {
        return write(path, compression, ListFormat.CHUNK_LENGTH, blocks);
    }

    static Path write(Path path, Compression compression, int chunkLength, EventBlock... blocks) throws IOException {
        Set<Attribute> attributes = blocks.length == 0 ? ALL : blocks[0].attributes();
        try (ListWriter writer = ListWriter.create(attributes, path, true, compression, chunkLength)) {
            for (EventBlock block : blocks) {
                writer.accept(block);
            }
            writer.commit(HEADER);
        }
        return path;
    }

    /** Reads a whole list in small steps. */
    static EventBlock read(EventSource list) throws IOException {
        EventBlock all = new EventBlock(list.attributes(), (int) Math.max(1, list.events()));
        EventBlock part = new EventBlock(list.attributes(), 1009); // not a divisor of any chunk
        int size = 0;
        try (EventSource.Cursor cursor = list.open()) {
            while (cursor.next(part)) {
                for (Attribute attribute : part.attributes()) {
                    System.arraycopy(part.column(attribute), 0, all.column(attribute), size, part.size());
                }
                size += part.size();
            }
        }
        all.resize(size);
        return all;
    }

    /** Whether two blocks hold the same events, bit by bit. */
    static boolean same(EventBlock a, EventBlock b) {
        boolean same = a.size() == b.size() && a.attributes().equals(b.attributes());
        for (Attribute attribute : a.attributes()) {
            same = same && bits(a, attribute).equals(bits(b, attribute));
        }
        return same;
    }

    private static ByteBuffer bits(EventBlock block, Attribute attribute) {
        int n = block.size();
        ByteBuffer bytes = ByteBuffer.allocate(n * attribute.type().bytes());
        switch (attribute.type()) {
            case UINT8 -> bytes.put(0, block.bytes(attribute), 0, n);
            case UINT32 -> bytes.asIntBuffer().put(block.ints(attribute), 0, n);
            case INT64 -> bytes.asLongBuffer().put(block.longs(attribute), 0, n);
            case FLOAT32 -> bytes.asFloatBuffer().put(block.floats(attribute), 0, n);
        }
        return bytes;
    }
}
