package org.raysheaf.engine.correct;

import java.io.IOException;
import java.util.EnumSet;
import java.util.Set;
import java.util.concurrent.ForkJoinPool;
import java.util.function.Consumer;
import java.util.function.Supplier;
import java.util.stream.IntStream;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.PairVisitor;

/** Goes through the usable events of a list with their lines: some blocks are read, then worked on side by side. */
final class EventPairs {
    private static final int BLOCK = 1 << 15;

    /** Blocks that are worked on side by side; whatever the threads, so that sums come in the same order. */
    private static final int SIDE_BY_SIDE = 16;

    private EventPairs() {}

    /**
     * Shows every usable event of a list to a worker.
     *
     * @param list the list
     * @param sheaves say which events are usable, and where their lines are
     * @param pool does the work
     * @param worker makes one for each block of events
     * @param collect takes the workers back when they are done, in the order of the list
     */
    static <W extends PairVisitor> void read(
            EventSource list, CoincidenceSheaves sheaves, ForkJoinPool pool, Supplier<W> worker, Consumer<W> collect)
            throws IOException {
        Set<Attribute> columns = EnumSet.copyOf(sheaves.alsoReads());
        columns.retainAll(list.attributes());
        columns.addAll(sheaves.attributes());
        EventBlock[] blocks = new EventBlock[SIDE_BY_SIDE];
        for (int i = 0; i < blocks.length; i++) {
            blocks[i] = new EventBlock(columns, BLOCK);
        }
        try (EventSource.Cursor cursor = list.open()) {
            for (int count = fill(cursor, blocks); count > 0; count = fill(cursor, blocks)) {
                int filled = count;
                pool.submit(() -> IntStream.range(0, filled)
                                .parallel()
                                .mapToObj(i -> {
                                    W mine = worker.get();
                                    sheaves.visit(blocks[i], new EventTally(), mine);
                                    return mine;
                                })
                                .toList())
                        .join()
                        .forEach(collect);
            }
        }
    }

    private static int fill(EventSource.Cursor cursor, EventBlock[] blocks) throws IOException {
        int count = 0;
        while (count < blocks.length && cursor.next(blocks[count])) {
            count++;
        }
        return count;
    }
}
