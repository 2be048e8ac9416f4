package org.raysheaf.engine.ray;

import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.ForkJoinPool;
import java.util.concurrent.ForkJoinTask;
import java.util.function.IntConsumer;

/** Numbered pieces of work on a pool that the caller owns; the caller thereby chooses the number of threads. */
public final class Tasks {
    private Tasks() {}

    /**
     * Does all pieces and waits for them. They may run in any order and at the same time.
     *
     * @param pool where they run
     * @param count how many pieces, numbered from 0
     * @param work does one piece
     */
    public static void forEach(ForkJoinPool pool, int count, IntConsumer work) {
        List<ForkJoinTask<?>> running = new ArrayList<>(count);
        for (int i = 0; i < count; i++) {
            int piece = i;
            running.add(pool.submit(() -> work.accept(piece)));
        }
        // Nobody may still be writing to shared arrays when a failure is passed on.
        running.forEach(ForkJoinTask::quietlyJoin);
        running.forEach(ForkJoinTask::join);
    }
}
