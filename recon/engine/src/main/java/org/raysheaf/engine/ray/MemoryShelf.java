package org.raysheaf.engine.ray;

import java.util.ArrayList;
import java.util.List;
import java.util.function.Consumer;
import org.jspecify.annotations.Nullable;

/** Segments that stay in memory, in the arrays that they came in: a page is as long as what was asked for. */
final class MemoryShelf implements Shelf {
    private final List<Segment> segments = new ArrayList<>();

    private static final class Segment {
        final Walks walks;
        final float @Nullable [] background;
        final int first;

        Segment(Walks walks, float @Nullable [] background, int first) {
            this.walks = walks;
            this.background = background;
            this.first = first;
        }
    }

    @Override
    public int put(Walks walks, float @Nullable [] background, int first, int events) {
        segments.add(new Segment(walks, background, first));
        return segments.size() - 1;
    }

    @Override
    public void each(int segment, int from, int to, int number, Consumer<EventPage> visitor) {
        Segment s = segments.get(segment);
        visitor.accept(new EventPage(s.walks, s.background, number - s.first, number + from, number + to));
    }

    @Override
    public void close() {
        segments.clear();
    }
}
