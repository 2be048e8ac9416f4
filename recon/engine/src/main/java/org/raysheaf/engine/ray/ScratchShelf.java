package org.raysheaf.engine.ray;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.util.ArrayList;
import java.util.List;
import java.util.function.Consumer;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.port.Scratch;
import org.raysheaf.geometry.sheaf.SheafBundle.WeightLaw;

/**
 * Segments in a scratch file, column after column. A visit reads them page by page into arrays of its own, so that memory does not grow
 * with the list; what the system keeps of the file in memory that nobody else needs makes most of these reads cheap.
 *
 * <pre>
 * segment of n events with r rays each, in the byte order of the machine
 *   int32    n · r   spans
 *   float32  n · r   one after another: the columns of {@link Walks#floats}
 *   float32  n       background, if there is any
 * </pre>
 */
final class ScratchShelf implements Shelf {
    /** Events of a page: its arrays and the voxels that it touches fit into the processor's caches together. */
    private static final int PAGE = 1 << 12;

    private final Scratch.File file;
    private final Lattice lattice;
    private final int rays;
    private final WeightLaw law;
    private final List<Segment> segments = new ArrayList<>();

    private record Segment(long at, int events, boolean background) {}

    ScratchShelf(Scratch.File file, Lattice lattice, int raysPerEvent, WeightLaw law) {
        this.file = file;
        this.lattice = lattice;
        this.rays = raysPerEvent;
        this.law = law;
    }

    @Override
    public int put(Walks walks, float @Nullable [] background, int first, int events) throws IOException {
        ByteBuffer bytes = buffer(PAGE * rays);
        long at = -1;
        for (int done = 0; done < events * rays; done += PAGE * rays) {
            int count = Math.min(PAGE * rays, events * rays - done);
            bytes.clear().limit(Integer.BYTES * count);
            bytes.asIntBuffer().put(walks.spans, first * rays + done, count);
            long here = file.append(bytes);
            at = done == 0 ? here : at;
        }
        for (float[] column : walks.floats()) {
            append(column, first * rays, events * rays, bytes);
        }
        if (background != null) {
            append(background, first, events, bytes);
        }
        segments.add(new Segment(at, events, background != null));
        return segments.size() - 1;
    }

    private void append(float[] column, int first, int values, ByteBuffer bytes) throws IOException {
        int most = bytes.capacity() / Float.BYTES;
        for (int done = 0; done < values; done += most) {
            int count = Math.min(most, values - done);
            bytes.clear().limit(Float.BYTES * count);
            bytes.asFloatBuffer().put(column, first + done, count);
            file.append(bytes);
        }
    }

    private static ByteBuffer buffer(int values) {
        return ByteBuffer.allocateDirect(Float.BYTES * values).order(ByteOrder.nativeOrder());
    }

    @Override
    public void each(int segment, int from, int to, int number, Consumer<EventPage> visitor) {
        Segment s = segments.get(segment);
        int most = Math.min(PAGE, to - from);
        Walks walks = new Walks(lattice, most * rays, law);
        float[] background = s.background ? new float[most] : null;
        ByteBuffer bytes = buffer(most * rays);
        try {
            for (int at = from; at < to; at += most) {
                int count = Math.min(most, to - at);
                read(s, at, count, walks, background, bytes);
                int first = number + at;
                visitor.accept(new EventPage(walks, background, first, first, first + count));
            }
        } catch (IOException e) {
            throw new UncheckedIOException(e.getMessage(), e);
        }
    }

    private void read(Segment s, int from, int count, Walks walks, float @Nullable [] background, ByteBuffer bytes)
            throws IOException {
        long column = (long) Float.BYTES * s.events * rays;
        long at = s.at + (long) Float.BYTES * from * rays;
        fill(at, count * rays, bytes);
        bytes.asIntBuffer().get(walks.spans, 0, count * rays);
        for (float[] values : walks.floats()) {
            at += column;
            fill(at, count * rays, bytes);
            bytes.asFloatBuffer().get(values, 0, count * rays);
        }
        if (background != null) {
            long columns = walks.floats().length + 1L;
            fill(s.at + columns * column + (long) Float.BYTES * from, count, bytes);
            bytes.asFloatBuffer().get(background, 0, count);
        }
    }

    private void fill(long at, int values, ByteBuffer bytes) throws IOException {
        bytes.clear().limit(Float.BYTES * values);
        file.read(at, bytes);
        bytes.flip();
    }

    @Override
    public void close() throws IOException {
        file.close();
    }
}
