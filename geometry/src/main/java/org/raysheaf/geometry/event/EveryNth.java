package org.raysheaf.geometry.event;

import java.io.IOException;
import java.util.Set;

/**
 * A list of which only every n-th event is taken, for a quick look at all of it: as if it had been taken with an n-th of the activity, while header and
 * numbers of singles still speak of the whole.
 */
public final class EveryNth implements EventSource {
    private final EventSource all;
    private final int n;

    /**
     * Thins a list out.
     *
     * @param all the whole list
     * @param n one of so many events is taken, beginning with the first; at least 1
     */
    public EveryNth(EventSource all, int n) {
        if (n < 1) {
            throw new IllegalArgumentException("n must be at least 1: n=" + n);
        }
        this.all = all;
        this.n = n;
    }

    @Override
    public ListHeader header() {
        return all.header();
    }

    @Override
    public Set<Attribute> attributes() {
        return all.attributes();
    }

    @Override
    public long events() {
        return (all.events() + n - 1) / n;
    }

    @Override
    public Cursor open() throws IOException {
        return new Thinning(all.open());
    }

    private final class Thinning implements Cursor {
        private final Cursor cursor;
        private long read;

        Thinning(Cursor cursor) {
            this.cursor = cursor;
        }

        @Override
        public boolean next(EventBlock block) throws IOException {
            EventBlock source = new EventBlock(block.attributes(), block.capacity());
            int[] rows = new int[block.capacity()];
            block.resize(0);
            while (block.size() == 0 && cursor.next(source)) {
                int count = 0;
                for (int i = 0; i < source.size(); i++) {
                    if (read++ % n == 0) {
                        rows[count++] = i;
                    }
                }
                block.append(source, rows, 0, count);
            }
            return block.size() > 0;
        }

        @Override
        public void close() throws IOException {
            cursor.close();
        }
    }
}
