package org.raysheaf.transport;

import java.io.IOException;
import java.util.Set;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;

/**
 * The readout channels of a system as time goes on: energy that comes within the integration of a channel is added to what it has begun
 * with, energy that comes while it is blind is lost, and what is complete becomes a single. Pulses are taken in order of time; singles
 * leave in the order in which their channels began, their own times blurred. Not safe for use by several threads.
 */
final class Channels {
    private static final int ROOM = 1 << 14;

    private final ReadoutPlan plan;
    private final EventSink sink;
    private final EventBlock singles;
    private final boolean truth;
    private final Decoder decoder = new Decoder();

    // Pulses that may still precede some of the next slice; then, those that are being integrated.
    private Pulses held = new Pulses(16);
    private final Pulses open;
    private final boolean[] integrating;
    private final long[] blindUntilPs;
    private final long[] blindPs;
    private final long[] begun;
    private int[] queue = new int[64];
    private int queueHead;
    private int queueSize;

    Channels(ReadoutPlan plan, Set<Attribute> attributes, EventSink sink) {
        this.plan = plan;
        this.sink = sink;
        singles = new EventBlock(attributes, ROOM);
        truth = attributes.stream().anyMatch(Attribute::truth);
        open = new Pulses(plan.channels());
        integrating = new boolean[plan.channels()];
        blindUntilPs = new long[plan.channels()];
        blindPs = new long[plan.channels()];
        begun = new long[plan.channels()];
        for (int c = 0; c < plan.channels(); c++) {
            open.append();
            blindUntilPs[c] = -1;
        }
    }

    /**
     * Takes the pulses of a slice.
     *
     * @param slice its pulses, sorted
     * @param endPs no pulse of a later slice comes before this
     * @throws IOException if the sink fails
     */
    void take(Pulses slice, long endPs) throws IOException {
        int mine = 0;
        int theirs = 0;
        Pulses rest = new Pulses(16);
        while (mine < held.size() || theirs < slice.size()) {
            boolean fromHeld = theirs == slice.size()
                    || (mine < held.size() && held.timePs[held.row(mine)] <= slice.timePs[slice.row(theirs)]);
            Pulses from = fromHeld ? held : slice;
            int row = fromHeld ? held.row(mine++) : slice.row(theirs++);
            if (from.timePs[row] < endPs) {
                take(from, row);
            } else {
                rest.append(from, row);
            }
        }
        rest.sort();
        held = rest;
    }

    /** Takes what is still held back and closes all channels. */
    void finish() throws IOException {
        take(new Pulses(1), Long.MAX_VALUE);
        closeUntil(Long.MAX_VALUE);
        flush();
    }

    private void take(Pulses from, int row) throws IOException {
        long timePs = from.timePs[row];
        closeUntil(timePs);
        int channel = from.channel[row];
        ReadoutPlan.Block block = plan.blockOfChannel(channel);
        if (integrating[channel]) {
            merge(from, row, channel);
            if (block.paralysable) {
                blind(channel, timePs, block.deadPs);
            }
        } else if (timePs < blindUntilPs[channel]) {
            if (block.paralysable) {
                blind(channel, timePs, block.deadPs);
            }
        } else if (Decoder.energyKeV(block, from, row) >= block.lowestKeV) {
            begun[channel]++;
            blind(channel, timePs, block.deadPs);
            if (block.integrationPs == 0) {
                emit(block, from, row);
            } else {
                begin(from, row, channel);
            }
        }
    }

    private void blind(int channel, long fromPs, long deadPs) {
        long until = fromPs + deadPs;
        blindPs[channel] += until - Math.max(fromPs, Math.min(until, blindUntilPs[channel]));
        blindUntilPs[channel] = Math.max(blindUntilPs[channel], until);
    }

    private void begin(Pulses from, int row, int channel) {
        copy(from, row, channel);
        integrating[channel] = true;
        if (queueSize == queue.length) {
            int[] larger = new int[2 * queueSize];
            for (int i = 0; i < queueSize; i++) {
                larger[i] = queue[(queueHead + i) % queueSize];
            }
            queue = larger;
            queueHead = 0;
        }
        queue[(queueHead + queueSize++) % queue.length] = channel;
    }

    private void copy(Pulses from, int row, int channel) {
        open.timePs[channel] = from.timePs[row];
        open.element[channel] = from.element[row];
        open.decay[channel] = from.decay[row];
        copyTruth(from, row, channel);
        for (int c = 0; c < Pulses.REALS; c++) {
            open.real[c][channel] = from.real[c][row];
        }
    }

    private void copyTruth(Pulses from, int row, int channel) {
        open.objectScatters[channel] = from.objectScatters[row];
        open.detectorScatters[channel] = from.detectorScatters[row];
        open.outsideView[channel] = from.outsideView[row];
        open.source[channel] = from.source[row];
    }

    /** Adds the energy; time, random numbers and truth stay those of the beginning, the crystal is that of the larger share. */
    private void merge(Pulses from, int row, int channel) {
        for (int c = Pulses.ENERGY; c <= Pulses.SUM_W; c++) {
            if (c != Pulses.LARGEST) {
                open.real[c][channel] += from.real[c][row];
            }
        }
        float largest = from.real[Pulses.LARGEST][row];
        if (from.element[row] == open.element[channel]) {
            open.real[Pulses.LARGEST][channel] += largest;
        } else if (largest > open.real[Pulses.LARGEST][channel]) {
            open.real[Pulses.LARGEST][channel] = largest;
            open.element[channel] = from.element[row];
        }
    }

    /** Channels began in this order; where integrations differ, one may wait for another, which does no harm. */
    private void closeUntil(long timePs) throws IOException {
        while (queueSize > 0) {
            int channel = queue[queueHead];
            ReadoutPlan.Block block = plan.blockOfChannel(channel);
            if (timePs - block.integrationPs <= open.timePs[channel]) {
                return;
            }
            queueHead = (queueHead + 1) % queue.length;
            queueSize--;
            integrating[channel] = false;
            emit(block, open, channel);
        }
    }

    private void emit(ReadoutPlan.Block block, Pulses from, int row) throws IOException {
        double keV = Decoder.energyKeV(block, from, row);
        if (keV > block.highestKeV) {
            return;
        }
        int i = singles.size();
        singles.resize(i + 1);
        singles.longs(Attribute.TIME)[i] = time(block, from, row);
        if (singles.has(Attribute.ENERGY)) {
            singles.floats(Attribute.ENERGY)[i] = (float) keV;
        }
        place(block, from, row, i);
        if (truth) {
            tell(from, row, i);
        }
        if (singles.size() == singles.capacity()) {
            flush();
        }
    }

    private static long time(ReadoutPlan.Block block, Pulses from, int row) {
        double blurred = from.real[Pulses.NORMAL_TIME][row] * block.timeSdPs;
        long timePs = Math.max(0, from.timePs[row] + Math.round(blurred));
        int step = block.readout.timeStepPs();
        return step == 1 ? timePs : (timePs + step / 2) / step * step;
    }

    private void place(ReadoutPlan.Block block, Pulses from, int row, int i) {
        decoder.decode(block, from, row);
        singles.ints(Attribute.ELEMENT)[i] = decoder.element;
        if (singles.has(Attribute.DEPTH)) {
            singles.floats(Attribute.DEPTH)[i] = (float) decoder.w;
        }
        if (singles.has(Attribute.POSITION_X)) {
            singles.floats(Attribute.POSITION_X)[i] = (float) block.world(0, decoder.u, decoder.v, decoder.w);
            singles.floats(Attribute.POSITION_Y)[i] = (float) block.world(1, decoder.u, decoder.v, decoder.w);
            singles.floats(Attribute.POSITION_Z)[i] = (float) block.world(2, decoder.u, decoder.v, decoder.w);
            singles.floats(Attribute.POSITION_U_SD)[i] = (float) block.pointSdMm.x();
            singles.floats(Attribute.POSITION_V_SD)[i] = (float) block.pointSdMm.y();
            singles.floats(Attribute.POSITION_W_SD)[i] = (float) block.depthSdMm;
        }
    }

    private void tell(Pulses from, int row, int i) {
        singles.longs(Attribute.DECAY)[i] = from.decay[row];
        singles.bytes(Attribute.OBJECT_SCATTERS)[i] = from.objectScatters[row];
        singles.bytes(Attribute.DETECTOR_SCATTERS)[i] = from.detectorScatters[row];
        singles.bytes(Attribute.OUTSIDE_VIEW)[i] = from.outsideView[row];
        singles.bytes(Attribute.NOT_ANNIHILATION)[i] = from.source[row];
        singles.floats(Attribute.EMISSION_X)[i] = from.real[Pulses.EMISSION][row];
        singles.floats(Attribute.EMISSION_Y)[i] = from.real[Pulses.EMISSION + 1][row];
        singles.floats(Attribute.EMISSION_Z)[i] = from.real[Pulses.EMISSION + 2][row];
    }

    private void flush() throws IOException {
        if (singles.size() > 0) {
            sink.accept(singles);
            singles.resize(0);
        }
    }

    /** Share of a time in which channels could begin, averaged over the signals that did: Σ n / Σ (n / share). */
    double liveShare(long durationPs) {
        double signals = 0;
        double corrected = 0;
        for (int c = 0; c < blindPs.length; c++) {
            signals += begun[c];
            corrected += begun[c] / Math.max(1e-9, 1 - blindPs[c] / (double) durationPs);
        }
        return signals > 0 ? signals / corrected : 1;
    }
}
