package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.EstimationSettings;
import org.raysheaf.engine.Estimator;
import org.raysheaf.engine.FieldOfView;
import org.raysheaf.engine.PassListener;
import org.raysheaf.engine.correct.Attenuation;
import org.raysheaf.engine.correct.Backgrounds;
import org.raysheaf.engine.correct.PhantomMaps;
import org.raysheaf.engine.correct.PileUp;
import org.raysheaf.engine.correct.Randoms;
import org.raysheaf.engine.correct.Scatter;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.ElementResponse;
import org.raysheaf.geometry.response.FlightTimes;
import org.raysheaf.geometry.response.WindowShares;
import org.raysheaf.io.cache.Cache;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.io.efficiency.EfficiencyFile;
import org.raysheaf.io.volume.VolumeFile;

/**
 * Everything that an estimate needs beside the events: sheaves with all factors, sensitivity, support, background; and what was applied, for
 * the report.
 *
 * @param sheaves the pairs with their factors
 * @param counts expected counts of the whole list per Bq/mL in each voxel
 * @param support where there may be activity
 * @param background b/c of each event
 * @param applied what was applied, with its size
 * @param left what was not
 */
record CorrectedModel(
        CoincidenceSheaves sheaves,
        Image counts,
        Image support,
        EventBackground background,
        Map<String, Object> applied,
        List<String> left) {
    static final double ATTENUATION_VOXEL_MM = 1;
    static final int SCATTER_POINTS = 500;
    private static final int SCATTER_ROUNDS = 2;

    /** Enough for a smooth estimate of scatter: ten updates. */
    private static final EstimationSettings ROUGH = new EstimationSettings(2, 5, 0, 3);

    /** Builds the model of a list. */
    static CorrectedModel of(
            EventSource list,
            Systems systems,
            Corrections corrections,
            @Nullable Path base,
            Grid grid,
            Common common,
            ForkJoinPool pool)
            throws IOException {
        return new Builder(list, systems, corrections, base, grid, common, pool).build();
    }

    private static final class Builder {
        private final EventSource list;
        private final ListHeader header;
        private final Systems systems;
        private final Corrections corrections;
        private final @Nullable Path base;
        private final Grid grid;
        private final ForkJoinPool pool;
        private final Progress progress;
        private final Map<String, Object> applied = new LinkedHashMap<>();
        private final List<String> left = new ArrayList<>();

        Builder(
                EventSource list,
                Systems systems,
                Corrections corrections,
                @Nullable Path base,
                Grid grid,
                Common common,
                ForkJoinPool pool) {
            this.list = list;
            this.header = list.header();
            this.systems = systems;
            this.corrections = corrections;
            this.base = base;
            this.grid = grid;
            this.pool = pool;
            this.progress = common.progress();
        }

        CorrectedModel build() throws IOException {
            applied.put("live_fraction", header.liveTimeS() / header.durationS());
            if (header.nuclide() != null) {
                applied.put("branching", header.nuclide().positronBranching());
                applied.put(
                        "decay_mean_factor", header.nuclide().effectiveTimeS(header.durationS()) / header.durationS());
            } else {
                left.add("decay");
                left.add("branching");
            }
            ElementResponse response = systems.response();
            WindowShares window = window(response);
            if (window != null) {
                response = response.within(window);
            }
            CoincidenceSheaves sheaves = new CoincidenceSheaves(response);
            double[] efficiencies = efficiencies();
            if (efficiencies != null) {
                sheaves = sheaves.withEfficiencies(efficiencies);
            }
            Attenuation attenuation = attenuation();
            if (attenuation != null) {
                sheaves = sheaves.with(attenuation);
            }
            double survival = survival(window);
            survival /= calibration();
            double perUnit = 1e-3 * header.pairsPerBecquerel() * survival;
            Image counts = Reconstruction.countsPerBqPerMl(
                    systems.sensitivity(sheaves, grid, key(window, efficiencies, attenuation)),
                    header.pairsPerBecquerel() * survival);
            Image support = FieldOfView.support(
                    counts, FieldOfView.cylinder(systems.system().fieldOfView().radiusMm()));
            Randoms randoms = randoms();
            FlightTimes times = new TimesOfFlight(list, systems.system(), corrections.timeOfFlight())
                    .choose(sheaves, randoms != null, applied, left);
            if (times != null) {
                sheaves = sheaves.with(times);
            }
            Backgrounds backgrounds = new Backgrounds(sheaves, randoms, null, attenuation, perUnit);
            if (corrections.scatter() && attenuation != null && window != null) {
                backgrounds = withScatter(
                        sheaves, response, window, randoms, attenuation, perUnit, backgrounds, counts, support);
            } else {
                left.add("scatter in the object");
                report(backgrounds.balance(list, pool), randoms, null, attenuation);
            }
            return new CorrectedModel(sheaves, counts, support, backgrounds.of(list), applied, left);
        }

        private Backgrounds withScatter(
                CoincidenceSheaves sheaves,
                ElementResponse response,
                WindowShares window,
                @Nullable Randoms randoms,
                Attenuation attenuation,
                double perUnit,
                Backgrounds without,
                Image counts,
                Image support)
                throws IOException {
            Backgrounds backgrounds = without;
            for (int round = 0; round < SCATTER_ROUNDS; round++) {
                EventStore store = EventLoader.load(
                        list,
                        sheaves,
                        support,
                        EventSelection.ALL,
                        ROUGH.subsets(),
                        backgrounds.of(list),
                        pool,
                        Progress.SILENT);
                Image image = new Estimator(store, counts, ROUGH, pool)
                        .run(PassListener.SILENT, Progress.SILENT)
                        .image();
                progress.begin("estimating scatter", 1, "rounds");
                Scatter scatter = Scatter.of(
                        response, window, image, attenuation.muPerMm(), SCATTER_POINTS, sheaves.times(), pool);
                Backgrounds.Balance balance =
                        new Backgrounds(sheaves, randoms, scatter, attenuation, perUnit).balance(list, pool);
                double scale = balance.scatterScale();
                progress.end(String.format(Locale.ROOT, "%.0f pairs, scale %.3f", balance.scatter(), scale));
                backgrounds = new Backgrounds(sheaves, randoms, scatter.scaled(scale), attenuation, perUnit);
                if (round == SCATTER_ROUNDS - 1) {
                    report(balance, randoms, scatter.scaled(scale), attenuation);
                }
            }
            return backgrounds;
        }

        private void report(
                Backgrounds.Balance balance,
                @Nullable Randoms randoms,
                @Nullable Scatter scatter,
                @Nullable Attenuation attenuation) {
            if (attenuation != null) {
                applied.put(
                        "attenuation",
                        Map.of("smallest_factor", balance.attenuationLow(), "mean_factor", balance.attenuationMean()));
            }
            Map<String, Object> events = new LinkedHashMap<>();
            events.put("prompts", balance.prompts());
            double rest = balance.prompts();
            if (randoms != null) {
                events.put("randoms", balance.randoms());
                events.put("randoms_relative_error", randoms.relativeError());
                rest -= balance.randoms();
            }
            if (scatter != null) {
                events.put("scatter", balance.scatter() * scatter.scale());
                events.put("scatter_scale", scatter.scale());
                events.put("events_clear_of_the_object", balance.promptsClear());
                rest -= balance.scatter() * scatter.scale();
            }
            events.put("trues", rest);
            applied.put("events_across_the_field_of_view", events);
        }

        private @Nullable WindowShares window(ElementResponse response) {
            boolean ideal = systems.system().blocks().stream()
                    .allMatch(block -> block.material().ideal());
            if (!corrections.window() || ideal) {
                if (!ideal) {
                    left.add("energy window and scatter between crystals");
                }
                return null;
            }
            PairingRecord pairing = header.pairing();
            Double low = corrections.lowestKeV();
            Double high = corrections.highestKeV();
            if (low == null && pairing != null) {
                low = pairing.settings().lowestKeV();
            }
            if (high == null && pairing != null) {
                high = pairing.settings().highestKeV();
            }
            double lowest = low == null ? 0 : low;
            double highest = high == null ? Double.POSITIVE_INFINITY : high;
            WindowShares shares = systems.window(response, lowest, highest);
            Map<String, Object> row = new LinkedHashMap<>();
            row.put("lowest_keV", lowest);
            row.put("highest_keV", Double.isInfinite(highest) ? "none" : highest);
            row.put("signals_per_first_interaction", shares.mean());
            row.put("relative_error_of_an_element", shares.relativeError());
            row.put("deeper_than_first_interaction_mm", shares.deeperMm());
            applied.put("window", row);
            return shares;
        }

        private double @Nullable [] efficiencies() throws IOException {
            String name = corrections.efficiencies();
            if (name == null) {
                left.add("normalization");
                return null;
            }
            EfficiencyFile file = EfficiencyFile.read(resolve(name));
            file.requireSystem(systems.text(), systems.system().elements());
            applied.put(
                    "normalization",
                    Map.of("file", name, "silent_elements", file.silent().size()));
            return file.efficiencies();
        }

        private @Nullable Attenuation attenuation() throws IOException {
            Corrections.Matter matter = corrections.attenuation();
            if (matter == null) {
                left.add("attenuation");
                return null;
            }
            String phantomFile = matter.phantom();
            String volumeFile = matter.volume();
            Image map;
            if (phantomFile != null) {
                Phantom phantom = Phantoms.read(resolve(phantomFile));
                map = PhantomMaps.attenuation(phantom, ATTENUATION_VOXEL_MM);
            } else if (volumeFile != null) {
                map = VolumeFile.read(resolve(volumeFile)).image().copy();
                for (int j = 0; j < map.values().length; j++) {
                    float perCm = map.values()[j];
                    if (!(perCm >= 0 && perCm < 50)) {
                        throw new IOException(
                                volumeFile + ": expected attenuation coefficients at 511 keV in 1/cm, from 0 to 50;"
                                        + " found " + perCm + " in voxel " + j);
                    }
                    map.values()[j] = perCm / 10;
                }
            } else {
                throw new IllegalStateException("neither phantom nor volume");
            }
            return new Attenuation(map);
        }

        private double survival(@Nullable WindowShares window) {
            PairingRecord pairing = header.pairing();
            if (!corrections.losses() || pairing == null) {
                left.add("losses in pairing and by pile-up");
                return 1;
            }
            double unspoilt = Randoms.survival(pairing, header.durationS());
            double piled =
                    window == null ? 1 : PileUp.pairShare(systems.system(), header, pairing, window.pileUpShare());
            applied.put("share_of_pairs_not_spoilt_by_a_third_photon", unspoilt);
            applied.put("share_of_pairs_left_by_pile_up", piled);
            return unspoilt * piled;
        }

        /** The factor that a measured phantom asks for; counting with fewer pairs per becquerel multiplies the image with it. */
        private double calibration() throws IOException {
            String name = corrections.calibration();
            if (name == null) {
                return 1;
            }
            Calibration calibration = DescriptionReader.read(resolve(name), "calibration", Calibration.class);
            String system = systems.system().description().name();
            if (!calibration.system().equals(system)) {
                throw new IOException(
                        name + ": expected a calibration of " + system + ", found one of " + calibration.system());
            }
            applied.put(
                    "calibration",
                    Map.of("factor", calibration.factor(), "relative_error", calibration.relativeError()));
            return calibration.factor();
        }

        private @Nullable Randoms randoms() throws IOException {
            Corrections.RandomsFrom from = corrections.randoms();
            PairingRecord pairing = header.pairing();
            if (from == Corrections.RandomsFrom.AUTO) {
                boolean singles = pairing != null && !pairing.singles().isEmpty();
                from = list.attributes().contains(Attribute.DELAYED)
                        ? Corrections.RandomsFrom.DELAYED
                        : singles ? Corrections.RandomsFrom.SINGLES : Corrections.RandomsFrom.NONE;
            }
            if (from == Corrections.RandomsFrom.NONE) {
                left.add("randoms");
                return null;
            }
            Randoms randoms = from == Corrections.RandomsFrom.DELAYED
                    ? Randoms.fromDelayed(list, systems.system())
                    : Randoms.fromSingles(list, systems.system());
            applied.put(
                    "randoms",
                    Map.of(
                            "from", from.name().toLowerCase(Locale.ROOT),
                            "all_pairs", randoms.total(),
                            "prompt_randoms_per_delayed_pair", Randoms.promptShare(pairing)));
            return randoms;
        }

        private Path resolve(String name) {
            return base == null ? Path.of(name) : base.resolveSibling(name);
        }

        /** What the sensitivity depends on beside system and grid. */
        private static String key(
                @Nullable WindowShares window, double @Nullable [] efficiencies, @Nullable Attenuation attenuation) {
            StringBuilder key = new StringBuilder();
            if (window != null) {
                key.append("window ").append(Cache.digest(window.toFloats()));
            }
            if (efficiencies != null) {
                float[] row = new float[efficiencies.length];
                for (int e = 0; e < row.length; e++) {
                    row[e] = (float) efficiencies[e];
                }
                key.append(" efficiencies ").append(Cache.digest(row));
            }
            if (attenuation != null) {
                Image map = attenuation.muPerMm();
                key.append(" attenuation ").append(map.grid()).append(Cache.digest(map.values()));
            }
            return key.toString();
        }
    }
}
