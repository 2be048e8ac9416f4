package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.engine.correct.Backgrounds;
import org.raysheaf.engine.correct.Efficiencies;
import org.raysheaf.engine.correct.GeometryFactors;
import org.raysheaf.engine.correct.Goodness;
import org.raysheaf.engine.correct.PhantomMaps;
import org.raysheaf.engine.correct.Scatter;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.Positions;
import org.raysheaf.io.efficiency.EfficiencyFile;
import org.raysheaf.io.list.ListFile;
import org.raysheaf.io.picture.HeatMap;
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
    /** Residuals beyond so many standard errors look alike. */
    private static final double MOST_SHOWN = 5;

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
        Path picture = residuals(out);
        common().requireFree(out);
        common().requireFree(picture);
        Phantom phantom = Phantoms.read(source);
        if (!(phantom.activityBq().value() > 0)) {
            throw new IOException(source + ": expected a source with activity, found none");
        }
        ForkJoinPool pool = common().pool();
        Progress progress = common().progress();
        ListFile opened = ListFile.open(input);
        Reconstruction.requirePairs(input, opened);
        Systems systems =
                Systems.of(opened.header().systemDescription(), input + " (its system)", common(), pool, progress);
        ListFile list = opened.withElements(systems.system().elements());
        Image activity = PhantomMaps.activity(phantom, MuMap.VOXEL_MM);
        PairModel pairs = PairModel.of(
                list, systems, Corrections.OF_A_BARE_LIST, MuMap.of(phantom).attenuation(), new Applied());
        CoincidenceSheaves sheaves =
                pairs.sheaves(new Positions(1, false, false)); // by elements, like the efficiencies
        Scatter scatter = pairs.scatter(activity, null, pool);
        if (scatter != null) {
            // Not scaled on clear lines as in a reconstruction: what is missing there is scatter or efficiency, and
            // nobody knows yet which.
            scatter = scatter.scaled(Backgrounds.Balance.PRIOR_SCALE);
        }
        Efficiencies found = Efficiencies.of(
                list,
                sheaves,
                activity,
                pairs.randoms(),
                scatter,
                pairs.attenuation(),
                pairs.pairsPerUnit(),
                pool,
                progress);
        GeometryFactors geometry = found.geometry();
        EfficiencyFile.write(
                out,
                systems.text(),
                found.efficiencies(),
                found.relativeErrors(),
                new EfficiencyFile.Geometry(geometry.pair(), geometry.column(), geometry.row()),
                common().replace());
        HeatMap.write(
                "pairs of blocks: (found - expected) / standard error",
                "block",
                List.of(
                        new HeatMap.Panel("efficiencies alone", boxed(found.pullsAlone())),
                        new HeatMap.Panel("with block geometry", boxed(found.pulls()))),
                MOST_SHOWN,
                picture,
                common().replace());
        report(found, picture);
    }

    /** Where the picture of the residuals goes: beside the efficiencies. */
    private static Path residuals(Path out) {
        String name = out.getFileName().toString();
        String stem = name.endsWith(".h5") ? name.substring(0, name.length() - 3) : name;
        return out.resolveSibling(stem + "-residuals.png");
    }

    private static List<Double> boxed(double[] values) {
        return Arrays.stream(values).boxed().toList();
    }

    private void report(Efficiencies found, Path picture) {
        Map<String, Object> results = new LinkedHashMap<>();
        results.put("file", out.toString());
        results.put("mean_efficiency", found.mean());
        results.put("spread", found.spread());
        results.put("mean_relative_error", found.meanRelativeError());
        results.put("silent_elements", found.silent());
        results.put("rounds", found.rounds());
        results.put("last_change", found.lastChange());
        results.put("reduced_chi_square", found.goodness());
        results.put("residuals", picture.toString());
        List<String> lines = new ArrayList<>();
        lines.add(String.format(
                Locale.ROOT,
                "efficiencies  mean %.4f, spread %.4f, each known to %.1f %%",
                found.mean(),
                found.spread(),
                100 * found.meanRelativeError()));
        lines.add("silent        " + (found.silent().isEmpty() ? "none" : found.silent()));
        lines.add(String.format(
                Locale.ROOT, "fit           %d rounds, last change %.1e", found.rounds(), found.lastChange()));
        for (Goodness goodness : found.goodness()) {
            lines.add(String.format(
                    Locale.ROOT,
                    "              chi square per degree of freedom of %s: %.2f, with efficiencies alone %.2f",
                    goodness.of(),
                    goodness.withGeometry(),
                    goodness.efficienciesAlone()));
        }
        lines.add("written " + out);
        lines.add("        " + picture);
        lines.add(Common.CAUTION);
        common().print(results, lines);
    }
}
