package org.raysheaf.geometry.matter;

import org.raysheaf.geometry.settings.Problems;

/**
 * What something is made of, as far as ideal photons care: a mean free path.
 *
 * @param name how descriptions refer to it
 * @param attenuationLengthMm mean distance to a photon's first interaction (mm) at the energy in use; 0 for a perfect absorber
 */
public record Material(String name, double attenuationLengthMm) {
    public Material {
        new Problems("material")
                .atLeast("attenuation_length_mm", attenuationLengthMm, 0)
                .orThrow();
    }

    /**
     * Probability that a photon gets through.
     *
     * @param pathMm path in the material (mm), at least 0
     * @return exp(−path / attenuation length); for a perfect absorber 1 without path, else 0
     */
    public double transmission(double pathMm) {
        if (attenuationLengthMm > 0) {
            return Math.exp(-pathMm / attenuationLengthMm);
        }
        return pathMm > 0 ? 0 : 1;
    }
}
