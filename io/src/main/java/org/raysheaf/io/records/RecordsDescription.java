package org.raysheaf.io.records;

import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.TreeSet;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * How to read a lab's own records: what {@code RECORDS.yaml} says. A record passes through it from top to bottom: the format reads its fields,
 * {@code compute} makes further values of them, {@code set_aside} takes out what is not wanted, and {@code attributes} says which values make the
 * columns of the list. Names of files in it start from its folder.
 *
 * <p>Formulas stand wherever a value is asked for; {@link Formula} says what they can do. Beside the fields of the format they know two names:
 * "file" is the number of the data file from 0, "record" that of the record in it from 0.
 *
 * @param name what the records are, for people
 * @param system the file with the system description that element numbers refer to
 * @param format how records lie in the data files
 * @param files what several data files are to each other
 * @param orderNs records that stand out of their order in time by at most this (ns) are put in order, or null to leave them as they come
 * @param compute further values, in the order in which they are made; later ones may use earlier ones
 * @param setAside what is taken out, and why
 * @param attributes for each column of the list the value that fills it; with {@code element} a list of singles, with {@code element_a} and
 *     {@code element_b} one of pairs
 * @param acquisition what the list says about itself
 * @param damage what to do about records that cannot be read
 * @param calibration which values a calibration from the data looks at, or null
 */
public record RecordsDescription(
        String name,
        String system,
        RecordFormat format,
        @Default("sequence") FileOrder files,
        @Nullable Double orderNs,
        @Default("{}") Map<String, FieldStep> compute,
        @Default("[]") List<Exclusion> setAside,
        Map<String, Mapping> attributes,
        @Default("{}") AcquisitionNote acquisition,
        @Default("{}") DamagePolicy damage,
        @Nullable CalibrationInputs calibration) {

    /** The kind that the first line of such a description names. */
    public static final String KIND = "records";

    /** What several data files are to each other. */
    public enum FileOrder {
        /** Parts of one stream, one after the other; clocks go on. */
        SEQUENCE,
        /** Boards that recorded at the same time; their records are merged by time. */
        BOARDS
    }

    public RecordsDescription {
        Problems problems = new Problems("records");
        if (orderNs != null) {
            problems.atLeast("order_ns", orderNs, 0);
        }
        for (String column : attributes.keySet()) {
            problems.rule(
                    Attribute.named(column).isPresent(),
                    "attributes." + column,
                    "expected the name of a list's column, found no such column; there are " + columns());
        }
        Set<String> names = attributes.keySet();
        boolean singles = names.contains(Attribute.ELEMENT.columnName());
        ListKind kind = singles ? ListKind.SINGLES : ListKind.PAIRS;
        for (Attribute required : kind.required()) {
            problems.rule(
                    names.contains(required.columnName()),
                    "attributes",
                    "expected " + required.columnName() + ", without which it is not " + kind.phrase()
                            + ", found none; add it");
        }
        for (Map.Entry<String, Mapping> entry : attributes.entrySet()) {
            Attribute attribute = Attribute.named(entry.getKey()).orElse(null);
            if (attribute != null) {
                problems.rule(
                        attribute.belongsTo(kind),
                        "attributes." + entry.getKey(),
                        "expected a column of " + kind.phrase() + ", found one of the other kind");
                String symbol = entry.getValue().unit();
                Unit unit = symbol == null ? null : Unit.named(symbol);
                problems.rule(
                        unit == null || unit.base().equals(attribute.unit()),
                        "attributes." + entry.getKey() + ".unit",
                        "expected a unit of the same quantity as " + attribute.unit() + ", found " + symbol);
            }
        }
        boolean needsTime = files == FileOrder.BOARDS || orderNs != null;
        problems.rule(
                !needsTime || names.contains(Attribute.TIME.columnName()),
                "attributes",
                "expected time_ps, by which records are merged or ordered, found none; add it");
        problems.rule(
                acquisition.durationS() != null || names.contains(Attribute.TIME.columnName()),
                "acquisition.duration_s",
                "expected the length of the acquisition, since no time_ps tells it, found none; add it");
        problems.orThrow();
    }

    private static String columns() {
        Set<String> names = new TreeSet<>();
        for (Attribute attribute : Attribute.values()) {
            if (!attribute.truth()) {
                names.add(attribute.columnName());
            }
        }
        return String.join(", ", names);
    }
}
