package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.blur.BlurModel;
import org.raysheaf.engine.blur.ChordWidths;
import org.raysheaf.engine.blur.Mixture;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.matter.DecayScheme;
import org.raysheaf.geometry.matter.Nuclide;
import org.raysheaf.geometry.response.Positions;
import org.raysheaf.io.list.ListFile;

/**
 * The blur that an estimate undoes.
 *
 * @param model what blurs
 * @param named as result.json says it
 */
record BlurChoice(BlurModel model, Map<String, Object> named) {
    /** What a plan asks for, or null if it asks for nothing. */
    static @Nullable BlurChoice of(
            ReconstructionPlan plan, ListFile list, Path path, DetectorSystem system, Grid grid, ForkJoinPool pool)
            throws IOException {
        BlurSettings settings = plan.blur();
        if (settings == null) {
            return null;
        }
        Map<String, Object> named = new LinkedHashMap<>();
        Mixture kernel = measured(settings, named);
        if (settings.positronRange()) {
            Mixture range = Mixture.ofRange(scheme(list.header().nuclide(), path));
            named.put("positron_range_rms_mm", range.rmsMm());
            named.put("positron_range_fwhm_mm", range.widthMm(0.5));
            named.put("positron_range_fwtm_mm", range.widthMm(0.1));
            kernel = kernel.then(range);
        }
        boolean width = crystalWidth(settings, Positions.of(plan.raysPerEvent(), list.attributes()), system);
        named.put("acollinearity_fwhm_deg", settings.acollinearityFwhmDeg());
        named.put("crystal_width", width);
        ChordWidths chords = null;
        if (width || settings.acollinearityFwhmDeg() > 0) {
            if (plan.motion() != null) {
                throw new IOException(
                        "blur: the widths of acollinearity and crystals would have to follow the motion, which"
                                + " they do not yet; with motion, write blur: {acollinearity_fwhm_deg: 0, crystal_width: false}");
            }
            chords = ChordWidths.of(system, grid, settings.acollinearityFwhmDeg(), width, pool);
            named.put("acollinearity_and_crystals_fwhm_in_the_middle_mm", chords.centralFwhmMm());
        }
        named.put("gaussians", kernel.parts());
        named.put("note", "undoing blur sharpens edges and lets them overshoot by some per cent");
        return new BlurChoice(new BlurModel(kernel, chords), named);
    }

    private static Mixture measured(BlurSettings settings, Map<String, Object> named) {
        if (settings.kernel().isEmpty()) {
            return Mixture.POINT;
        }
        List<Mixture.Part> parts = new ArrayList<>();
        for (BlurSettings.Gaussian gaussian : settings.kernel()) {
            parts.add(Mixture.Part.ofFwhm(gaussian.share(), gaussian.fwhmMm()));
        }
        Mixture kernel = new Mixture(parts);
        named.put("measured_kernel_rms_mm", kernel.rmsMm());
        return kernel;
    }

    private static DecayScheme scheme(@Nullable Nuclide nuclide, Path list) throws IOException {
        if (nuclide == null) {
            throw new IOException(
                    list + ": the range of positrons depends on the nuclide, which the list does not say; write"
                            + " it into the list, or leave the range out with blur: {positron_range: false}");
        }
        DecayScheme scheme = DecayScheme.find(nuclide.name())
                .orElseThrow(() -> new IOException(list + ": the range of the positrons of " + nuclide.name()
                        + " is not known, only that of " + String.join(", ", DecayScheme.names())
                        + "; leave it out with blur: {positron_range: false}"));
        if (scheme.positrons().isEmpty()) {
            throw new IOException(list + ": " + nuclide.name()
                    + " has no positrons, so no range; leave it out with blur: {positron_range: false}");
        }
        return scheme;
    }

    /** Rays that are spread over crystals, or end at measured points, know no more of a crystal's width. */
    private static boolean crystalWidth(BlurSettings settings, Positions positions, DetectorSystem system)
            throws IOException {
        boolean inRays = positions.rays() > 1 || positions.continuous(system);
        Boolean wanted = settings.crystalWidth();
        if (wanted == null) {
            return !inRays;
        }
        if (wanted && inRays) {
            throw new IOException(
                    "blur.crystal_width: true, but the rays of an event are spread over its crystals, or end at"
                            + " measured points; leave out crystal_width");
        }
        return wanted;
    }
}
