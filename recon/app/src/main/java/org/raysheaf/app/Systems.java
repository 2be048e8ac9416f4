package org.raysheaf.app;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.engine.CoarseGrid;
import org.raysheaf.engine.SampledSensitivity;
import org.raysheaf.engine.Sensitivity;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.motion.Motion;
import org.raysheaf.geometry.motion.MovingCatalogue;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.ElementResponse;
import org.raysheaf.geometry.response.WindowShares;
import org.raysheaf.geometry.sheaf.SheafCatalogue;
import org.raysheaf.io.cache.Cache;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.transport.WindowResponse;

/** A detector system with what is made once per system and kept: its response and its sensitivity. */
final class Systems {
    /** To be raised whenever the numbers that come out change: then nothing that was kept before is taken. */
    private static final String REVISION = "5";

    /** The factor of one class of crystals is then known to 1 %, their mean to 0.05 %. */
    private static final long WINDOW_PHOTONS = 10_000_000;

    private static final long WINDOW_SEED = 1;

    private static final long SAMPLING_SEED = 1;

    /** How far interpolation and the projector reach beyond the field of view, where lines must then be drawn as well (coarse voxels). */
    private static final double MARGIN_VOXELS = 3;

    private final DetectorSystem system;
    private final String text;
    private final Common common;
    private final ForkJoinPool pool;
    private final Progress progress;
    private final Cache cache;

    private Systems(String text, String source, Common common, ForkJoinPool pool, Progress progress, Cache cache)
            throws IOException {
        this.text = text;
        this.common = common;
        this.pool = pool;
        this.progress = progress;
        this.cache = cache;
        this.system = new DetectorSystem(DescriptionReader.readText(text, source, "system", SystemDescription.class));
    }

    static Systems of(String text, String source, Common common, ForkJoinPool pool, Progress progress)
            throws IOException {
        return new Systems(text, source, common, pool, progress, common.cache());
    }

    /** The same with a cache of its own. */
    static Systems of(String text, String source, Common common, ForkJoinPool pool, Progress progress, Path cacheFolder)
            throws IOException {
        return new Systems(text, source, common, pool, progress, new Cache(cacheFolder));
    }

    static Systems read(Path file, Common common, ForkJoinPool pool, Progress progress) throws IOException {
        DescriptionReader.read(file, "system", SystemDescription.class); // for errors that name the file
        return new Systems(
                Files.readString(file, StandardCharsets.UTF_8),
                file.toString(),
                common,
                pool,
                progress,
                common.cache());
    }

    DetectorSystem system() {
        return system;
    }

    String text() {
        return text;
    }

    /** Where photons first interact, from the cache if it is there. */
    ElementResponse response() {
        String digest = Cache.digest(REVISION, text);
        return cache.find("response", digest).flatMap(this::restore).orElseGet(() -> {
            ElementResponse made = ElementResponse.tabulate(system, pool, progress);
            common.keep(cache, "response", digest, made.tables());
            return made;
        });
    }

    /** The sheaves of the system by first interactions alone. */
    CoincidenceSheaves sheaves() {
        return new CoincidenceSheaves(response());
    }

    /** What an energy window makes of first interactions, from the cache if it is there. */
    WindowShares window(ElementResponse response, double lowestKeV, double highestKeV) {
        String digest = Cache.digest(REVISION, text, lowestKeV + " to " + highestKeV, "photons " + WINDOW_PHOTONS);
        float[] kept = cache.find("window", digest).orElse(null);
        if (kept != null) {
            try {
                return WindowShares.restore(kept, response.classes());
            } catch (IllegalArgumentException e) {
                common.note("the window response kept in the cache cannot be used and is made again");
            }
        }
        WindowShares made =
                WindowResponse.of(response, lowestKeV, highestKeV, WINDOW_PHOTONS, WINDOW_SEED, pool, progress);
        common.keep(cache, "window", digest, made.toFloats());
        return made;
    }

    private Optional<ElementResponse> restore(float[] tables) {
        try {
            return Optional.of(ElementResponse.restore(system, tables));
        } catch (IllegalArgumentException e) {
            return Optional.empty();
        }
    }

    /**
     * The sensitivity of sheaves, from the cache if it is there; the key tells their factors.
     *
     * @param poses where the detector stood, if it moved; then it is the sum over all pairs in each pose
     */
    SystemSensitivity sensitivity(
            CoincidenceSheaves sheaves,
            Grid grid,
            String key,
            SensitivitySettings settings,
            List<Motion.Weighted> poses) {
        SensitivitySettings.Choice choice = settings.choiceFor(sheaves);
        int rays = sheaves.raysPerSheaf();
        String known = key + (rays == 1 ? "" : " rays " + rays);
        if (!poses.isEmpty()) {
            return new SystemSensitivity(
                    exact(new MovingCatalogue(sheaves, poses), grid, known + " poses " + poses),
                    null,
                    Map.of("method", "exact", "why", "the detector moves", "poses", poses.size()));
        }
        return choice.sampled()
                ? sampled(sheaves, grid, known, settings, choice.why())
                : new SystemSensitivity(
                        exact(sheaves, grid, known), null, Map.of("method", "exact", "why", choice.why()));
    }

    private Image exact(SheafCatalogue sheaves, Grid grid, String key) {
        String digest = Cache.digest(REVISION, text, grid.toString(), key);
        float[] kept = cache.find("sensitivity", digest).orElse(null);
        if (kept != null && kept.length == grid.voxels()) {
            return new Image(grid, kept);
        }
        Image made = Sensitivity.of(sheaves, grid, pool, progress);
        common.keep(cache, "sensitivity", digest, made.values());
        return made;
    }

    private SystemSensitivity sampled(
            CoincidenceSheaves sheaves, Grid grid, String key, SensitivitySettings settings, String why) {
        double finest = Math.min(grid.spacingXMm(), Math.min(grid.spacingYMm(), grid.spacingZMm()));
        double voxel = settings.voxelMm() == null ? finest : settings.voxelMm();
        boolean interpolated = finest < voxel;
        Grid coarse = interpolated ? CoarseGrid.around(grid, voxel) : grid;
        String digest = Cache.digest(
                REVISION, text, coarse.toString(), key, sheaves.positions().toString(), settings.toString());
        SampledSensitivity made = cache.find("sampled", digest)
                .flatMap(row -> SampledSensitivity.restore(row, coarse))
                .orElse(null);
        if (made == null) {
            made = SampledSensitivity.of(
                    sheaves.sampler(SAMPLING_SEED, interpolated ? MARGIN_VOXELS * voxel : 0),
                    coarse,
                    system.fieldOfView(),
                    new SampledSensitivity.Stop(settings.relativeError(), settings.mostSheaves()),
                    pool,
                    progress);
            common.keep(cache, "sampled", digest, made.toFloats());
        }
        if (!made.reached()) {
            common.note(String.format(
                    Locale.ROOT,
                    "the sensitivity has a standard error of %.2f %%, not %.2f %% as asked for; allow more sensitivity.most_sheaves",
                    100 * made.relativeError(),
                    100 * settings.relativeError()));
        }
        Map<String, Object> how = new LinkedHashMap<>();
        how.put("method", "sampled");
        how.put("why", why);
        how.put("relative_standard_error", made.relativeError());
        how.put("sheaves", made.sheaves());
        how.put("voxel_mm", coarse.spacingXMm());
        return interpolated
                ? new SystemSensitivity(
                        CoarseGrid.interpolate(made.mean(), grid),
                        CoarseGrid.interpolate(made.standardError(), grid),
                        how)
                : new SystemSensitivity(made.mean(), made.standardError(), how);
    }
}
