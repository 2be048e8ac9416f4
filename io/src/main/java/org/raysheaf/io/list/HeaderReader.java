package org.raysheaf.io.list;

import java.io.IOException;
import java.nio.file.Path;
import java.time.DateTimeException;
import java.time.Instant;
import java.time.OffsetDateTime;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.OptionalLong;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.event.PairingTally;
import org.raysheaf.geometry.matter.Nuclide;
import org.raysheaf.geometry.settings.InvalidSettingsException;
import org.raysheaf.io.hdf5.StoredAttributes;
import org.raysheaf.io.hdf5.StoredDataset;
import org.raysheaf.io.hdf5.StoredGroup;
import org.raysheaf.io.list.ListFileException.Kind;

/** Reads what a list says about itself as a whole, with the fall-backs that {@link ListFormat} states. */
final class HeaderReader {
    private final Path path;
    private final StoredGroup root;
    private final StoredAttributes attributes;
    private final List<String> warnings;

    HeaderReader(Path path, StoredGroup root, List<String> warnings) {
        this.path = path;
        this.root = root;
        this.attributes = root.attributes();
        this.warnings = warnings;
    }

    ListHeader read() throws IOException {
        double liveTimeS = required(ListFormat.LIVE_TIME);
        double durationS = optional(ListFormat.DURATION).orElse(liveTimeS);
        Instant start = start();
        String system = system();
        try {
            return new ListHeader(system, durationS, liveTimeS, start, nuclide(), pairing());
        } catch (InvalidSettingsException e) {
            throw trouble(Kind.IMPOSSIBLE_VALUE, "", e.getMessage() + "; correct the attributes");
        }
    }

    /** What one record of the list is; refuses anything else. */
    ListKind kind() throws ListFileException {
        Optional<String> mark = attributes.text(ListFormat.MARK);
        String advice = "; a list has the root attribute raysheaf = \"list/1\" (pairs) or \"singles/1\"";
        if (mark.isEmpty()) {
            throw trouble(Kind.NOT_A_LIST, "", "expected a list, found another HDF5 file" + advice);
        }
        int slash = mark.get().indexOf('/');
        String word = mark.get().substring(0, Math.max(0, slash));
        String version = mark.get().substring(slash + 1);
        Optional<ListKind> kind = Arrays.stream(ListKind.values())
                .filter(known -> known.word().equals(word))
                .findFirst();
        if (kind.isEmpty() || !version.matches("[1-9][0-9]{0,8}")) {
            throw trouble(Kind.NOT_A_LIST, "", "expected a list, found \"" + mark.get() + "\"" + advice);
        }
        if (Integer.parseInt(version) > ListFormat.VERSION) {
            throw trouble(
                    Kind.TOO_NEW,
                    "",
                    "expected list format 1 to " + ListFormat.VERSION + ", found " + version
                            + "; use a newer version of this program");
        }
        return kind.get();
    }

    private Instant start() throws ListFileException {
        Optional<String> text = attributes.text(ListFormat.START);
        if (text.isEmpty()) {
            refuseOtherType(ListFormat.START, "a text");
            warnings.add("no attribute start: taken as " + Instant.EPOCH + ", the reference time of all activities");
            return Instant.EPOCH;
        }
        try {
            return OffsetDateTime.parse(text.get()).toInstant();
        } catch (DateTimeException e) {
            throw trouble(
                    Kind.IMPOSSIBLE_VALUE,
                    ListFormat.START,
                    "expected a time like 2026-03-01T09:30:00Z, found \"" + text.get() + "\"");
        }
    }

    private @Nullable Nuclide nuclide() throws ListFileException {
        Optional<String> name = attributes.text(ListFormat.NUCLIDE);
        if (name.isEmpty()) {
            refuseOtherType(ListFormat.NUCLIDE, "a text");
            return null;
        }
        return new Nuclide(name.get(), required(ListFormat.HALF_LIFE), required(ListFormat.BRANCHING));
    }

    private @Nullable PairingRecord pairing() throws IOException {
        OptionalDouble window = optional(ListFormat.WINDOW);
        if (window.isEmpty()) {
            return null;
        }
        OptionalDouble highest = optional(ListFormat.HIGHEST);
        OptionalDouble delay = optional(ListFormat.DELAY);
        Pairing settings = new Pairing(
                window.getAsDouble(),
                optional(ListFormat.LOWEST).orElse(0),
                highest.isPresent() ? highest.getAsDouble() : null,
                delay.isPresent() ? delay.getAsDouble() : null,
                crowds(),
                optional(ListFormat.DISORDER).orElse(0));
        PairingTally tally = new PairingTally(
                count(ListFormat.OUTSIDE_ENERGIES),
                count(ListFormat.ALONE),
                count(ListFormat.CROWDED),
                count(ListFormat.TOO_CLOSE),
                count(ListFormat.PAIRED),
                count(ListFormat.PROMPTS),
                count(ListFormat.DELAYED));
        List<Long> singles = new ArrayList<>();
        Optional<StoredDataset> perElement = root.dataset(ListFormat.SINGLES);
        if (perElement.isPresent()) {
            for (long value : perElement.get().longs()) {
                singles.add(value);
            }
        }
        return new PairingRecord(settings, tally, singles);
    }

    private long count(String name) throws ListFileException {
        return Math.round(optional(name).orElse(0));
    }

    private Pairing.Crowds crowds() throws ListFileException {
        String word = attributes.text(ListFormat.CROWDS).orElse("discard");
        return Arrays.stream(Pairing.Crowds.values())
                .filter(rule -> rule.name().equalsIgnoreCase(word))
                .findFirst()
                .orElseThrow(() -> trouble(
                        Kind.IMPOSSIBLE_VALUE,
                        ListFormat.CROWDS,
                        "expected discard, every_pair, first_two or strongest_two, found \"" + word + "\""));
    }

    private String system() throws IOException {
        Optional<StoredDataset> dataset = root.dataset(ListFormat.SYSTEM);
        if (dataset.isPresent()) {
            String text = dataset.get().text();
            requireDigest(text, dataset.get().attributes());
            return text;
        }
        Optional<String> text = attributes.text(ListFormat.SYSTEM);
        if (text.isEmpty()) {
            refuseOtherType(ListFormat.SYSTEM, "a text");
            warnings.add("no system description: the elements mean what the description given beside the list says");
        }
        return text.orElse("");
    }

    private void requireDigest(String text, StoredAttributes beside) throws ListFileException {
        Optional<String> expected = beside.text(ListFormat.SHA256);
        String found = ListFormat.sha256(text);
        if (expected.isPresent() && !expected.get().equals(found)) {
            throw trouble(
                    Kind.DAMAGED,
                    ListFormat.SYSTEM,
                    "expected SHA-256 " + expected.get() + ", found " + found
                            + "; the text was changed after it was written");
        }
    }

    /**
     * The number of events that the list declares.
     *
     * @return the number, or empty if it declares none
     */
    OptionalLong declaredEvents() throws ListFileException {
        OptionalLong events = attributes.whole(ListFormat.EVENTS);
        if (events.isEmpty()) {
            refuseOtherType(ListFormat.EVENTS, "a whole number");
        }
        return events;
    }

    private OptionalDouble optional(String name) throws ListFileException {
        OptionalDouble value = attributes.number(name);
        if (value.isEmpty()) {
            refuseOtherType(name, "a number");
        }
        return value;
    }

    private double required(String name) throws ListFileException {
        OptionalDouble value = optional(name);
        if (value.isEmpty()) {
            throw trouble(Kind.MISSING, name, "expected a root attribute of that name, a number, found none");
        }
        return value.getAsDouble();
    }

    private void refuseOtherType(String name, String expected) throws ListFileException {
        if (attributes.has(name)) {
            throw trouble(Kind.WRONG_TYPE, name, "expected the attribute to be " + expected + ", found something else");
        }
    }

    private ListFileException trouble(Kind kind, String place, String trouble) {
        return new ListFileException(kind, path, place, trouble);
    }
}
