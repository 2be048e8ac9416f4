package org.raysheaf.io.records;

import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.HexFormat;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * Reads records of one or several types from a binary stream. Each call walks over the records that lie in the buffer, notes where they start and of which
 * type they are, then takes field after field out of all of them. One thread.
 */
final class BinaryReader implements RecordReader {
    private static final int BUFFER = 1 << 18;
    private static final HexFormat HEX = HexFormat.ofDelimiter(" ");
    private static final int EXCERPT = 24;

    private final BinaryFormat format;
    private final DamageLog damage;
    private final FieldBlock block = new FieldBlock();
    private final RecordType[] types;
    private final EventsOfType[] events;
    private final MarkState[] marks;
    private final byte[] marker;
    private final boolean resynchronise;
    private final int shortest;
    private final int longest;
    private final byte[] buffer;

    private Path file = Path.of("");
    private @Nullable InputStream stream;
    private int at = BitPlace.MARGIN;
    private int end = BitPlace.MARGIN;
    private boolean ended;
    private boolean searching;
    private long consumed;
    private long records;

    /** A type of record, ready to be recognised. */
    private static final class RecordType {
        final String name;
        final int bytes;
        final BitPlace[] places;
        final long[] values;
        final @Nullable EventsOfType event;
        final @Nullable MarkState mark;
        long count;

        RecordType(
                BinaryFormat format,
                BinaryFormat.RecordType type,
                @Nullable EventsOfType event,
                @Nullable MarkState mark) {
            name = type.name();
            bytes = type.bytes();
            places = new BitPlace[type.when().size()];
            values = new long[places.length];
            for (int i = 0; i < places.length; i++) {
                BinaryFormat.Pattern p = type.when().get(i);
                places[i] = BitPlace.of(type.bytes(), format.byteOrder(), p.atByte(), p.bytes(), p.bit(), p.bits());
                values[i] = BinaryFormat.PatternValue.of(p.equals());
            }
            this.event = event;
            this.mark = mark;
        }

        boolean fits(byte[] buffer, int start) {
            for (int i = 0; i < places.length; i++) {
                if (places[i].read(buffer, start) != values[i]) {
                    return false;
                }
            }
            return true;
        }
    }

    /** The events of one type in the block. */
    private static final class EventsOfType {
        final List<BitField> fields = new ArrayList<>();
        final List<Column> targets = new ArrayList<>();
        final int[] starts = new int[FieldBlock.CAPACITY];
        final int[] rows = new int[FieldBlock.CAPACITY];
        final boolean only;
        int count;

        EventsOfType(boolean only) {
            this.only = only;
        }

        void fill(byte[] buffer) {
            for (int f = 0; f < fields.size(); f++) {
                fields.get(f).fill(buffer, starts, count);
                if (!only) {
                    scatter(fields.get(f).column(), targets.get(f));
                }
            }
        }

        private void scatter(Column from, Column to) {
            for (int i = 0; i < count; i++) {
                if (to.whole()) {
                    to.longs()[rows[i]] = from.longs()[i];
                } else {
                    to.doubles()[rows[i]] = from.whole() ? from.longs()[i] : from.doubles()[i];
                }
            }
        }
    }

    BinaryReader(BinaryFormat format, DamageLog damage, Reasons reasons) {
        this.format = format;
        this.damage = damage;
        this.marker = damage.policy().markerBytes();
        this.resynchronise = damage.policy().policy() == DamagePolicy.Policy.RESYNCHRONISE;
        List<BinaryFormat.RecordType> all = format.records();
        long eventTypes =
                all.stream().filter(t -> t.role() == BinaryFormat.Role.EVENT).count();
        Map<String, Column> columns = new LinkedHashMap<>();
        for (BinaryFormat.RecordType type : all) {
            if (type.role() == BinaryFormat.Role.EVENT && columns.isEmpty()) {
                for (BinaryFormat.Field field : type.fields()) {
                    boolean whole = all.stream()
                            .filter(t -> t.role() == BinaryFormat.Role.EVENT)
                            .flatMap(t -> t.fields().stream())
                            .noneMatch(f -> f.name().equals(field.name()) && f.type() == BinaryFormat.Coding.FLOAT);
                    columns.put(field.name(), block.add(field.name(), whole));
                }
            }
        }
        List<RecordType> made = new ArrayList<>();
        List<EventsOfType> rows = new ArrayList<>();
        List<MarkState> states = new ArrayList<>();
        for (BinaryFormat.RecordType type : all) {
            if (type.role() == BinaryFormat.Role.EVENT) {
                EventsOfType event = new EventsOfType(eventTypes == 1);
                for (BinaryFormat.Field field : type.fields()) {
                    Column target = columns.get(field.name());
                    if (target == null) {
                        continue; // the format has made sure that there are none
                    }
                    Column own =
                            event.only ? target : Column.of(field.name(), field.type() != BinaryFormat.Coding.FLOAT);
                    event.fields.add(new BitField(placeOf(type, field), field.type(), own));
                    event.targets.add(target);
                }
                rows.add(event);
                made.add(new RecordType(format, type, event, null));
            } else {
                MarkState mark = new MarkState(type, block, columns, reasons);
                for (BinaryFormat.Field field : type.fields()) {
                    mark.addField(field, placeOf(type, field));
                }
                states.add(mark);
                made.add(new RecordType(format, type, null, mark));
            }
        }
        types = made.toArray(RecordType[]::new);
        events = rows.toArray(EventsOfType[]::new);
        marks = states.toArray(MarkState[]::new);
        shortest = all.stream().mapToInt(BinaryFormat.RecordType::bytes).min().orElse(1);
        longest = Math.max(
                marker.length,
                all.stream().mapToInt(BinaryFormat.RecordType::bytes).max().orElse(1));
        buffer = new byte[Math.max(BUFFER, 4 * longest) + 2 * BitPlace.MARGIN];
    }

    private BitPlace placeOf(BinaryFormat.RecordType type, BinaryFormat.Field field) {
        BinaryFormat.Order order = field.byteOrder() == null ? format.byteOrder() : field.byteOrder();
        return BitPlace.of(type.bytes(), order, field.atByte(), field.bytes(), field.bit(), field.bits());
    }

    @Override
    public void open(Path next) throws IOException {
        close();
        file = next;
        at = BitPlace.MARGIN;
        end = BitPlace.MARGIN;
        ended = false;
        searching = false;
        records = 0;
        consumed = 0;
        InputStream opened = DataFile.open(next);
        stream = opened;
        for (long left = format.skipBytes(); left > 0; left = format.skipBytes() - consumed) {
            int got = opened.read(buffer, 0, (int) Math.min(left, buffer.length));
            if (got < 0) {
                throw new RecordException(file + ": expected a header of " + format.skipBytes()
                        + " bytes, found a file of only " + consumed + "; correct format.skip_bytes");
            }
            consumed += got;
        }
    }

    @Override
    public FieldBlock block() {
        return block;
    }

    @Override
    public boolean next(int most) throws IOException {
        int room = Math.min(most, FieldBlock.CAPACITY);
        Arrays.fill(block.fates(), 0, room, 0);
        int size = 0;
        boolean more = true;
        while (size == 0 && more) {
            fill();
            size = walk(room);
            more = at < end || !ended;
            for (EventsOfType event : events) {
                event.fill(buffer);
            }
            for (MarkState mark : marks) {
                mark.apply(buffer, size, block.fates());
            }
        }
        block.set(size, records);
        records += size;
        return size > 0;
    }

    /** Makes sure that the longest record lies in the buffer, unless the file ends before. */
    private void fill() throws IOException {
        if (end - at >= longest || ended) {
            return;
        }
        System.arraycopy(buffer, at, buffer, BitPlace.MARGIN, end - at);
        end -= at - BitPlace.MARGIN;
        at = BitPlace.MARGIN;
        int limit = buffer.length - BitPlace.MARGIN;
        while (end < limit && !ended) {
            int got = stream == null ? -1 : stream.read(buffer, end, limit - end);
            ended = got < 0;
            end += Math.max(0, got);
        }
    }

    /** Notes events and marks from the current place on, until the buffer is used up or a list is full. */
    private int walk(int room) throws IOException {
        int size = 0;
        for (EventsOfType event : events) {
            event.count = 0;
        }
        for (MarkState mark : marks) {
            mark.clear();
        }
        boolean full = false;
        while (size < room && !full && at < end && (ended || end - at >= longest)) {
            if (searching) {
                search();
                continue;
            }
            RecordType type = typeAt(at);
            if (type == null) {
                passOver();
                continue;
            }
            type.count++;
            if (type.event != null) {
                EventsOfType event = type.event;
                event.starts[event.count] = at;
                event.rows[event.count++] = size;
                for (MarkState mark : marks) {
                    mark.eventFollows(size);
                }
                size++;
            } else if (type.mark != null) {
                full = !type.mark.add(at);
            }
            at += type.bytes;
            consumed += type.bytes;
        }
        return size;
    }

    private @Nullable RecordType typeAt(int start) {
        if (resynchronise && !isMarker(start)) {
            return null;
        }
        int available = end - start;
        for (RecordType type : types) {
            if (type.bytes <= available && type.fits(buffer, start)) {
                return type;
            }
        }
        return null;
    }

    private boolean isMarker(int start) {
        return end - start >= marker.length
                && Arrays.equals(buffer, start, start + marker.length, marker, 0, marker.length);
    }

    /** Reports what lies at the current place and goes on where the policy says. */
    private void passOver() throws IOException {
        int available = end - at;
        String excerpt = HEX.formatHex(buffer, at, at + Math.min(available, Math.min(longest, EXCERPT)));
        String kind;
        String details;
        if (available < shortest) {
            kind = "file ends within a record";
            details = "expected a record of at least " + shortest + " bytes, found only " + available
                    + " to the end of the file";
        } else if (resynchronise && !isMarker(at)) {
            kind = "no marker";
            details = "expected the marker " + HEX.formatHex(marker) + ", found other bytes";
        } else {
            kind = "no known type of record";
            details = "expected a record of one of the types " + typeNames() + ", found bits that fit none";
        }
        damage.unreadable(file, "byte " + consumed, kind, details, excerpt);
        searching = resynchronise && available >= shortest;
        int step = searching ? 1 : Math.min(available, shortest);
        damage.passedOver(step);
        at += step;
        consumed += step;
    }

    /** Goes on to the next marker, or as far as the buffer tells. */
    private void search() {
        int from = at;
        int last = end - marker.length;
        while (at <= last && !isMarker(at)) {
            at++;
        }
        searching = at > last && !ended; // a marker may lie across the end of the buffer
        at = at > last && ended ? end : at;
        damage.passedOver(at - from);
        consumed += at - from;
    }

    private String typeNames() {
        List<String> names = new ArrayList<>();
        for (RecordType type : types) {
            names.add(type.name);
        }
        return String.join(", ", names);
    }

    @Override
    public long position() {
        return consumed;
    }

    @Override
    public Map<String, Long> marks() {
        Map<String, Long> counts = new LinkedHashMap<>();
        for (RecordType type : types) {
            if (type.mark != null) {
                counts.put(type.name, type.count);
            }
        }
        return counts;
    }

    @Override
    public Set<String> used() {
        Set<String> names = new LinkedHashSet<>();
        for (BinaryFormat.RecordType type : format.records()) {
            if (type.per() != null) {
                names.add(type.per());
                names.add(type.name() + "." + type.per());
            }
        }
        return names;
    }

    @Override
    public List<String> unread() {
        return List.of();
    }

    @Override
    public void close() throws IOException {
        if (stream != null) {
            stream.close();
            stream = null;
        }
    }
}
