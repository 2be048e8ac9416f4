package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
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
import org.raysheaf.engine.correct.GeometryFactors;
import org.raysheaf.engine.correct.Randoms;
import org.raysheaf.engine.correct.Scatter;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.EveryNth;
import org.raysheaf.geometry.event.ListPart;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.motion.Motion;
import org.raysheaf.geometry.motion.MotionDescription;
import org.raysheaf.geometry.motion.MovingSheaves;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.FlightTimes;
import org.raysheaf.geometry.response.Positions;
import org.raysheaf.geometry.sheaf.SheafMaker;
import org.raysheaf.io.cache.Cache;
import org.raysheaf.io.description.DescriptionReader;

/**
 * Everything that an estimate needs beside the events: sheaves with all factors, sensitivity, support, background; and what was applied, for
 * the report.
 *
 * @param sheaves makes the rays of events, where the detector stood at their time
 * @param counts expected counts of the whole list per Bq/mL in each voxel
 * @param countsError standard error of these, or null where they are a sum over all pairs
 * @param support where there may be activity
 * @param background b/c of each event
 * @param applied what was applied, with its size
 * @param left what was not
 */
record CorrectedModel(
        SheafMaker sheaves,
        Image counts,
        @Nullable Image countsError,
        Image support,
        EventBackground background,
        Map<String, Object> applied,
        List<String> left) {
    private static final int SCATTER_ROUNDS = 2;

    /** Poses whose mean stands for the sensitivity of a detector that moves; it varies so slowly with the pose that more change nothing. */
    private static final int MOST_POSES = 48;

    /** Enough for a smooth estimate of scatter: ten updates, and about so many events. */
    private static final EstimationSettings ROUGH = new EstimationSettings(2, 5, 0, 3);

    private static final long ROUGH_EVENTS = 500_000;

    /** Builds the model of a list. */
    static CorrectedModel of(
            EventSource list,
            Systems systems,
            ReconstructionPlan plan,
            @Nullable Path base,
            Grid grid,
            Common common,
            ForkJoinPool pool)
            throws IOException {
        return new Builder(list, systems, plan, base, grid, common, pool).build();
    }

    private static final class Builder {
        private final EventSource list;
        private final Systems systems;
        private final ReconstructionPlan plan;
        private final Corrections corrections;
        private final @Nullable Path base;
        private final Grid grid;
        private final ForkJoinPool pool;
        private final Progress progress;
        private final Applied applied = new Applied();

        Builder(
                EventSource list,
                Systems systems,
                ReconstructionPlan plan,
                @Nullable Path base,
                Grid grid,
                Common common,
                ForkJoinPool pool) {
            this.list = list;
            this.systems = systems;
            this.plan = plan;
            this.corrections = plan.corrections();
            this.base = base;
            this.grid = grid;
            this.pool = pool;
            this.progress = common.progress();
        }

        CorrectedModel build() throws IOException {
            MuMap map = map();
            Attenuation attenuation = map == null ? null : map.attenuation();
            PairModel pairs = PairModel.of(list, systems, corrections, attenuation, applied);
            CoincidenceSheaves sheaves = pairs.sheaves(Positions.of(plan.raysPerEvent(), list.attributes()));
            Normalization normalization = normalization();
            if (normalization != null) {
                sheaves = sheaves.withEfficiencies(normalization.efficiencies());
                GeometryFactors geometry = normalization.geometry();
                sheaves = geometry == null ? sheaves : sheaves.with(geometry);
            }
            FlightTimes times = new TimesOfFlight(list, systems.system(), corrections.timeOfFlight())
                    .choose(sheaves, pairs.randoms() != null, applied);
            if (times != null) {
                sheaves = sheaves.with(times);
            }
            Motion motion = motion(map);
            SheafMaker maker = motion == null ? sheaves : new MovingSheaves(sheaves, motion);
            // Counting with fewer pairs per becquerel multiplies the image.
            double perUnit = pairs.pairsPerUnit() / calibration();
            SystemSensitivity sensitivity =
                    systems.sensitivity(sheaves, grid, key(pairs, normalization), plan.sensitivity(), poses(motion));
            applied.add("sensitivity", sensitivity.how());
            Image error = sensitivity.standardError();
            Image counts = Reconstruction.countsPerBqPerMl(sensitivity.image(), perUnit);
            Image countsError = error == null ? null : Reconstruction.countsPerBqPerMl(error, perUnit);
            Image support = FieldOfView.support(
                    counts, FieldOfView.cylinder(systems.system().fieldOfView().radiusMm()));
            Stage stage = new Stage(pairs, sheaves, maker, perUnit, counts, support);
            Backgrounds backgrounds = stage.backgrounds(null);
            if (corrections.scatter() && map != null && pairs.window() != null) {
                backgrounds = withScatter(stage, map, backgrounds);
            } else {
                applied.leave("scatter in the object");
                if (pairs.randoms() != null || attenuation != null) {
                    report(backgrounds.balance(list, pool), pairs, null);
                }
                if (map != null && map.volume() != null) {
                    outside(map.requireCovers(stage.roughImage(backgrounds)));
                }
            }
            return new CorrectedModel(
                    maker, counts, countsError, support, backgrounds.of(list, pool), applied.done(), applied.left());
        }

        /** What stays the same while scatter is estimated. */
        private final class Stage {
            final PairModel pairs;
            final CoincidenceSheaves sheaves;
            final SheafMaker maker;
            final double perUnit;
            final Image counts;
            final Image support;

            Stage(
                    PairModel pairs,
                    CoincidenceSheaves sheaves,
                    SheafMaker maker,
                    double perUnit,
                    Image counts,
                    Image support) {
                this.pairs = pairs;
                this.sheaves = sheaves;
                this.maker = maker;
                this.perUnit = perUnit;
                this.counts = counts;
                this.support = support;
            }

            Backgrounds backgrounds(@Nullable Scatter scatter) {
                return new Backgrounds(sheaves, pairs.randoms(), scatter, pairs.attenuation(), perUnit);
            }

            /** An image of few passes, and of a part of the events if there are very many. */
            Image roughImage(Backgrounds backgrounds) throws IOException {
                int n = (int) Math.max(1, list.events() / ROUGH_EVENTS);
                EventSource some = new EveryNth(list, n);
                Image fewer = counts.copy();
                for (int j = 0; j < fewer.values().length; j++) {
                    fewer.values()[j] /= n;
                }
                EventStore store = EventLoader.load(
                        some,
                        maker,
                        support,
                        EventSelection.ALL,
                        ROUGH.subsets(),
                        backgrounds.of(some, pool),
                        pool,
                        Progress.SILENT);
                return new Estimator(store, fewer, ROUGH, pool)
                        .run(PassListener.SILENT, Progress.SILENT)
                        .image();
            }
        }

        private Backgrounds withScatter(Stage stage, MuMap map, Backgrounds without) throws IOException {
            Backgrounds backgrounds = without;
            Backgrounds.Balance counted = without.balance(list, pool);
            for (int round = 0; round < SCATTER_ROUNDS; round++) {
                progress.begin("estimating scatter", 1, "rounds");
                Image image = stage.roughImage(backgrounds);
                Scatter scatter = stage.pairs.scatter(image, stage.sheaves.times(), pool);
                if (scatter == null) {
                    throw new IllegalStateException("scatter needs attenuation and window");
                }
                Backgrounds.Balance balance = stage.backgrounds(scatter).balance(counted, pool);
                Scatter scaled = scatter.scaled(balance.scatterScale());
                progress.end(String.format(Locale.ROOT, "%.0f pairs, scale %.3f", balance.scatter(), scaled.scale()));
                backgrounds = stage.backgrounds(scaled);
                if (round == SCATTER_ROUNDS - 1) {
                    report(balance, stage.pairs, scaled);
                    if (map.volume() != null) {
                        outside(map.requireCovers(image));
                    }
                }
            }
            return backgrounds;
        }

        /** Where the detector stood when, if it moved. Attenuation would have to follow the motion for every pair, which it does not yet. */
        private @Nullable Motion motion(@Nullable MuMap map) throws IOException {
            String name = plan.motion();
            if (name == null) {
                return null;
            }
            if (map != null) {
                throw new IOException(name + ": motion cannot be combined with attenuation yet; leave out one of"
                        + " motion and corrections.attenuation");
            }
            if (!list.attributes().contains(Attribute.TIME)) {
                throw new IOException(name + ": motion needs the times of events, but the list has no column "
                        + Attribute.TIME.columnName());
            }
            MotionDescription description = DescriptionReader.read(resolve(name), "motion", MotionDescription.class);
            applied.add(
                    "motion",
                    Map.of(
                            "file",
                            name,
                            "of",
                            description.of(),
                            "poses",
                            description.poses().size()));
            org.raysheaf.geometry.detector.FieldOfView view = systems.system().fieldOfView();
            return Motion.of(description, Math.hypot(view.radiusMm(), 0.5 * view.lengthMm()));
        }

        private double fromS() {
            return list instanceof ListPart part ? part.fromS() : 0;
        }

        private double toS() {
            return list instanceof ListPart part ? part.toS() : list.header().durationS();
        }

        private List<Motion.Weighted> poses(@Nullable Motion motion) {
            return motion == null ? List.of() : motion.over(fromS(), toS(), MOST_POSES);
        }

        private void outside(double share) {
            applied.add("share_of_activity_outside_the_attenuation_volume", share);
        }

        private void report(Backgrounds.Balance balance, PairModel pairs, @Nullable Scatter scatter) {
            if (pairs.attenuation() != null) {
                applied.add(
                        "attenuation",
                        Map.of("smallest_factor", balance.attenuationLow(), "mean_factor", balance.attenuationMean()));
            }
            Map<String, Object> events = new LinkedHashMap<>();
            events.put("prompts", balance.prompts());
            double rest = balance.prompts();
            Randoms randoms = pairs.randoms();
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
            applied.add("events_across_the_field_of_view", events);
        }

        private @Nullable MuMap map() throws IOException {
            Corrections.Matter matter = corrections.attenuation();
            if (matter == null) {
                return null;
            }
            String phantom = matter.phantom();
            String volume = matter.volume();
            if (phantom != null) {
                return MuMap.of(Phantoms.read(resolve(phantom)));
            }
            if (volume != null) {
                return MuMap.read(resolve(volume), systems.system().fieldOfView());
            }
            throw new IllegalStateException("neither phantom nor volume");
        }

        private @Nullable Normalization normalization() throws IOException {
            String name = corrections.efficiencies();
            if (name == null) {
                applied.leave("normalization");
                return null;
            }
            Normalization found = Normalization.read(resolve(name), systems);
            applied.add("normalization", found.row(name));
            return found;
        }

        /** The factor that a measured phantom asks for. */
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
            applied.add(
                    "calibration",
                    Map.of("factor", calibration.factor(), "relative_error", calibration.relativeError()));
            return calibration.factor();
        }

        private Path resolve(String name) {
            return base == null ? Path.of(name) : base.resolveSibling(name);
        }

        /** What the sensitivity depends on beside system and grid. */
        private static String key(PairModel pairs, @Nullable Normalization normalization) {
            StringBuilder key = new StringBuilder();
            if (pairs.window() != null) {
                key.append("window ").append(Cache.digest(pairs.window().toFloats()));
            }
            if (normalization != null) {
                key.append(" efficiencies ").append(normalization.digest());
            }
            if (pairs.attenuation() != null) {
                Image map = pairs.attenuation().muPerMm();
                key.append(" attenuation ").append(map.grid()).append(Cache.digest(map.values()));
            }
            return key.toString();
        }
    }
}
