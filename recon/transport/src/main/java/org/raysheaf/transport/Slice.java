package org.raysheaf.transport;

import org.apache.commons.rng.UniformRandomProvider;
import org.raysheaf.geometry.detector.FieldOfView;

/**
 * One slice of an acquisition, from its decays to its pulses. It depends on nothing but the settings and its number.
 *
 * @param pulses its pulses, sorted in time
 * @param decays decays of the phantom
 * @param positrons positrons among what they sent out
 */
record Slice(Pulses pulses, long decays, long positrons) {
    /** Decay numbers of a slice begin at its number times this. */
    private static final long NUMBERS_PER_SLICE = 1L << 24;

    /** What all slices of an acquisition have in common. */
    record Setting(
            DecayTimes times,
            Activity activity,
            Emission.Plan emission,
            Lutetium lutetium,
            World world,
            ReadoutPlan readout,
            long seed) {}

    /**
     * Simulates a slice.
     *
     * @param number number of the slice, from 0
     */
    static Slice simulate(Setting setting, long number) {
        return new Worker(setting, number).run();
    }

    /** The work on one slice: three kinds of decay, taken in order of time. */
    private static final class Worker {
        private final Setting setting;
        private final long number;
        private final UniformRandomProvider random;
        private final Deposits deposits = new Deposits();
        private final Pulses pulses;
        private final PulseMaker maker;
        private final Emission emission;
        private final Flight flight;
        private final FieldOfView view;
        private final double[] point = new double[3];
        private long decay;
        private long decays;
        private long positrons;

        Worker(Setting setting, long number) {
            this.setting = setting;
            this.number = number;
            random = RandomStreams.stream(setting.seed(), number);
            pulses = new Pulses(1 << 15);
            maker = new PulseMaker(setting.readout(), pulses, random);
            emission = new Emission(setting.world(), setting.emission(), random);
            flight = new Flight(setting.world(), deposits, random);
            view = setting.world().system().fieldOfView();
        }

        Slice run() {
            decay = number * NUMBERS_PER_SLICE;
            long[] phantom = setting.times().draw(1, number, random);
            long[] late = setting.times().draw(setting.emission().latePerDecay(), number, random);
            long[] crystals = setting.times().drawSteady(setting.lutetium().activityBq(), number, random);
            int p = 0;
            int l = 0;
            int c = 0;
            while (p < phantom.length || l < late.length || c < crystals.length) {
                long atP = p < phantom.length ? phantom[p] : Long.MAX_VALUE;
                long atL = l < late.length ? late[l] : Long.MAX_VALUE;
                long atC = c < crystals.length ? crystals[c] : Long.MAX_VALUE;
                deposits.clear();
                if (atP <= atL && atP <= atC) {
                    p++;
                    phantom(atP);
                } else if (atL <= atC) {
                    l++;
                    late(atL);
                } else {
                    c++;
                    setting.lutetium().decay(point, random, deposits, emission, flight);
                    note(atC);
                }
                decay++;
            }
            pulses.sort();
            return new Slice(pulses, decays, positrons);
        }

        private void phantom(long timePs) {
            if (setting.activity().draw(random, point)) {
                decays++;
                positrons += emission.decay(point, flight) ? 1 : 0;
                note(timePs);
            }
        }

        private void late(long timePs) {
            if (setting.activity().draw(random, point)) {
                emission.later(point, flight);
                note(timePs);
            }
        }

        private void note(long timePs) {
            if (deposits.size() > 0) {
                maker.make(deposits, timePs, decay, point, !view.contains(point[0], point[1], point[2]));
            }
        }
    }
}
