package org.raysheaf.bench;

import java.io.IOException;
import java.nio.ByteOrder;
import java.nio.FloatBuffer;
import java.nio.channels.FileChannel;
import java.nio.channels.FileChannel.MapMode;
import java.nio.file.Path;
import java.time.Instant;
import java.util.EnumSet;
import java.util.Set;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafMaker;

/**
 * Lines of response as a list: six little-endian floats per event, the two end points (mm). The file is mapped, not read, so it takes
 * no heap. Its only attribute is a number that stands for the line, which the maker looks up.
 */
final class LineFile implements EventSource, SheafMaker {
    private static final int BYTES = 6 * Float.BYTES;

    private final FloatBuffer coordinates;

    private LineFile(FloatBuffer coordinates) {
        this.coordinates = coordinates;
    }

    /**
     * Opens a file of lines.
     *
     * @throws IOException if it cannot be read, or is no whole number of lines, or is larger than 2 GiB
     */
    static LineFile open(Path file) throws IOException {
        try (FileChannel channel = FileChannel.open(file)) {
            long size = channel.size();
            if (size == 0 || size % BYTES != 0 || size > Integer.MAX_VALUE) {
                throw new IOException(file + ": expected lines of six floats, " + BYTES
                        + " bytes each and 2 GiB at most; found " + size + " bytes");
            }
            return new LineFile(channel.map(MapMode.READ_ONLY, 0, size)
                    .order(ByteOrder.LITTLE_ENDIAN)
                    .asFloatBuffer());
        }
    }

    @Override
    public ListHeader header() {
        return new ListHeader("", 1, 1, Instant.EPOCH, null);
    }

    @Override
    public Set<Attribute> attributes() {
        return EnumSet.of(Attribute.ELEMENT_A);
    }

    @Override
    public long events() {
        return coordinates.capacity() / 6;
    }

    @Override
    public Cursor open() {
        return new Numbers();
    }

    @Override
    public int raysPerSheaf() {
        return 1;
    }

    @Override
    public void make(EventBlock events, SheafBundle out, EventTally tally) {
        int[] lines = events.ints(Attribute.ELEMENT_A);
        for (int i = 0; i < events.size(); i++) {
            int ray = out.append();
            coordinates.get(6 * lines[i], out.rays(), 6 * ray, 6);
            out.weights()[ray] = 1;
            tally.use();
        }
    }

    /** Counts through the lines. */
    private final class Numbers implements Cursor {
        private int next;

        @Override
        public boolean next(EventBlock block) {
            int size = (int) Math.min(block.capacity(), events() - next);
            int[] lines = block.ints(Attribute.ELEMENT_A);
            for (int i = 0; i < size; i++) {
                lines[i] = next++;
            }
            block.resize(size);
            return size > 0;
        }

        @Override
        public void close() {}
    }
}
