package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.list.ListWriter;
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
                "A list of coincidences from a phantom and a detector. For now photons fly straight: no scatter, no randoms, no blur.")
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
        Acquisition acquisition = seeded(DescriptionReader.read(input, "acquisition", Acquisition.class));
        ForkJoinPool pool = common().pool();
        Progress progress = common().progress();
        Systems systems = Systems.read(input.resolveSibling(acquisition.system()), common(), pool, progress);
        Phantom phantom = new Phantom(DescriptionReader.read(
                input.resolveSibling(acquisition.phantom()), "phantom", PhantomDescription.class));
        Simulation simulation = new Simulation(acquisition, phantom, systems.system(), systems.text());
        Compression compression = small ? Compression.DEFLATE : Compression.NONE;
        Simulated simulated;
        try (ListWriter writer = ListWriter.create(acquisition.attributes(), out, common().replace(), compression)) {
            simulated = simulation.run(writer, pool, progress);
            writer.commit(simulated.header());
        }
        report(simulated);
    }

    private Acquisition seeded(Acquisition a) {
        return new Acquisition(
                a.system(),
                a.phantom(),
                a.nuclide(),
                a.durationS(),
                a.liveTimeS(),
                a.start(),
                common().seed().orElse(a.seed()),
                a.maxEvents(),
                a.timeDifferences(),
                a.energies());
    }

    private void report(Simulated simulated) {
        double share = simulated.events() / (double) Math.max(1, simulated.pairs());
        Map<String, Object> results = new LinkedHashMap<>();
        results.put("list", out.toString());
        results.put("pairs_emitted", simulated.pairs());
        results.put("events", simulated.events());
        results.put("duration_s", simulated.header().durationS());
        common().print(
                        results,
                        List.of(
                                String.format(
                                        Locale.ROOT,
                                        "%,d pairs emitted in %.3f s, %,d recorded (%.3f ± %.3f %%)",
                                        simulated.pairs(),
                                        simulated.header().durationS(),
                                        simulated.events(),
                                        100 * share,
                                        100 * Math.sqrt(share * (1 - share) / Math.max(1, simulated.pairs()))),
                                "written " + out,
                                Common.CAUTION));
    }
}
