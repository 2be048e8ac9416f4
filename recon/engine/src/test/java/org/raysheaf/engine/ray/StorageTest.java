package org.raysheaf.engine.ray;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Random;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.IntStream;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.Test;
import org.raysheaf.engine.Estimate;
import org.raysheaf.engine.EstimationSettings;
import org.raysheaf.engine.Estimator;
import org.raysheaf.engine.MemoryList;
import org.raysheaf.engine.PassListener;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.port.Scratch;

/** Where events lie makes no difference, in not a single bit. */
final class StorageTest {
    private static final Grid GRID = Grid.centred(16, 16, 12, 2);
    private static final int EVENTS = 30_000;
    private static final int SUBSETS = 3;
    private static final int RAYS = 2;
    /** So that there are several shards, the last one not full, and segments of several pages. */
    private static final int SHARD_RAYS = 2 * 13_000;

    private static final ForkJoinPool POOL = new ForkJoinPool(2);
    private static final EventBackground BACKGROUND = event -> 1 + event % 7;

    @AfterAll
    static void stop() {
        POOL.shutdown();
    }

    @Test
    void eventsOnDiskAreThoseInMemory() throws Exception {
        HeapScratch scratch = new HeapScratch(Integer.MAX_VALUE);
        try (EventStore memory = load(Storage.MEMORY, SHARD_RAYS);
                EventStore disk = load(new Storage(1000, scratch), SHARD_RAYS)) {
            assertThat(scratch.opened).isEqualTo(1);
            assertThat(all(disk)).isEqualTo(all(memory));
            assertThat(disk.planes()).isEqualTo(memory.planes());
            for (int s = 0; s < SUBSETS; s++) {
                assertThat(disk.cut(s, 5)).isEqualTo(memory.cut(s, 5));
            }
        }
        assertThat(scratch.closed).isEqualTo(1);
    }

    @Test
    void imagesAndLikelihoodsAreTheSameToTheLastBit() throws Exception {
        try (EventStore memory = load(Storage.MEMORY, SHARD_RAYS);
                EventStore disk = load(new Storage(1000, new HeapScratch(Integer.MAX_VALUE)), SHARD_RAYS)) {
            Estimate one = estimate(memory);
            Estimate other = estimate(disk);
            assertThat(other.image().values()).isEqualTo(one.image().values());
            assertThat(other.passes().get(1).logLikelihood())
                    .isEqualTo(one.passes().get(1).logLikelihood());
        }
    }

    /** Shards change the order, and nothing else. */
    @Test
    void shardsHoldEveryEventOnceInItsSubset() throws Exception {
        try (EventStore whole = load(Storage.MEMORY, EventLoader.SHARD_RAYS);
                EventStore shards = load(Storage.MEMORY, SHARD_RAYS)) {
            for (int s = 0; s < SUBSETS; s++) {
                assertThat(sorted(shards, s)).isEqualTo(sorted(whole, s));
            }
            assertThat(all(shards)).isNotEqualTo(all(whole));
        }
    }

    /** A run must end where its share of the cost is reached, whatever the pages. */
    @Test
    void cutsIntoRunsOfEqualCost() throws Exception {
        try (EventStore store = load(Storage.MEMORY, SHARD_RAYS)) {
            int[] cut = store.cut(1, 4);
            long[] costs = new long[4];
            for (int run = 0; run < 4; run++) {
                int number = run;
                store.each(cut[run], cut[run + 1], page -> {
                    for (int e = page.first(); e < page.end(); e++) {
                        costs[number] += 8;
                        for (int k = (e - page.offset()) * RAYS; k < (e - page.offset() + 1) * RAYS; k++) {
                            costs[number] += page.walks().planes(k);
                        }
                    }
                });
            }
            assertThat(cut[0]).isEqualTo(store.start(1));
            assertThat(cut[4]).isEqualTo(store.start(2));
            long mean = Arrays.stream(costs).sum() / 4;
            // An event costs at most 8 + 2 · 18 planes.
            for (long cost : costs) {
                assertThat(Math.abs(cost - mean)).isLessThanOrEqualTo(44);
            }
        }
    }

    @Test
    void givesUpTheFileWhenTheDiskIsFull() {
        HeapScratch small = new HeapScratch(10_000);
        assertThatThrownBy(() -> load(new Storage(1000, small), SHARD_RAYS)).hasMessage("full");
        assertThat(small.closed).isEqualTo(1);
    }

    private static Estimate estimate(EventStore store) {
        return new Estimator(store, Image.filled(GRID, 3), new EstimationSettings(2, SUBSETS, 4, 0), POOL)
                .run(PassListener.SILENT, Progress.SILENT);
    }

    private static EventStore load(Storage storage, int shardRays) throws IOException {
        MemoryList list = lines();
        return EventLoader.load(
                list,
                list,
                Image.filled(GRID, 1),
                EventSelection.ALL,
                SUBSETS,
                BACKGROUND,
                storage,
                shardRays,
                POOL,
                Progress.SILENT);
    }

    private static MemoryList lines() {
        Random random = new Random(5);
        double[][] rays = new double[RAYS * EVENTS][];
        for (int i = 0; i < rays.length; i++) {
            double[] ray = random.doubles(7, -20, 20).toArray();
            ray[0] = -30;
            ray[3] = 30;
            ray[6] = 0.5;
            rays[i] = ray;
        }
        return new MemoryList(RAYS, rays, IntStream.range(0, EVENTS).toArray());
    }

    private static List<List<Float>> all(EventStore store) {
        return events(store, 0, store.events());
    }

    private static List<String> sorted(EventStore store, int subset) {
        return events(store, store.start(subset), store.start(subset + 1)).stream()
                .map(Object::toString)
                .sorted()
                .toList();
    }

    private static List<List<Float>> events(EventStore store, int from, int to) {
        List<List<Float>> events = new ArrayList<>();
        store.each(from, to, page -> {
            for (int e = page.first() - page.offset(); e < page.end() - page.offset(); e++) {
                List<Float> event = new ArrayList<>();
                for (int k = e * RAYS; k < (e + 1) * RAYS; k++) {
                    event.add((float) page.walks().spans[k]);
                    for (float[] column : page.walks().floats()) {
                        event.add(column[k]);
                    }
                }
                float[] background = page.background();
                event.add(background == null ? -1 : background[e]);
                events.add(event);
            }
        });
        return events;
    }

    /** A disk in memory, of any size. */
    private static final class HeapScratch implements Scratch {
        private final int room;
        private int opened;
        private int closed;

        HeapScratch(int room) {
            this.room = room;
        }

        @Override
        public Scratch.File open() {
            opened++;
            return new Scratch.File() {
                private final ByteArrayOutputStream written = new ByteArrayOutputStream();
                private byte[] read = {};

                @Override
                public long append(ByteBuffer bytes) throws IOException {
                    int at = written.size();
                    byte[] more = new byte[bytes.remaining()];
                    bytes.get(more);
                    if (at + more.length > room) {
                        throw new IOException("full");
                    }
                    written.write(more);
                    return at;
                }

                @Override
                public synchronized void read(long at, ByteBuffer bytes) {
                    if (read.length != written.size()) {
                        read = written.toByteArray();
                    }
                    bytes.put(read, (int) at, bytes.remaining());
                }

                @Override
                public void close() {
                    closed++;
                }
            };
        }
    }
}
