package org.raysheaf.io.records;

import java.io.IOException;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.PriorityQueue;
import java.util.Set;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;

/** Merges the events of boards by time; of equal times the board given first comes first. One thread. */
final class BoardMerge {
    private final Set<Attribute> attributes;
    private final EventSink sink;
    private final EventBlock out;
    private final PriorityQueue<Board> boards =
            new PriorityQueue<>(Comparator.comparingLong(Board::time).thenComparingInt(board -> board.number));

    /** A board with the events of it that were read ahead. */
    private static final class Board {
        final int number;
        final RecordStream stream;
        final EventBlock block;
        int at;

        Board(int number, RecordStream stream, Set<Attribute> attributes) {
            this.number = number;
            this.stream = stream;
            this.block = new EventBlock(attributes, FieldBlock.CAPACITY);
        }

        long time() {
            return block.longs(Attribute.TIME)[at];
        }

        /** Reads on if it must; false at the end. */
        boolean ready() throws IOException {
            while (at >= block.size()) {
                at = 0;
                if (!stream.next(block)) {
                    return false;
                }
            }
            return true;
        }
    }

    BoardMerge(Set<Attribute> attributes, List<RecordStream> streams, EventSink sink) throws IOException {
        this.attributes = attributes;
        this.sink = sink;
        this.out = new EventBlock(attributes, FieldBlock.CAPACITY);
        List<Board> all = new ArrayList<>();
        for (RecordStream stream : streams) {
            all.add(new Board(all.size(), stream, this.attributes));
        }
        for (Board board : all) {
            if (board.ready()) {
                boards.add(board);
            }
        }
    }

    void run() throws IOException {
        out.resize(0);
        for (Board first = boards.poll(); first != null; first = boards.poll()) {
            // All events of this board that come before the next board's first go in one run.
            Board second = boards.peek();
            long[] times = first.block.longs(Attribute.TIME);
            int stop = first.at + 1;
            while (stop < first.block.size()
                    && (second == null
                            || times[stop] < second.time()
                            || (times[stop] == second.time() && first.number < second.number))) {
                stop++;
            }
            stop = Math.min(stop, first.at + out.capacity() - out.size());
            EventRows.append(first.block, first.at, stop - first.at, out);
            first.at = stop;
            if (out.size() == out.capacity()) {
                sink.accept(out);
                out.resize(0);
            }
            if (first.ready()) {
                boards.add(first);
            }
        }
        if (out.size() > 0) {
            sink.accept(out);
        }
    }
}
