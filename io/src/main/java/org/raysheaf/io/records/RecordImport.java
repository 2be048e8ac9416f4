package org.raysheaf.io.records;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.EnumSet;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Set;
import java.util.stream.Stream;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.matter.Nuclide;
import org.raysheaf.geometry.port.Progress;

/**
 * Reads a lab's own records and makes events of them, in one pass and in little memory, whatever the size of the data:
 *
 * <pre>
 * RecordImport work = new RecordImport(file, description, system);
 * try (ListWriter list = ListWriter.create(work.attributes(), out, false)) {
 *     ImportResult result = work.run(data, list, Long.MAX_VALUE, progress);
 *     list.commit(work.header(systemText, result));
 * }
 * </pre>
 *
 * <p>Immutable; every run is independent of others.
 */
public final class RecordImport {
    private static final double S_PER_PS = 1e-12;
    private static final double PS_PER_NS = 1000;

    private final Path path;
    private final RecordsDescription description;
    private final DetectorSystem system;

    /**
     * Prepares an import.
     *
     * @param path the file of the description; other files that it names are looked for beside it
     * @param description the description
     * @param system the system whose elements the records name
     */
    public RecordImport(Path path, RecordsDescription description, DetectorSystem system) {
        this.path = path;
        this.description = description;
        this.system = system;
    }

    /**
     * The columns of the list.
     *
     * @return a new set
     */
    public Set<Attribute> attributes() {
        Set<Attribute> attributes = EnumSet.noneOf(Attribute.class);
        description.attributes().keySet().forEach(name -> Attribute.named(name).ifPresent(attributes::add));
        return attributes;
    }

    /**
     * What the list says about itself.
     *
     * @param systemText the text of the system description
     * @param result what the import found
     * @return the header; without a length in the description it is the time of the last event
     */
    public ListHeader header(String systemText, ImportResult result) {
        AcquisitionNote note = description.acquisition();
        Double given = note.durationS();
        double durationS = given == null ? Math.max(1, result.lastTimePs() + 1) * S_PER_PS : given;
        Double live = note.liveTimeS();
        AcquisitionNote.Decaying decaying = note.nuclide();
        return new ListHeader(
                systemText,
                durationS,
                live == null ? durationS : Math.min(live, durationS),
                note.start(),
                decaying == null
                        ? null
                        : new Nuclide(decaying.name(), decaying.halfLifeS(), decaying.positronBranching()));
    }

    /**
     * Imports data files.
     *
     * @param files the files, in the order of time or one per board, as the description says
     * @param sink receives the events, with the columns of {@link #attributes()}
     * @param most the most records to read (from every board), for a look
     * @param progress hears of it, in bytes
     * @return what was found and done
     * @throws RecordException if the description does not fit the data, or damage ends the import
     * @throws IOException if files cannot be read, or the sink fails
     */
    public ImportResult run(List<Path> files, EventSink sink, long most, Progress progress) throws IOException {
        if (files.isEmpty()) {
            throw new RecordException("expected data files, found none");
        }
        Reasons reasons = new Reasons();
        Outlet outlet = new Outlet(
                attributes(), description.acquisition().zero() == AcquisitionNote.Zero.FIRST_EVENT, reasons, sink);
        Double orderNs = description.orderNs();
        TimeSorter sorter =
                orderNs == null ? null : new TimeSorter(attributes(), Math.round(orderNs * PS_PER_NS), outlet);
        EventSink target = sorter == null ? outlet : sorter;
        progress.begin("importing", bytesOf(files), "bytes");
        DamageLog damage = new DamageLog(description.damage());
        Surroundings surroundings = new Surroundings(path, system);
        List<RecordStream> streams = new ArrayList<>();
        try {
            if (description.files() == RecordsDescription.FileOrder.BOARDS) {
                for (int i = 0; i < files.size(); i++) {
                    streams.add(new RecordStream(
                            description, surroundings, damage, reasons, List.of(files.get(i)), i, most, progress));
                }
                new BoardMerge(attributes(), streams, target).run();
            } else {
                RecordStream stream =
                        new RecordStream(description, surroundings, damage, reasons, files, 0, most, progress);
                streams.add(stream);
                EventBlock block = new EventBlock(attributes(), FieldBlock.CAPACITY);
                while (stream.next(block)) {
                    target.accept(block);
                }
            }
            if (sorter != null) {
                sorter.finish();
            }
        } finally {
            for (RecordStream stream : streams) {
                stream.close();
            }
        }
        ImportResult result = result(streams, reasons, damage, outlet);
        progress.end(String.format(Locale.ROOT, "%,d records, %,d events", result.records(), result.written()));
        return result;
    }

    private static ImportResult result(List<RecordStream> streams, Reasons reasons, DamageLog damage, Outlet outlet) {
        long records = 0;
        long bytes = 0;
        Map<String, Long> marks = new LinkedHashMap<>();
        Set<String> unmapped = new LinkedHashSet<>();
        Set<String> unread = new LinkedHashSet<>();
        Map<String, ImportResult.Clock> clocks = new LinkedHashMap<>();
        for (RecordStream stream : streams) {
            records += stream.records();
            bytes += stream.bytes();
            stream.marks().forEach((name, count) -> marks.merge(name, count, Long::sum));
            unmapped.addAll(stream.unmapped());
            unread.addAll(stream.unread());
            stream.clocks()
                    .forEach((name, clock) -> clocks.merge(
                            name,
                            new ImportResult.Clock(clock.wraps(), clock.back()),
                            (a, b) -> new ImportResult.Clock(a.wraps() + b.wraps(), a.stepsBack() + b.stepsBack())));
        }
        return new ImportResult(
                records,
                outlet.events(),
                reasons.counts(),
                marks,
                damage.reasons(),
                List.copyOf(damage.examples()),
                damage.bytes(),
                List.copyOf(unmapped),
                List.copyOf(unread),
                clocks,
                outlet.lastPs(),
                bytes);
    }

    static long bytesOf(List<Path> files) throws IOException {
        long bytes = 0;
        for (Path file : files) {
            if (Files.isDirectory(file)) {
                try (Stream<Path> inside = Files.list(file)) {
                    bytes += bytesOf(inside.filter(Files::isRegularFile).toList());
                }
            } else {
                bytes += Files.size(file);
            }
        }
        return bytes;
    }

    /**
     * Checks all of the description that can be checked without data: formulas, tables, maps, positions.
     *
     * @throws RecordException if something in it cannot be
     * @throws IOException if a table or map cannot be read
     */
    public void verify() throws IOException {
        Reasons reasons = new Reasons();
        RecordReader reader = readerFor(description.format(), new DamageLog(description.damage()), reasons);
        FieldBlock block = reader.block();
        // What kind of numbers arrays hold only the file knows; whole ones serve in every place.
        if (description.format() instanceof Hdf5Format hdf5) {
            hdf5.fields().forEach(field -> block.add(field.name(), true));
        } else if (description.format() instanceof NpyFormat npy) {
            npy.fields().forEach(field -> block.add(field.name(), true));
        }
        List<String> wanted = new ArrayList<>();
        description.attributes().values().forEach(mapping -> wanted.add(mapping.from()));
        Pipeline pipeline =
                new Pipeline(description, block.fields(), wanted, new Surroundings(path, system), reasons, false);
        EventFiller filler = new EventFiller(description.attributes(), pipeline, system.elements(), true, reasons);
        if (filler.attributes().isEmpty()) {
            throw new RecordException(path + ", attributes: expected at least one, found none");
        }
    }

    /** A reader for a format. */
    static RecordReader readerFor(RecordFormat format, DamageLog damage, Reasons reasons) {
        if (format instanceof TextFormat text) {
            return new TextReader(text, damage, reasons);
        }
        if (format instanceof BinaryFormat binary) {
            return new BinaryReader(binary, damage, reasons);
        }
        if (format instanceof Hdf5Format hdf5) {
            return new ArrayReader(file -> Hdf5Arrays.open(file, hdf5));
        }
        NpyFormat npy = (NpyFormat) format;
        return new ArrayReader(file -> NpyArrays.open(file, npy, damage));
    }
}
