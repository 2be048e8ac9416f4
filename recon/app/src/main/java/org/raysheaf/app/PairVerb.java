package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Set;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.event.PairingTally;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.list.ListFile;
import org.raysheaf.io.list.ListWriter;
import org.raysheaf.transport.SinglesPairing;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** Singles to coincidences. */
@Command(
        name = "pair",
        description = {
            "A list of coincidences from a list of singles. Two singles pair if their times differ by at most the window;",
            "which blocks may pair follows from the system (blocks_apart)."
        })
final class PairVerb extends Verb {
    @Parameters(paramLabel = "SINGLES.h5", description = "The list of singles.")
    private Path input;

    @Option(names = "--out", required = true, paramLabel = "LIST.h5", description = "The list to write.")
    private Path out;

    @Option(
            names = "--window-ns",
            defaultValue = "4",
            paramLabel = "NS",
            description = "One-sided window; randoms come at the rate 2 x window x S1 x S2. Default: ${DEFAULT-VALUE}.")
    private double windowNs;

    @Option(
            names = "--lowest-keV",
            defaultValue = "0",
            paramLabel = "KEV",
            description = "Leave photons below this energy aside. Default: ${DEFAULT-VALUE}.")
    private double lowestKeV;

    @Option(names = "--highest-keV", paramLabel = "KEV", description = "Leave photons above this energy aside.")
    private @Nullable Double highestKeV;

    @Option(
            names = "--delay-ns",
            paramLabel = "NS",
            description = "Also make delayed pairs, from a second window so much later; they tell the randoms.")
    private @Nullable Double delayNs;

    @Option(
            names = "--crowds",
            defaultValue = "discard",
            paramLabel = "RULE",
            converter = CrowdsReader.class,
            description =
                    "More than two singles in one window: discard, every_pair, first_two or strongest_two. Default: ${DEFAULT-VALUE}.")
    private Pairing.Crowds crowds;

    @Option(
            names = "--disorder-ns",
            defaultValue = "1000",
            paramLabel = "NS",
            description = "How far singles may stand out of their order in time. Default: ${DEFAULT-VALUE}.")
    private double disorderNs;

    @Option(names = "--small", description = "Compress the list: about half the size, slower to write.")
    private boolean small;

    PairVerb() {}

    /** Reads a rule for crowds, spelled as in description files. */
    static final class CrowdsReader implements picocli.CommandLine.ITypeConverter<Pairing.Crowds> {
        CrowdsReader() {}

        @Override
        public Pairing.Crowds convert(String value) {
            for (Pairing.Crowds rule : Pairing.Crowds.values()) {
                if (rule.name().equalsIgnoreCase(value.replace('-', '_'))) {
                    return rule;
                }
            }
            throw new picocli.CommandLine.TypeConversionException(
                    "expected discard, every_pair, first_two or strongest_two, found " + value);
        }
    }

    @Override
    void run() throws IOException {
        common().requireFree(out);
        Pairing pairing = new Pairing(windowNs, lowestKeV, highestKeV, delayNs, crowds, disorderNs);
        ListFile opened = ListFile.open(input);
        if (opened.kind() != ListKind.SINGLES) {
            throw new IOException(input + ": expected a list of singles, found "
                    + opened.kind().phrase());
        }
        opened.warnings().forEach(common()::note);
        ForkJoinPool pool = common().pool();
        Systems systems = Systems.of(
                opened.header().systemDescription(), input + " (its system)", common(), pool, common().progress());
        ListFile singles = opened.withElements(systems.system().elements());
        Set<Attribute> columns = EnumSet.copyOf(singles.attributes());
        columns.addAll(singles.truth());
        SinglesPairing work = new SinglesPairing(systems.system(), pairing, columns);
        PairingTally tally;
        try (ListWriter writer = ListWriter.create(
                work.attributes(), out, common().replace(), small ? Compression.DEFLATE : Compression.NONE)) {
            PairingRecord record = work.run(singles, writer, common().progress());
            writer.commit(SinglesPairing.header(singles.header(), record));
            tally = record.tally();
        }
        List<String> lines = new ArrayList<>(lines(tally));
        lines.add("written " + out);
        lines.add(Common.CAUTION);
        common().print(Map.of("list", out.toString(), "pairing", tally), lines);
    }

    /** What became of singles, for people. */
    static List<String> lines(PairingTally tally) {
        String row = "           %,12d %s";
        return List.of(
                String.format(Locale.ROOT, "singles    %,12d read", tally.singles()),
                String.format(Locale.ROOT, row, tally.paired(), "in groups that made pairs"),
                String.format(Locale.ROOT, row, tally.alone(), "alone in their window"),
                String.format(Locale.ROOT, row, tally.crowded(), "in crowds that made none"),
                String.format(Locale.ROOT, row, tally.tooClose(), "in blocks closer than blocks_apart"),
                String.format(Locale.ROOT, row, tally.outsideEnergies(), "outside the energy window"),
                String.format(Locale.ROOT, "pairs      %,12d prompt", tally.prompts()),
                String.format(Locale.ROOT, row, tally.delayed(), "delayed"));
    }
}
