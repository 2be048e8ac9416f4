package org.raysheaf.transport;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.apache.commons.rng.UniformRandomProvider;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomPart;
import org.raysheaf.geometry.solid.Box;
import org.raysheaf.geometry.solid.Cylinder;
import org.raysheaf.geometry.solid.Sphere;

class ActivePartsTest {
    private final UniformRandomProvider random = RandomStreams.stream(11, 0);

    @Test
    void candidatesCountWholeSolids() {
        PhantomPart body = PhantomPart.of("body", new Cylinder(10, 20)).holding(3);
        PhantomPart insert = PhantomPart.of("insert", new Sphere(4));
        double expected = 3 * Math.PI * 100 * 20; // 1 kBq/mL is 1 Bq/mm³
        assertThat(new ActiveParts(Trials.phantom(body, insert)).candidateBq())
                .isCloseTo(expected, within(1e-9 * expected));
        assertThat(new ActiveParts(Trials.phantom(insert)).candidateBq()).isZero();
    }

    @Test
    void replacedPartsEmitNothing() {
        PhantomPart body = PhantomPart.of("body", new Cylinder(10, 20)).holding(3);
        PhantomPart insert = PhantomPart.of("cold insert", new Sphere(4)).at(new Vector3(3, 0, 0));
        ActiveParts source = new ActiveParts(Trials.phantom(body, insert));
        double[] p = new double[3];
        int emitted = 0;
        int inInsert = 0;
        int draws = 200_000;
        for (int i = 0; i < draws; i++) {
            if (source.draw(random, p)) {
                emitted++;
                inInsert += Math.hypot(Math.hypot(p[0] - 3, p[1]), p[2]) < 4 ? 1 : 0;
            }
        }
        assertThat(inInsert).isZero();
        double share = 1 - 4.0 / 3 * 64 / (100 * 20);
        assertThat((double) emitted / draws).isCloseTo(share, within(3 * Math.sqrt(share * (1 - share) / draws)));
    }

    @Test
    void everyPlaceEmitsInProportionToItsConcentration() {
        // three boxes that overlap in pairs; each thin slice along x must hold decays as its concentration says
        Phantom phantom = Trials.phantom(
                PhantomPart.of("left", new Box(new Vector3(20, 4, 4))).holding(1),
                PhantomPart.of("cold", new Box(new Vector3(4, 6, 6))),
                PhantomPart.of("right", new Box(new Vector3(10, 4, 4)))
                        .at(new Vector3(6, 0, 0))
                        .holding(5));
        ActiveParts source = new ActiveParts(phantom);
        double[] p = new double[3];
        long[] counts = new long[21];
        int draws = 400_000;
        for (int i = 0; i < draws; i++) {
            if (source.draw(random, p)) {
                counts[(int) Math.floor(p[0] + 10)]++;
            }
        }
        for (int bin = 0; bin < 21; bin++) {
            double concentration = phantom.concentrationBqPerMlAt(bin - 9.5, 0, 0) / 1000;
            double expected = concentration * 16 / source.candidateBq() * draws;
            assertThat((double) counts[bin]).as("slice %d", bin).isCloseTo(expected, within(4 * Math.sqrt(expected)));
        }
    }
}
