package org.raysheaf.transport;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.time.Instant;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.Nuclide;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomPart;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.settings.InvalidSettingsException;
import org.raysheaf.geometry.solid.Cylinder;
import org.raysheaf.geometry.solid.Sphere;

class SimulationTest {
    private static final PhantomPart BODY =
            PhantomPart.of("body", new Cylinder(10, 20)).holding(1);
    private static final DetectorSystem RINGS = Trials.rings(12);

    private record Run(Simulated outcome, Collected events) {}

    private static Run run(Acquisition acquisition, Phantom phantom, DetectorSystem system, int threads)
            throws IOException {
        ForkJoinPool pool = new ForkJoinPool(threads);
        try {
            Collected events = new Collected();
            Simulation simulation = new Simulation(acquisition, phantom, system, "the system");
            return new Run(simulation.run(events, pool, Progress.SILENT), events);
        } finally {
            pool.shutdown();
        }
    }

    private static Acquisition acquisition(
            @Nullable Nuclide nuclide, double durationS, @Nullable Double liveS, @Nullable Long maxEvents) {
        return new Acquisition("", "", nuclide, durationS, liveS, Instant.EPOCH, 3, maxEvents, true, true);
    }

    @Test
    void resultDoesNotDependOnThreadCount() throws IOException {
        Acquisition acquisition = acquisition(null, 60, null, null);
        Run one = run(acquisition, Trials.phantom(BODY), RINGS, 1);
        assertThat(one.outcome().events())
                .isGreaterThan(10_000)
                .isEqualTo(one.events().size());
        for (int threads = 2; threads <= 3; threads++) {
            Run more = run(acquisition, Trials.phantom(BODY), RINGS, threads);
            assertThat(more.outcome()).isEqualTo(one.outcome());
            assertThat(more.events()).isEqualTo(one.events());
        }
    }

    @Test
    void anotherSeedGivesAnotherList() throws IOException {
        Phantom phantom = Trials.phantom(BODY);
        Collected first = run(Trials.lasting(1, null, 1), phantom, RINGS, 1).events();
        Collected second = run(Trials.lasting(1, null, 2), phantom, RINGS, 1).events();
        assertThat(first).isNotEqualTo(second);
    }

    @Test
    void eventsComeInOrderFromPairsThatTheRuleAdmits() throws IOException {
        // near the crystals, where many lines join blocks fewer than three positions apart
        PhantomPart aside =
                PhantomPart.of("aside", new Sphere(2)).at(new Vector3(36, 0, 0)).holding(100);
        Collected events = run(acquisition(null, 30, null, null), Trials.phantom(aside), RINGS, 2)
                .events();
        assertThat(events.size()).isGreaterThan(1000);
        for (int i = 0; i < events.size(); i++) {
            assertThat(RINGS.admits(events.elementA(i), events.elementB(i))).isTrue();
            assertThat(events.timePs(i)).isGreaterThanOrEqualTo(i == 0 ? 0 : events.timePs(i - 1));
        }
        assertThat(events.timePs(events.size() - 1)).isLessThan(30_000_000_000_000L);
    }

    @Test
    void pairsEmittedFollowActivityBranchingDecayAndLiveTime() throws IOException {
        Nuclide f18 = new Nuclide("F-18", Trials.F18_HALF_LIFE_S, 0.9673);
        double frame = 1200;
        PhantomPart weak = BODY.holding(0.05);
        Run run = run(acquisition(f18, frame, 0.75 * frame, null), Trials.phantom(weak), RINGS, 2);
        // 0.05 Bq/mm³; a 20-minute mean of F-18 is the initial rate over 1.0644741725
        double expected = 0.05 * Math.PI * 100 * 20 * frame * 0.75 * 0.9673 / 1.0644741725;
        assertThat((double) run.outcome().pairs()).isCloseTo(expected, within(3 * Math.sqrt(expected)));
        assertThat(run.outcome().header().liveTimeS()).isEqualTo(900);
        assertThat(run.outcome().header().systemDescription()).isEqualTo("the system");
    }

    @Test
    void replacedActivityIsNotEmitted() throws IOException {
        PhantomPart insert = PhantomPart.of("cold", new Sphere(8));
        Run run = run(acquisition(null, 60, null, null), Trials.phantom(BODY, insert), RINGS, 2);
        double expected = 60 * Math.PI * (100 * 20 - 4.0 / 3 * 512);
        assertThat((double) run.outcome().pairs()).isCloseTo(expected, within(3 * Math.sqrt(expected)));
    }

    /** Two black slabs seen from between: every pair but those that slip out between the slabs at the sides. */
    @Test
    void everyPairThatMeetsTwoBlackSlabsIsRecorded() throws IOException {
        PhantomPart point = PhantomPart.of("point", new Sphere(0.001)).holding(1e12);
        Run run = run(acquisition(null, 60, null, null), Trials.phantom(point), Trials.slabs(1000, 20, 0), 2);
        // a cube's face from its centre is 1/6 of all directions, so its two opposite faces see 1/3 of all pairs
        double pairs = run.outcome().pairs();
        assertThat(run.outcome().events() / pairs).isCloseTo(1.0 / 3, within(3 * Math.sqrt(2.0 / 9 / pairs)));
    }

    @Test
    void positiveTimeDifferenceMeansNearerToA() throws IOException {
        // 100 mm above the middle, toward the upper slab (element 0)
        PhantomPart point = PhantomPart.of("point", new Sphere(0.001))
                .at(new Vector3(0, 100, 0))
                .holding(1e12);
        Collected events = run(acquisition(null, 10, null, null), Trials.phantom(point), Trials.slabs(400, 20, 0), 1)
                .events();
        assertThat(events.size()).isGreaterThan(1000);
        for (int i = 0; i < events.size(); i++) {
            double sign = events.elementA(i) == 0 ? 1 : -1;
            // straight up: 300 mm − 100 mm; at a slant longer by 1/cos
            assertThat(sign * events.timeDifferencePs(i)).isGreaterThan(199.9 / 0.299792458);
        }
    }

    @Test
    void energiesAreThoseOfAnnihilation() throws IOException {
        Run run = run(acquisition(null, 1, null, null), Trials.phantom(BODY), RINGS, 1);
        assertThat(run.events().energies()).isNotEmpty().containsOnly((float) Photon.ANNIHILATION_KEV);
        assertThat(Trials.lasting(1, null, 1).attributes())
                .containsExactly(Attribute.ELEMENT_A, Attribute.ELEMENT_B, Attribute.TIME, Attribute.TIME_DIFFERENCE);
    }

    @Test
    void stoppingEarlyKeepsTheBeginningAndShortensTheHeader() throws IOException {
        Run full = run(acquisition(null, 60, 30.0, null), Trials.phantom(BODY), RINGS, 2);
        long limit = full.outcome().events() / 2;
        for (int threads = 1; threads <= 2; threads++) {
            Run part = run(acquisition(null, 60, 30.0, limit), Trials.phantom(BODY), RINGS, threads);
            assertThat(part.outcome().events()).isEqualTo(limit);
            assertThat(part.events()).isEqualTo(full.events().first((int) limit));
            double stopped = part.events().timePs((int) limit - 1) / 1e12;
            assertThat(part.outcome().header().durationS()).isEqualTo(stopped);
            assertThat(part.outcome().header().liveTimeS()).isEqualTo(0.5 * stopped);
            double pairs = (double) part.outcome().pairs() / full.outcome().pairs();
            assertThat(pairs).isCloseTo(0.5, within(0.02));
        }
    }

    @Test
    void aFailingSinkEndsTheRunWithItsOwnError() {
        Simulation simulation = new Simulation(acquisition(null, 60, null, null), Trials.phantom(BODY), RINGS, "");
        IOException full = new IOException("disk full");
        assertThatThrownBy(() -> simulation.run(
                        block -> {
                            throw full;
                        },
                        ForkJoinPool.commonPool(),
                        Progress.SILENT))
                .isSameAs(full);
    }

    @Test
    void refusesSettingsThatGiveNoAcquisition() {
        assertThatThrownBy(() -> acquisition(null, 10, 11.0, 0L))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessage("acquisition: live_time_s: expected at most duration_s = 10.0, found 11.0; "
                        + "max_events: expected a number >= 1, found 0");
        assertThatThrownBy(() -> acquisition(null, Double.NaN, null, null)).hasMessageContaining("duration_s");
        Phantom cold = Trials.phantom(BODY.holding(0));
        assertThatThrownBy(() -> new Simulation(acquisition(null, 1, null, null), cold, RINGS, ""))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("nothing would decay");
    }
}
