package org.raysheaf.transport;

import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.sampling.distribution.ZigguratSampler;

/**
 * Adds up what a decay left in each channel. Everything random in the readout of a pulse is drawn here, in the stream of the slice, so
 * that the later steps, which run through time in one go, need no random numbers. Not safe for use by several threads.
 */
final class PulseMaker {
    private final ReadoutPlan plan;
    private final Pulses pulses;
    private final ZigguratSampler.NormalizedGaussian normal;

    PulseMaker(ReadoutPlan plan, Pulses pulses, UniformRandomProvider random) {
        this.plan = plan;
        this.pulses = pulses;
        this.normal = ZigguratSampler.NormalizedGaussian.of(random);
    }

    /**
     * Makes the pulses of a decay.
     *
     * @param deposits what it left
     * @param decayPs when it happened (ps)
     * @param decay its number
     * @param point where its photons were emitted (mm)
     * @param outsideView whether that is outside the field of view
     */
    void make(Deposits deposits, long decayPs, long decay, double[] point, boolean outsideView) {
        int first = pulses.size();
        for (int i = 0; i < deposits.size(); i++) {
            int channel = plan.channelOf(deposits.element[i]);
            int row = first;
            while (row < pulses.size() && pulses.channel[row] != channel) {
                row++;
            }
            if (row == pulses.size()) {
                begin(deposits, i, channel);
                pulses.decay[row] = decay;
                pulses.outsideView[row] = (byte) (outsideView ? 1 : 0);
                for (int axis = 0; axis < 3; axis++) {
                    pulses.real[Pulses.EMISSION + axis][row] = (float) point[axis];
                }
            }
            add(deposits, i, row);
        }
        for (int row = first; row < pulses.size(); row++) {
            pulses.timePs[row] += decayPs;
        }
    }

    private void begin(Deposits deposits, int i, int channel) {
        ReadoutPlan.Block block = plan.blockOf(deposits.element[i]);
        int row = pulses.append();
        pulses.channel[row] = channel;
        pulses.timePs[row] = Long.MAX_VALUE;
        pulses.element[row] = -1;
        for (int c = Pulses.ENERGY; c <= Pulses.SUM_W; c++) {
            pulses.real[c][row] = 0;
        }
        draw(Pulses.NORMAL_ENERGY, row, block.blursEnergy());
        draw(Pulses.NORMAL_TIME, row, block.timeSdPs > 0);
        boolean point = block.monolithic;
        draw(Pulses.NORMAL_U, row, point || block.lightSdMm > 0);
        draw(Pulses.NORMAL_V, row, point || block.lightSdMm > 0);
        draw(Pulses.NORMAL_W, row, point || block.readout.depthFwhmMm() != null);
    }

    private void draw(int column, int row, boolean needed) {
        double drawn = needed ? normal.sample() : 0;
        pulses.real[column][row] = (float) Math.max(-ReadoutPlan.CUT, Math.min(ReadoutPlan.CUT, drawn));
    }

    private void add(Deposits deposits, int i, int row) {
        ReadoutPlan.Block block = plan.blockOf(deposits.element[i]);
        double keV = deposits.energyKeV[i];
        double x = deposits.x[i];
        double y = deposits.y[i];
        double z = deposits.z[i];
        pulses.timePs[row] = Math.min(pulses.timePs[row], Math.round(deposits.agePs[i]));
        pulses.real[Pulses.ENERGY][row] += (float) keV;
        pulses.real[Pulses.SUM_U][row] += (float) (keV * block.local(0, x, y, z));
        pulses.real[Pulses.SUM_V][row] += (float) (keV * block.local(1, x, y, z));
        pulses.real[Pulses.SUM_W][row] += (float) (keV * block.local(2, x, y, z));
        double inElement = 0;
        int firstHere = -1;
        for (int k = 0; k <= i; k++) {
            if (deposits.element[k] == deposits.element[i]) {
                inElement += deposits.energyKeV[k];
                firstHere = firstHere < 0 ? k : firstHere;
            }
        }
        if (inElement > pulses.real[Pulses.LARGEST][row] || deposits.element[i] == pulses.element[row]) {
            pulses.real[Pulses.LARGEST][row] = (float) inElement;
            pulses.element[row] = deposits.element[i];
            pulses.source[row] = deposits.source[firstHere];
            pulses.objectScatters[row] = count(deposits.objectScatters[firstHere]);
            pulses.detectorScatters[row] = count(deposits.detectorScatters[firstHere]);
        }
    }

    private static byte count(int scatters) {
        return (byte) Math.min(255, scatters);
    }
}
