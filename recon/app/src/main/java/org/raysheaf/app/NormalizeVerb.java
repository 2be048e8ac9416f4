package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.engine.correct.Attenuation;
import org.raysheaf.engine.correct.Efficiencies;
import org.raysheaf.engine.correct.PhantomMaps;
import org.raysheaf.engine.correct.PileUp;
import org.raysheaf.engine.correct.Randoms;
import org.raysheaf.engine.correct.Scatter;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.ElementResponse;
import org.raysheaf.geometry.response.Positions;
import org.raysheaf.geometry.response.WindowShares;
import org.raysheaf.io.efficiency.EfficiencyFile;
import org.raysheaf.io.list.ListFile;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** Efficiencies of the elements, from a list of a known source. */
@Command(
        name = "normalize",
        description = {
            "Efficiency of every crystal from a list of a source of known activity; dead crystals are found and listed.",
            "The source may be anything that all crystals see well: a cylinder, an annulus, lines, points."
        })
final class NormalizeVerb extends Verb {
    @Parameters(paramLabel = "LIST.h5", description = "The list of the source.")
    private Path input;

    @Option(
            names = "--source",
            required = true,
            paramLabel = "PHANTOM.yaml",
            description = "The source: its activity at the start of the list, and what attenuates.")
    private Path source;

    @Option(names = "--out", required = true, paramLabel = "EFFICIENCY.h5", description = "The file to write.")
    private Path out;

    NormalizeVerb() {}

    @Override
    void run() throws IOException {
        common().requireFree(out);
        Phantom phantom = Phantoms.read(source);
        if (!(phantom.activityBq().value() > 0)) {
            throw new IOException(source + ": expected a source with activity, found none");
        }
        ForkJoinPool pool = common().pool();
        Progress progress = common().progress();
        ListFile opened = ListFile.open(input);
        Reconstruction.requirePairs(input, opened);
        ListHeader header = opened.header();
        Systems systems = Systems.of(header.systemDescription(), input + " (its system)", common(), pool, progress);
        ListFile list = opened.withElements(systems.system().elements());
        PairingRecord pairing = header.pairing();
        Pairing settings = pairing == null ? Pairing.within(1) : pairing.settings();
        Double highest = settings.highestKeV();
        ElementResponse first = systems.response();
        WindowShares window =
                systems.window(first, settings.lowestKeV(), highest == null ? Double.POSITIVE_INFINITY : highest);
        ElementResponse response = first.within(window);
        Attenuation attenuation =
                new Attenuation(PhantomMaps.attenuation(phantom, CorrectedModel.ATTENUATION_VOXEL_MM));
        Image activity = PhantomMaps.activity(phantom, CorrectedModel.ATTENUATION_VOXEL_MM);
        CoincidenceSheaves sheaves = new CoincidenceSheaves(response)
                .locating(new Positions(1, false, false)) // by elements, like the efficiencies
                .with(attenuation);
        Randoms randoms =
                list.attributes().contains(Attribute.DELAYED) ? Randoms.fromDelayed(list, systems.system()) : null;
        double left = pairing == null
                ? 1
                : Randoms.survival(pairing, header.durationS())
                        * PileUp.pairShare(systems.system(), header, pairing, window.pileUpShare());
        Scatter scatter =
                Scatter.of(response, window, activity, attenuation.muPerMm(), CorrectedModel.SCATTER_POINTS, pool);
        Efficiencies found = Efficiencies.of(
                list,
                sheaves,
                activity,
                randoms,
                scatter,
                attenuation,
                1e-3 * header.pairsPerBecquerel() * left,
                pool,
                progress);
        EfficiencyFile.write(out, systems.text(), found.efficiencies(), found.relativeErrors(), common().replace());
        report(found);
    }

    private void report(Efficiencies found) {
        double sum = 0;
        double squares = 0;
        int live = 0;
        for (double e : found.efficiencies()) {
            if (e > 0) {
                sum += e;
                squares += e * e;
                live++;
            }
        }
        double mean = sum / Math.max(1, live);
        double spread = Math.sqrt(Math.max(0, squares / Math.max(1, live) - mean * mean));
        double error = java.util.Arrays.stream(found.relativeErrors()).average().orElse(0);
        Map<String, Object> results = new LinkedHashMap<>();
        results.put("file", out.toString());
        results.put("mean_efficiency", mean);
        results.put("spread", spread);
        results.put("mean_relative_error", error);
        results.put("silent_elements", found.silent());
        results.put("reduced_chi_square_of_block_pairs", found.reducedChiSquare());
        common().print(
                        results,
                        List.of(
                                String.format(
                                        Locale.ROOT,
                                        "efficiencies  mean %.4f, spread %.4f, each known to %.1f %%",
                                        mean,
                                        spread,
                                        100 * error),
                                "silent        " + (found.silent().isEmpty() ? "none" : found.silent()),
                                String.format(
                                        Locale.ROOT,
                                        "fit           chi square per degree of freedom %.2f, of pairs between blocks",
                                        found.reducedChiSquare()),
                                "written " + out,
                                Common.CAUTION));
    }
}
