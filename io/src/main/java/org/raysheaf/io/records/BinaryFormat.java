package org.raysheaf.io.records;

import java.util.HashSet;
import java.util.List;
import java.util.Locale;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * A stream of binary records, one after another without gaps.
 *
 * <p><strong>How bits are counted.</strong> A record is read as one whole number in its byte order; bit 0 is the least significant bit of that number.
 * So in a little-endian record bit {@code k} is bit {@code k % 8} of byte {@code k / 8}; in a big-endian record of {@code n} bytes it is bit {@code k
 * % 8} of byte {@code n − 1 − k / 8}. A field may instead name a word inside the record ({@code at_byte} from the start of the record, {@code bytes}
 * long); the same rule then holds inside the word, and without {@code bit} the field is the whole word.
 *
 * @param skipBytes header at the start of every file (bytes)
 * @param byteOrder the order of the bytes of a record or word
 * @param records the types of records, tried in this order; the first whose bit patterns fit is taken
 */
public record BinaryFormat(
        @Default("0") long skipBytes, @Default("little") Order byteOrder, List<RecordType> records)
        implements RecordFormat {

    private static final int LONGEST_RECORD = 1 << 16;

    /** Which byte comes first. */
    public enum Order {
        /** The least significant byte. */
        LITTLE,
        /** The most significant byte. */
        BIG
    }

    /** What a type of record is for. */
    public enum Role {
        /** One event (or single); it goes on to the list. */
        EVENT,
        /** A mark in the stream: its fields and the number of such records so far are known to the events that follow. */
        MARK
    }

    /** How bits are a number. */
    public enum Coding {
        /** A whole number from 0. All 64 bits are kept; values above 2⁶³ − 1 count as negative in formulas other than {@code bits}. */
        UNSIGNED,
        /** A whole number in two's complement. */
        SIGNED,
        /** An IEEE 754 number of 32 or 64 bits. */
        FLOAT
    }

    /**
     * One type of record.
     *
     * @param name its name; events know the fields of a mark as {@code name.field}, and {@code name.count}
     * @param bytes its length (bytes)
     * @param role what it is for
     * @param when what its bits must be, all of them; empty if it is the only type, or the last
     * @param per of a mark: a field that it shares with the events, such as the board; then every event knows the marks with its own value only
     * @param fields its fields; all types of events have fields of the same names
     */
    public record RecordType(
            String name,
            int bytes,
            @Default("event") Role role,
            @Default("[]") List<Pattern> when,
            @Nullable String per,
            @Default("[]") List<Field> fields) {}

    /**
     * Bits that must have one value.
     *
     * @param atByte first byte of the word, or null for the whole record
     * @param bytes length of the word (bytes), or null
     * @param bit lowest bit, or null for the whole word
     * @param bits number of bits, or null
     * @param equals the value, decimal or hexadecimal with 0x
     */
    public record Pattern(
            @Nullable Integer atByte,
            @Nullable Integer bytes,
            @Nullable Integer bit,
            @Nullable Integer bits,
            String equals) {}

    /**
     * One field.
     *
     * @param name the name of the value
     * @param type how its bits are a number
     * @param atByte first byte of the word that holds it, or null for the whole record
     * @param bytes length of the word (bytes), or null
     * @param bit lowest bit, or null for the whole word
     * @param bits number of bits, 1 to 64, or null
     * @param byteOrder order of the bytes of its word, or null for that of the format
     */
    public record Field(
            String name,
            @Default("unsigned") Coding type,
            @Nullable Integer atByte,
            @Nullable Integer bytes,
            @Nullable Integer bit,
            @Nullable Integer bits,
            @Nullable Order byteOrder) {}

    public BinaryFormat {
        Problems problems = new Problems("binary records")
                .atLeast("skip_bytes", (double) skipBytes, 0)
                .rule(!records.isEmpty(), "records", "expected at least one type of record, found none");
        Set<String> typeNames = new HashSet<>();
        Set<String> eventFields = null;
        for (int i = 0; i < records.size(); i++) {
            RecordType type = records.get(i);
            String at = "records[" + i + "].";
            FieldNames.require(problems, at + "name", type.name(), typeNames);
            problems.within(at + "bytes", type.bytes(), 1, LONGEST_RECORD);
            problems.rule(
                    i == records.size() - 1 || !type.when().isEmpty(),
                    at + "when",
                    "expected bits that tell it from the types below it, found none");
            problems.rule(
                    type.per() == null || type.role() == Role.MARK,
                    at + "per",
                    "expected it on a mark, found an event");
            if (type.bytes() >= 1 && type.bytes() <= LONGEST_RECORD) {
                requireParts(problems, at, type, byteOrder);
            }
            if (type.role() == Role.EVENT) {
                Set<String> names = new HashSet<>();
                type.fields().forEach(field -> names.add(field.name()));
                problems.rule(
                        eventFields == null || eventFields.equals(names),
                        at + "fields",
                        "expected the same names in all types of events, found others");
                eventFields = names;
            }
            problems.rule(
                    type.per() == null
                            || type.fields().stream()
                                    .anyMatch(f -> f.name().equals(type.per()) && f.type() != Coding.FLOAT),
                    at + "per",
                    "expected a whole-number field of this record, found " + type.per());
        }
        problems.rule(eventFields != null, "records", "expected at least one type with the role event, found none");
        Set<String> events = eventFields == null ? Set.of() : eventFields;
        for (int i = 0; i < records.size(); i++) {
            String per = records.get(i).per();
            problems.rule(
                    per == null || events.contains(per),
                    "records[" + i + "].per",
                    "expected a field that events have too, found " + per);
        }
        problems.orThrow();
    }

    private static void requireParts(Problems problems, String at, RecordType type, Order order) {
        for (int i = 0; i < type.when().size(); i++) {
            String where = at + "when[" + i + "]";
            Pattern p = type.when().get(i);
            place(problems, where, type.bytes(), order, p.atByte(), p.bytes(), p.bit(), p.bits());
            problems.rule(
                    PatternValue.isValue(p.equals()),
                    where + ".equals",
                    "expected a whole number, decimal or hexadecimal with 0x, found " + p.equals());
        }
        Set<String> names = new HashSet<>();
        for (int i = 0; i < type.fields().size(); i++) {
            Field f = type.fields().get(i);
            String where = at + "fields[" + i + "]";
            FieldNames.require(problems, where + ".name", f.name(), names);
            Order own = f.byteOrder() == null ? order : f.byteOrder();
            BitPlace place = place(problems, where, type.bytes(), own, f.atByte(), f.bytes(), f.bit(), f.bits());
            problems.rule(
                    place == null || f.type() != Coding.FLOAT || place.bits() == 32 || place.bits() == 64,
                    where + ".type",
                    "expected 32 or 64 bits for a float, found " + (place == null ? 0 : place.bits()));
        }
    }

    private static @Nullable BitPlace place(
            Problems problems,
            String where,
            int record,
            Order order,
            @Nullable Integer atByte,
            @Nullable Integer bytes,
            @Nullable Integer bit,
            @Nullable Integer bits) {
        try {
            return BitPlace.of(record, order, atByte, bytes, bit, bits);
        } catch (IllegalArgumentException e) {
            problems.rule(false, where, String.valueOf(e.getMessage()));
            return null;
        }
    }

    /** Numbers in patterns: decimal, or hexadecimal with 0x. */
    static final class PatternValue {
        private PatternValue() {}

        static boolean isValue(String text) {
            try {
                of(text);
                return true;
            } catch (NumberFormatException e) {
                return false;
            }
        }

        static long of(String text) {
            String lower = text.toLowerCase(Locale.ROOT);
            return lower.startsWith("0x")
                    ? Long.parseUnsignedLong(lower.substring(2), 16)
                    : Long.parseUnsignedLong(lower, 10);
        }
    }
}
