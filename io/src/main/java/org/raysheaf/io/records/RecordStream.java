package org.raysheaf.io.records;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.port.Progress;

/** Files that follow one another, read as one stream of events: reader, pipeline and filler in a row. One thread. */
final class RecordStream implements AutoCloseable {
    private final RecordsDescription description;
    private final Surroundings surroundings;
    private final Reasons reasons;
    private final List<Path> files;
    private final int firstNumber;
    private final long most;
    private final Progress progress;
    private final RecordReader reader;
    private final Set<String> unread = new LinkedHashSet<>();
    private @Nullable Pipeline pipeline;
    private @Nullable EventFiller filler;
    private int current = -1;
    private long records;
    private long bytes;
    private long told;
    private long blocks;

    RecordStream(
            RecordsDescription description,
            Surroundings surroundings,
            DamageLog damage,
            Reasons reasons,
            List<Path> files,
            int firstNumber,
            long most,
            Progress progress) {
        this.description = description;
        this.surroundings = surroundings;
        this.reasons = reasons;
        this.files = files;
        this.firstNumber = firstNumber;
        this.most = most;
        this.progress = progress;
        this.reader = RecordImport.readerFor(description.format(), damage, reasons);
    }

    /** Fills a block with the next events; it may come out empty before the end, when all records of a run were set aside. */
    boolean next(EventBlock block) throws IOException {
        while (records < most) {
            if (current >= 0 && reader.next((int) Math.min(most - records, FieldBlock.CAPACITY))) {
                FieldBlock fields = reader.block();
                records += fields.size();
                if (pipeline == null || filler == null) {
                    throw new IllegalStateException("records before a pipeline");
                }
                pipeline.run(fields, firstNumber + current);
                filler.fill(fields, block);
                tell();
                return true;
            }
            tell();
            if (current + 1 == files.size()) {
                break;
            }
            openNext();
        }
        block.resize(0);
        return false;
    }

    private void openNext() throws IOException {
        bytes += current < 0 ? 0 : reader.position();
        told = 0;
        current++;
        reader.open(files.get(current));
        unread.addAll(reader.unread());
        if (pipeline == null) {
            List<String> wanted = new ArrayList<>();
            description.attributes().values().forEach(mapping -> wanted.add(mapping.from()));
            Pipeline made = new Pipeline(description, reader.block().fields(), wanted, surroundings, reasons, false);
            filler = new EventFiller(
                    description.attributes(),
                    made,
                    surroundings.system().elements(),
                    description.acquisition().zero() == AcquisitionNote.Zero.FIRST_EVENT,
                    reasons);
            pipeline = made;
        }
    }

    private void tell() {
        long now = reader.position();
        progress.advance(now - told);
        if (now - told > 0 && (blocks++ & 63) == 0) { // now and then: words cost more than numbers
            progress.remark(String.format(Locale.ROOT, "%,d records", records));
        }
        told = now;
    }

    long records() {
        return records;
    }

    long bytes() {
        return bytes + (current < 0 ? 0 : reader.position());
    }

    Map<String, Long> marks() {
        return reader.marks();
    }

    /** Fields on which nothing depends; what marks count is there without being asked for, and no loss. */
    List<String> unmapped() {
        List<String> names = new ArrayList<>();
        if (pipeline != null) {
            for (Column field : reader.block().fields()) {
                boolean served = pipeline.neededNames().contains(field.name())
                        || reader.used().contains(field.name());
                if (!served && !field.name().endsWith(".count")) {
                    names.add(field.name());
                }
            }
        }
        return names;
    }

    Set<String> unread() {
        return unread;
    }

    Map<String, ClockUnwrap> clocks() {
        return pipeline == null ? Map.of() : pipeline.clocks();
    }

    @Override
    public void close() throws IOException {
        reader.close();
    }
}
