package org.raysheaf.transport;

import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;

/**
 * Writes detected pairs into the columns of a block. An ideal readout: the crystal of each first interaction, and the
 * exact difference of flight times. An event's time is that of its decay, which keeps the list in order.
 */
final class PairReadout {
    private final EventBlock block;

    PairReadout(EventBlock block) {
        this.block = block;
    }

    /** Appends one pair. */
    void record(CrystalWalk a, CrystalWalk b, long timePs) {
        int event = block.size();
        block.resize(event + 1);
        block.ints(Attribute.ELEMENT_A)[event] = a.element();
        block.ints(Attribute.ELEMENT_B)[event] = b.element();
        block.longs(Attribute.TIME)[event] = timePs;
        if (block.has(Attribute.TIME_DIFFERENCE)) {
            double longer = b.distanceMm() - a.distanceMm();
            block.floats(Attribute.TIME_DIFFERENCE)[event] = (float) (longer / Photon.SPEED_MM_PER_PS);
        }
        if (block.has(Attribute.ENERGY_A)) {
            block.floats(Attribute.ENERGY_A)[event] = (float) a.depositedKeV();
            block.floats(Attribute.ENERGY_B)[event] = (float) b.depositedKeV();
        }
    }
}
