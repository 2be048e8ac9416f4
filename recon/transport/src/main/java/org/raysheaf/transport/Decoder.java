package org.raysheaf.transport;

import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.Readout;

/** What the readout of a block makes of a pulse: its energy, its element, its point. Holds the point decoded last; not safe for use by several threads. */
final class Decoder {
    /** The element named. */
    int element;

    /** The point in the frame of the block (mm). */
    double u;

    double v;
    double w;

    /** The measured energy (keV), at least 0. */
    static double energyKeV(ReadoutPlan.Block block, Pulses from, int row) {
        double keV = from.real[Pulses.ENERGY][row];
        if (block.blursEnergy()) {
            keV += from.real[Pulses.NORMAL_ENERGY][row] * block.energySdKeV(keV);
        }
        double step = block.readout.energyStepKeV();
        return Math.max(0, step > 0 ? step * Math.rint(keV / step) : keV);
    }

    /** Decodes element and point. */
    void decode(ReadoutPlan.Block block, Pulses from, int row) {
        double keV = from.real[Pulses.ENERGY][row];
        u = from.real[Pulses.SUM_U][row] / keV;
        v = from.real[Pulses.SUM_V][row] / keV;
        w = from.real[Pulses.SUM_W][row] / keV;
        if (block.monolithic) {
            blurPoint(block, from, row);
        } else {
            nameCrystal(block, from, row);
        }
    }

    private void blurPoint(ReadoutPlan.Block block, Pulses from, int row) {
        CrystalBlock lattice = block.lattice;
        u = inside(
                u + from.real[Pulses.NORMAL_U][row] * block.pointSdMm.x(), -0.5 * lattice.widthMm(), lattice.widthMm());
        v = inside(
                v + from.real[Pulses.NORMAL_V][row] * block.pointSdMm.y(),
                -0.5 * lattice.heightMm(),
                lattice.heightMm());
        w = inside(w + from.real[Pulses.NORMAL_W][row] * block.pointSdMm.z(), 0, lattice.depthMm());
        element = block.placed.firstElement() + lattice.nearest(u, v, w);
    }

    private void nameCrystal(ReadoutPlan.Block block, Pulses from, int row) {
        CrystalBlock lattice = block.lattice;
        int crystal = from.element[row] - block.placed.firstElement();
        if (block.readout.decoding() == Readout.Decoding.CENTROID) {
            crystal = lattice.nearest(
                    u + from.real[Pulses.NORMAL_U][row] * block.lightSdMm,
                    v + from.real[Pulses.NORMAL_V][row] * block.lightSdMm,
                    lattice.centreW(crystal));
        }
        element = block.placed.firstElement() + crystal;
        w = block.readout.depthFwhmMm() != null
                ? inside(w + from.real[Pulses.NORMAL_W][row] * block.depthSdMm, 0, lattice.depthMm())
                : lattice.centreW(crystal);
        u = lattice.centreU(crystal);
        v = lattice.centreV(crystal);
    }

    private static double inside(double value, double from, double length) {
        return Math.max(from, Math.min(from + length, value));
    }
}
