package org.raysheaf.app;

import java.util.List;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * What blurs activity before rays see it, to be undone by the estimate. Undoing blur sharpens edges, and lets them overshoot by some per cent.
 *
 * @param positronRange whether positrons travel before they annihilate, in water, by the nuclide that the list names
 * @param acollinearityFwhmDeg FWHM of the angle by which the two photons depart from opposite directions, in each transverse component
 *     (degrees), 0 to 5
 * @param crystalWidth whether crystals are wider than a line; without it, where an event is one ray that ends in the middle of
 *     crystals: several rays are spread over them, and measured points do not know them
 * @param kernel a measured blur beside these, as a sum of up to four Gaussians; empty for none. The work grows with their number
 */
record BlurSettings(
        @Default("true") boolean positronRange,
        @Default("0.5") double acollinearityFwhmDeg,
        @Nullable Boolean crystalWidth,
        @Default("[]") List<Gaussian> kernel) {
    /**
     * A Gaussian, the same in all directions.
     *
     * @param share of the kernel, above 0; the shares of a kernel add up to 1
     * @param fwhmMm its full width at half maximum (mm), at least 0
     */
    record Gaussian(double share, double fwhmMm) {
        Gaussian {
            new Problems("kernel")
                    .above("share", share, 0)
                    .within("fwhm_mm", fwhmMm, 0, 1000)
                    .orThrow();
        }
    }

    private static final int MOST_GAUSSIANS = 4;
    private static final double ROUNDING = 1e-6;

    BlurSettings {
        kernel = List.copyOf(kernel);
        double sum = kernel.stream().mapToDouble(Gaussian::share).sum();
        new Problems("blur")
                .within("acollinearity_fwhm_deg", acollinearityFwhmDeg, 0, 5)
                .rule(
                        kernel.size() <= MOST_GAUSSIANS,
                        "kernel",
                        "expected at most " + MOST_GAUSSIANS + " Gaussians, found " + kernel.size())
                .rule(
                        kernel.isEmpty() || Math.abs(sum - 1) <= ROUNDING,
                        "kernel",
                        "expected shares that add up to 1, found a sum of " + sum)
                .orThrow();
    }
}
