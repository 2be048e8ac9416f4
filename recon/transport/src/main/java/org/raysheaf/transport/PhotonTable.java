package org.raysheaf.transport;

import org.raysheaf.geometry.matter.Interaction;
import org.raysheaf.geometry.matter.Material;

/**
 * How a material meets photons, ready for the inner loop: linear attenuation and the shares of the processes on a lattice of energies,
 * interpolated linearly between. With steps of {@value #STEP_KEV} keV that is within 0.4 % of the log-log interpolation at
 * {@value #LOWEST_KEV} keV and within 0.02 % above 60 keV; an absorption edge is smeared over one step. Immutable.
 */
final class PhotonTable {
    /** Photons below this are absorbed where they are (keV): the cross sections begin here. */
    static final double LOWEST_KEV = 10;

    private static final double HIGHEST_KEV = 3000;
    private static final double STEP_KEV = 0.5;
    private static final int NODES = (int) ((HIGHEST_KEV - LOWEST_KEV) / STEP_KEV) + 2;

    private final boolean ideal;
    private final double density;
    // Four numbers a node: attenuation (1/mm), then the shares of absorption, of this and Compton scatter, of these and
    // coherent scatter.
    private final float[] nodes;
    private final double idealPerMm;

    private PhotonTable(boolean ideal, double density, float[] nodes, double idealPerMm) {
        this.ideal = ideal;
        this.density = density;
        this.nodes = nodes;
        this.idealPerMm = idealPerMm;
    }

    /**
     * Tabulates a material.
     *
     * @param material the material; an ideal one absorbs every photon whole, whatever its energy
     * @param coherent whether coherent scatter counts
     */
    static PhotonTable of(Material material, boolean coherent) {
        if (material.ideal()) {
            return new PhotonTable(true, 1, new float[0], 1 / material.meanFreePathMm());
        }
        float[] nodes = new float[4 * NODES];
        for (int i = 0; i < NODES; i++) {
            double energyKeV = Math.min(LOWEST_KEV + i * STEP_KEV, HIGHEST_KEV);
            double absorption = material.attenuationPerMm(Interaction.PHOTOELECTRIC, energyKeV);
            double compton = material.attenuationPerMm(Interaction.COMPTON, energyKeV);
            double straight = coherent ? material.attenuationPerMm(Interaction.COHERENT, energyKeV) : 0;
            double total = absorption + compton + straight + material.attenuationPerMm(Interaction.PAIR, energyKeV);
            nodes[4 * i] = (float) total;
            nodes[4 * i + 1] = (float) share(absorption, total);
            nodes[4 * i + 2] = (float) share(absorption + compton, total);
            nodes[4 * i + 3] = (float) share(absorption + compton + straight, total);
        }
        return new PhotonTable(false, material.density(), nodes, 0);
    }

    private static double share(double part, double total) {
        return total > 0 ? part / total : 1; // nothing happens in a vacuum
    }

    /** Whether every photon is absorbed whole. */
    boolean ideal() {
        return ideal;
    }

    /** Density (g/cm³); 1 for an ideal material. */
    double density() {
        return density;
    }

    /** Linear attenuation (1/mm); infinite for a perfect absorber. */
    double perMm(double energyKeV) {
        return ideal ? idealPerMm : at(energyKeV, 0);
    }

    /** Share of photoelectric absorption in all interactions. */
    double absorption(double energyKeV) {
        return ideal ? 1 : at(energyKeV, 1);
    }

    /** Share of photoelectric absorption and Compton scatter in all interactions. */
    double absorptionOrCompton(double energyKeV) {
        return ideal ? 1 : at(energyKeV, 2);
    }

    /** Share of everything but pair production. */
    double allButPair(double energyKeV) {
        return ideal ? 1 : at(energyKeV, 3);
    }

    private double at(double energyKeV, int which) {
        double place = (energyKeV - LOWEST_KEV) / STEP_KEV;
        int i = Math.max(0, Math.min(NODES - 2, (int) place));
        double share = place - i;
        return nodes[4 * i + which] + share * (nodes[4 * i + 4 + which] - nodes[4 * i + which]);
    }
}
