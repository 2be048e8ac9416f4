package org.raysheaf.transport;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import org.apache.commons.rng.UniformRandomProvider;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.phantom.LabelledVolume;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.geometry.phantom.PhantomPart;
import org.raysheaf.geometry.phantom.Source;
import org.raysheaf.geometry.solid.Box;
import org.raysheaf.geometry.solid.Cylinder;
import org.raysheaf.geometry.solid.Sphere;

class ActivityTest {
    private final UniformRandomProvider random = RandomStreams.stream(11, 0);

    @Test
    void candidatesCountWholeSolids() {
        PhantomPart body = PhantomPart.of("body", new Cylinder(10, 20)).holding(3);
        PhantomPart insert = PhantomPart.of("insert", new Sphere(4));
        double expected = 3 * Math.PI * 100 * 20; // 1 kBq/mL is 1 Bq/mm³
        assertThat(new Activity(Trials.phantom(body, insert)).candidateBq())
                .isCloseTo(expected, within(1e-9 * expected));
        assertThat(new Activity(Trials.phantom(insert)).candidateBq()).isZero();
    }

    @Test
    void replacedPartsEmitNothing() {
        PhantomPart body = PhantomPart.of("body", new Cylinder(10, 20)).holding(3);
        PhantomPart insert = PhantomPart.of("cold insert", new Sphere(4)).at(new Vector3(3, 0, 0));
        Activity source = new Activity(Trials.phantom(body, insert));
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
        check(phantom, 16, 400_000);
    }

    @Test
    void voxelsEmitLikeSolidsAndSolidsReplaceThem() {
        // along x: label 1 from −10 to 0, label 2 from 0 to 10, a cold solid from 4 to 8
        Image labels = new Image(new Grid(10, 2, 2, 2, 2, 2, Pose.IDENTITY));
        for (int x = 0; x < 10; x++) {
            for (int y = 0; y < 2; y++) {
                for (int z = 0; z < 2; z++) {
                    labels.values()[labels.grid().index(x, y, z)] = x < 5 ? 1 : 2;
                }
            }
        }
        LabelledVolume volume = new LabelledVolume(
                "labels.nii",
                List.of(
                        new LabelledVolume.Label(1, "one", "water", 1),
                        new LabelledVolume.Label(2, "two", "water", 3)));
        PhantomPart cold = PhantomPart.of("cold", new Box(new Vector3(4, 6, 6))).at(new Vector3(6, 0, 0));
        Phantom phantom =
                new Phantom(new PhantomDescription("voxels", List.of(), volume, List.of(cold), List.of()), labels);
        assertThat(phantom.concentrationBqPerMlAt(9, 1, 1)).isEqualTo(3000);
        // the solid covers the voxels from 4 to 8, two layers of 2 × 2 of 8 mm³ each
        assertThat(phantom.activityBq().value()).isCloseTo(1000 * 0.160 + 3000 * (0.160 - 0.064), within(1e-9));
        check(phantom, 16, 400_000);
    }

    private void check(Phantom phantom, double crossSectionMm2, int draws) {
        Activity source = new Activity(phantom);
        double[] p = new double[3];
        long[] counts = new long[21];
        for (int i = 0; i < draws; i++) {
            if (source.draw(random, p)) {
                counts[(int) Math.floor(p[0] + 10)]++;
            }
        }
        for (int bin = 0; bin < 21; bin++) {
            double concentration = phantom.concentrationBqPerMlAt(bin - 9.5, 0, 0) / 1000;
            double expected = concentration * crossSectionMm2 / source.candidateBq() * draws;
            assertThat((double) counts[bin]).as("slice %d", bin).isCloseTo(expected, within(4 * Math.sqrt(expected)));
        }
    }

    @Test
    void surfacesEmitEvenly() {
        // a can of radius 3 and length 8: its two lids have 2·9π of 2·9π + 48π, three elevenths
        Source can = new Source.Surface("can", new Cylinder(3, 8), new Vector3(1, 2, 3), Vector3.ZERO, 2);
        Activity source =
                new Activity(new Phantom(new PhantomDescription("can", List.of(), null, List.of(), List.of(can))));
        assertThat(source.candidateBq()).isEqualTo(2000);
        int draws = 200_000;
        int lids = 0;
        int inner = 0;
        double[] p = new double[3];
        for (int i = 0; i < draws; i++) {
            assertThat(source.draw(random, p)).isTrue();
            double r = Math.hypot(p[0] - 1, p[1] - 2);
            boolean lid = Math.abs(Math.abs(p[2] - 3) - 4) < 1e-9;
            assertThat(lid || Math.abs(r - 3) < 1e-9).isTrue();
            lids += lid ? 1 : 0;
            inner += lid && r < 1.5 ? 1 : 0;
        }
        assertThat((double) lids / draws).isCloseTo(3.0 / 11, within(3 * Math.sqrt(24.0 / 121 / draws)));
        assertThat((double) inner / lids).isCloseTo(0.25, within(3 * Math.sqrt(0.1875 / lids)));
    }

    @Test
    void linesAndPointsEmitWhereTheyAre() {
        Source line = new Source.Line("line", new Vector3(0, 0, -10), new Vector3(0, 0, 10), 3);
        Source point = new Source.Point("point", new Vector3(5, 0, 0), 1);
        Activity source = new Activity(
                new Phantom(new PhantomDescription("both", List.of(), null, List.of(), List.of(line, point))));
        int draws = 100_000;
        int onPoint = 0;
        double squares = 0;
        double[] p = new double[3];
        for (int i = 0; i < draws; i++) {
            source.draw(random, p);
            onPoint += p[0] == 5 ? 1 : 0;
            squares += p[2] * p[2];
        }
        assertThat((double) onPoint / draws).isCloseTo(0.25, within(3 * Math.sqrt(0.1875 / draws)));
        // on the line E[z²] = 100/3, with variance 10⁴·4/45
        double lineDraws = draws - onPoint;
        assertThat(squares / lineDraws).isCloseTo(100.0 / 3, within(3 * 100 * Math.sqrt(4.0 / 45 / lineDraws)));
    }
}
