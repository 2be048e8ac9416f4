package org.raysheaf.transport;

import java.io.IOException;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.ForkJoinPool;
import java.util.concurrent.ForkJoinTask;
import org.jspecify.annotations.Nullable;

/**
 * Makes numbered pieces side by side and hands them on one by one, in order. Nobody waits for a thread of its own to do so: whoever finishes
 * the piece that is next in line hands on all that are ready. At most a few pieces wait at any time.
 *
 * @param <T> what a piece is
 */
final class InOrder<T> {
    private final long count;
    private final int ahead;
    private final Maker<T> maker;
    private final Taker<T> taker;

    // Guarded by this: the next piece to make, the next to hand on, what is ready, whether somebody hands on, whether
    // to stop and why.
    private long toMake;
    private long toHand;
    private final Map<Long, T> ready = new HashMap<>();
    private boolean handing;
    private boolean stopped;
    private @Nullable IOException failure;

    /** Makes a piece; called by several threads at once. */
    interface Maker<T> {
        T make(long number);
    }

    /** Takes the pieces, one call after another; false if no more are wanted. */
    interface Taker<T> {
        boolean take(long number, T piece) throws IOException;
    }

    InOrder(long count, int ahead, Maker<T> maker, Taker<T> taker) {
        this.count = count;
        this.ahead = ahead;
        this.maker = maker;
        this.taker = taker;
    }

    /** Does it all on the threads of a pool. */
    void run(ForkJoinPool pool) throws IOException {
        List<ForkJoinTask<?>> workers = new ArrayList<>();
        for (int i = 0; i < pool.getParallelism(); i++) {
            workers.add(pool.submit(this::work));
        }
        RuntimeException unexpected = null;
        for (ForkJoinTask<?> worker : workers) {
            try {
                worker.get();
            } catch (ExecutionException e) {
                unexpected = new IllegalStateException(e.getCause());
            } catch (InterruptedException e) {
                stop(new IOException("interrupted", e));
                Thread.currentThread().interrupt();
            }
        }
        if (unexpected != null) {
            throw unexpected;
        }
        synchronized (this) {
            if (failure != null) {
                throw failure;
            }
        }
    }

    private void work() {
        try {
            for (long number = claim(); number >= 0; number = claim()) {
                T piece = maker.make(number);
                if (finished(number, piece)) {
                    handOn();
                }
            }
        } catch (IOException e) {
            stop(e);
        } catch (RuntimeException | Error e) {
            stop(null);
            throw e;
        }
    }

    private synchronized long claim() {
        while (!stopped && toMake < count && toMake - toHand >= ahead) {
            try {
                wait();
            } catch (InterruptedException e) {
                Thread.currentThread().interrupt();
                stop(new IOException("interrupted", e));
            }
        }
        return stopped || toMake >= count ? -1 : toMake++;
    }

    /** Notes a piece; true if the caller has to hand on. */
    private synchronized boolean finished(long number, T piece) {
        ready.put(number, piece);
        boolean mine = !handing;
        handing = true;
        return mine;
    }

    private void handOn() throws IOException {
        for (T piece = nextReady(); piece != null; piece = nextReady()) {
            boolean more = taker.take(toHand(), piece);
            handed(more);
        }
    }

    private synchronized @Nullable T nextReady() {
        T piece = stopped ? null : ready.remove(toHand);
        handing = piece != null;
        return piece;
    }

    private synchronized long toHand() {
        return toHand;
    }

    private synchronized void handed(boolean more) {
        toHand++;
        stopped |= !more;
        notifyAll();
    }

    private synchronized void stop(@Nullable IOException why) {
        failure = failure == null ? why : failure;
        stopped = true;
        notifyAll();
    }
}
