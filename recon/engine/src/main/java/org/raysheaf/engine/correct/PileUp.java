package org.raysheaf.engine.correct;

import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.detector.Readout;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.event.PairingTally;

/**
 * Pairs that pile-up moves out of the energy window, by a model: pulses of a channel are a Poisson process, so another one comes within the
 * integration time t of a signal with the probability p = 1 − e^(−nt) at the rate n, and then a share of signals stays in the window that
 * follows from the spectrum. A photon keeps 1 − p (1 − share), a pair the square.
 */
public final class PileUp {
    private static final double S_PER_NS = 1e-9;

    private PileUp() {}

    /**
     * Share of pairs that are left, on average over the blocks.
     *
     * @param system the system
     * @param header header of the list
     * @param pairing how its pairs were made; tells the singles
     * @param stays share of signals that stay in the window in spite of another pulse's energy
     * @return the share; 1 if singles per element are not known
     */
    public static double pairShare(DetectorSystem system, ListHeader header, PairingRecord pairing, double stays) {
        if (pairing.singles().size() != system.elements()) {
            return 1;
        }
        PairingTally tally = pairing.tally();
        double accepted = tally.singles() - tally.outsideEnergies();
        double perAccepted = accepted > 0 ? tally.singles() / accepted : 1;
        double live = Math.sqrt(header.liveTimeS() / header.durationS());
        double weighted = 0;
        double all = 0;
        for (PlacedBlock block : system.blocks()) {
            double singles = 0;
            for (int e = 0; e < block.kind().elements(); e++) {
                singles += pairing.singles().get(block.firstElement() + e);
            }
            Readout readout = block.kind().readout();
            double channels =
                    readout.channel() == Readout.Channel.CRYSTAL ? block.kind().elements() : 1;
            double rate = singles * perAccepted / header.durationS() / live / channels;
            double another = -Math.expm1(-rate * readout.integrationNs() * S_PER_NS);
            weighted += singles * (1 - another * (1 - stays));
            all += singles;
        }
        double photon = all > 0 ? weighted / all : 1;
        return photon * photon;
    }
}
