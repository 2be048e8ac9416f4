package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.geometry.event.PairingTally;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.list.ListWriter;
import org.raysheaf.io.result.NotKnown;
import org.raysheaf.transport.Acquisition;
import org.raysheaf.transport.Simulated;
import org.raysheaf.transport.Simulation;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** Photons through phantom and detectors. */
@Command(
        name = "simulate",
        description =
                "A list of coincidences or of singles from a phantom and a detector: range, scatter, readout, dead time, pairing.")
final class SimulateVerb extends Verb {
    @Parameters(paramLabel = "ACQUISITION.yaml", description = "What to simulate; paths in it start from its folder.")
    private Path input;

    @Option(names = "--out", required = true, paramLabel = "LIST.h5", description = "The list to write.")
    private Path out;

    @Option(names = "--small", description = "Compress the list: about half the size, slower to write.")
    private boolean small;

    SimulateVerb() {}

    @Override
    void run() throws IOException {
        common().requireFree(out);
        Acquisition read = DescriptionReader.read(input, "acquisition", Acquisition.class);
        Acquisition acquisition = common().seed().map(read::seeded).orElse(read);
        ForkJoinPool pool = common().pool();
        Progress progress = common().progress();
        Systems systems = Systems.read(input.resolveSibling(acquisition.system()), common(), pool, progress);
        Phantom phantom = Phantoms.read(input.resolveSibling(acquisition.phantom()));
        Simulation simulation = new Simulation(acquisition, phantom, systems.system(), systems.text());
        Compression compression = small ? Compression.DEFLATE : Compression.NONE;
        Simulated simulated;
        try (ListWriter writer = ListWriter.create(simulation.attributes(), out, common().replace(), compression)) {
            simulated = simulation.run(writer, pool, progress);
            writer.commit(simulated.header());
        }
        report(simulated);
    }

    private void report(Simulated simulated) {
        PairingTally pairing = simulated.pairing();
        Map<String, Object> results = new LinkedHashMap<>();
        results.put("list", out.toString());
        results.put("decays", simulated.decays());
        results.put("positrons", simulated.positrons());
        results.put("events", simulated.events());
        results.put("duration_s", simulated.header().durationS());
        results.put("live_time_s", simulated.header().liveTimeS());
        results.put("pairing", pairing == null ? new NotKnown("the list holds singles") : pairing);
        List<String> lines = new ArrayList<>();
        lines.add(String.format(
                Locale.ROOT,
                "%,d decays with %,d positrons in %.3f s, %.2f %% of it live",
                simulated.decays(),
                simulated.positrons(),
                simulated.header().durationS(),
                100 * simulated.liveFraction()));
        if (pairing != null) {
            lines.addAll(PairVerb.lines(pairing));
        }
        lines.add(String.format(
                Locale.ROOT, "events     %,12d in the list; %s per decay", simulated.events(), share(simulated)));
        lines.add("written " + out);
        lines.add(Common.CAUTION);
        common().print(results, lines);
    }

    private static String share(Simulated simulated) {
        double decays = Math.max(1, simulated.decays());
        // with max_events the last slice goes on a little beyond the list, in decays and pairs alike
        PairingTally pairing = simulated.pairing();
        double events = pairing == null ? simulated.events() : pairing.prompts() + pairing.delayed();
        double share = events / decays;
        return String.format(Locale.ROOT, "%.3f ± %.3f %%", 100 * share, 100 * Math.sqrt(share / decays));
    }
}
