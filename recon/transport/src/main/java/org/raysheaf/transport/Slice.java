package org.raysheaf.transport;

import java.util.Set;
import org.apache.commons.rng.UniformRandomProvider;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;

/**
 * One slice of an acquisition, from its decays to its events. It depends on nothing but the settings and its number.
 *
 * @param events its events, in order of time
 * @param pairs pairs of photons emitted
 */
record Slice(EventBlock events, long pairs) {
    /** What all slices of an acquisition have in common. */
    record Setting(DecayTimes times, ActiveParts source, DetectorSystem system, Set<Attribute> attributes, long seed) {}

    /**
     * Simulates a slice.
     *
     * @param number number of the slice, from 0
     * @param limit stop after this many events
     */
    static Slice simulate(Setting setting, long number, long limit) {
        UniformRandomProvider random = RandomStreams.stream(setting.seed(), number);
        double[] shares = setting.times().draw(number, random);
        EventBlock events = new EventBlock(setting.attributes(), Math.max(1, shares.length));
        PairReadout readout = new PairReadout(events);
        DetectorSystem system = setting.system();
        CrystalWalk walkOfA = new CrystalWalk(system, random);
        CrystalWalk walkOfB = new CrystalWalk(system, random);
        Photon a = new Photon();
        Photon b = new Photon();
        double[] point = new double[3];
        long pairs = 0;
        for (int i = 0; i < shares.length && events.size() < limit; i++) {
            if (!setting.source().draw(random, point)) {
                continue;
            }
            pairs++;
            a.emit(point, random);
            b.emitOpposite(a);
            if (walkOfA.follow(a) && walkOfB.follow(b) && system.admits(walkOfA.element(), walkOfB.element())) {
                readout.record(walkOfA, walkOfB, setting.times().timePs(shares[i]));
            }
        }
        return new Slice(events, pairs);
    }
}
