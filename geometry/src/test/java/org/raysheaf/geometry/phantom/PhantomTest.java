package org.raysheaf.geometry.phantom;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.InvalidSettingsException;
import org.raysheaf.geometry.solid.Box;
import org.raysheaf.geometry.solid.Cylinder;
import org.raysheaf.geometry.solid.Placed;
import org.raysheaf.geometry.solid.Sphere;

class PhantomTest {
    private static final double CYLINDER_MM3 = Math.PI * 15 * 15 * 30;
    private static final double SPHERE_MM3 = 4.0 / 3 * Math.PI * 125;

    private static final PhantomPart BODY =
            PhantomPart.of("body", new Cylinder(15, 30)).holding(200);

    private static Phantom phantom(PhantomPart... parts) {
        return new Phantom(new PhantomDescription("trial", List.of(parts)));
    }

    @Test
    void laterPartsReplaceEarlierOnes() {
        PhantomPart insert = PhantomPart.of("cold insert", new Sphere(5)).at(new Vector3(6, 0, 0));
        Phantom phantom = phantom(BODY, insert);
        assertThat(phantom.regionAt(0, 0, 0)).isZero();
        assertThat(phantom.regionAt(6, 0, 0)).isEqualTo(1);
        assertThat(phantom.regionAt(0, 0, 16)).isEqualTo(-1);
        assertThat(phantom.concentrationBqPerMlAt(0, 0, 0)).isEqualTo(200_000);
        assertThat(phantom.concentrationBqPerMlAt(6, 0, 0)).isZero();
        assertThat(phantom.concentrationBqPerMlAt(0, 20, 0)).isZero();
        assertThat(phantom(insert, BODY).regionAt(6, 0, 0)).isEqualTo(1);
    }

    @Test
    void activityIsExactWherePartsKeepApart() {
        PhantomPart rod = PhantomPart.of("rod", new Cylinder(1, 30)).holding(100);
        Phantom phantom = phantom(
                rod,
                new PhantomPart("other", rod.shape(), new Vector3(2, 0, 0), Vector3.ZERO, "water", 50),
                PhantomPart.of("cap", new Cylinder(5, 10)).at(new Vector3(0, 0, 20)));
        Estimate activity = phantom.activityBq();
        assertThat(activity.exact()).isTrue();
        assertThat(activity.value()).isCloseTo(150 * Math.PI * 30, within(1e-9 * activity.value()));
    }

    @Test
    void replacedActivityIsTakenOffWithAnHonestError() {
        PhantomPart insert = PhantomPart.of("insert", new Sphere(5)).at(new Vector3(6, 0, 3));
        Estimate volume = phantom(BODY, insert).visibleVolumeMm3(0);
        assertThat(volume.exact()).isFalse();
        assertThat(volume.standardError()).isLessThan(1e-4 * CYLINDER_MM3);
        assertThat(volume.value()).isCloseTo(CYLINDER_MM3 - SPHERE_MM3, within(4 * volume.standardError()));
        assertThat(phantom(BODY, insert).visibleVolumeMm3(0)).isEqualTo(volume);
        assertThat(phantom(insert, BODY).activityBq()).isEqualTo(Estimate.exactly(200 * CYLINDER_MM3));
    }

    @Test
    void aPartWhollyReplacedHoldsNothing() {
        PhantomPart swallowed = PhantomPart.of("swallowed", new Sphere(5)).holding(1000);
        Estimate activity = phantom(swallowed, BODY).activityBq(0);
        assertThat(activity.value()).isZero();
        assertThat(activity.exact()).isFalse();
    }

    @Test
    void separationIsFoundForOrdinaryNeighboursAndNeverClaimedForOverlap() {
        Placed rod = PhantomPart.of("rod", new Cylinder(2, 20)).placed();
        assertThat(VisibleVolume.apart(rod, moved(new Vector3(3, 3, 5)))).isTrue();
        assertThat(VisibleVolume.apart(rod, moved(new Vector3(2.7, 2.7, 5)))).isFalse();
        assertThat(VisibleVolume.apart(rod, moved(new Vector3(1, 1, 20)))).isTrue();
        assertThat(VisibleVolume.apart(rod, moved(new Vector3(1, 1, -19.9)))).isFalse();
        assertThat(VisibleVolume.apart(rod, rod)).isFalse();
        PhantomPart box = PhantomPart.of("box", new Box(new Vector3(4, 4, 4)));
        assertThat(VisibleVolume.apart(rod, box.at(new Vector3(0, 4, 9)).placed()))
                .isTrue();
    }

    private static Placed moved(Vector3 centre) {
        return PhantomPart.of("rod", new Cylinder(2, 20)).at(centre).placed();
    }

    @Test
    void turnsGoAboutXThenYThenZ() {
        Vector3 tip = new Vector3(0, 0, 9);
        assertThat(turned(new Vector3(90, 0, 0)).contains(0, -tip.z(), 0)).isTrue();
        assertThat(turned(new Vector3(0, 90, 0)).contains(tip.z(), 0, 0)).isTrue();
        // about x to −y, then about z from −y to +x
        assertThat(turned(new Vector3(90, 0, 90)).pose().w().minus(Vector3.X).norm())
                .isLessThan(1e-12);
        // about y first would have left z for x, and x does not move about x: order matters
        assertThat(turned(new Vector3(90, 90, 0))
                        .pose()
                        .w()
                        .minus(new Vector3(0, -1, 0))
                        .norm())
                .isLessThan(1e-12);
    }

    private static Placed turned(Vector3 turnDeg) {
        return new PhantomPart("rod", new Cylinder(1, 20), Vector3.ZERO, turnDeg, "water", 0).placed();
    }

    @Test
    void boundsHoldAllParts() {
        PhantomPart far = PhantomPart.of("far", new Sphere(1)).at(new Vector3(20, 0, -20));
        assertThat(phantom(BODY, far).bounds().high()).isEqualTo(new Vector3(21, 15, 15));
        assertThat(phantom(BODY, far).bounds().low()).isEqualTo(new Vector3(-15, -15, -21));
    }

    @Test
    void refusesWhatMakesNoPhantom() {
        assertThatThrownBy(() -> BODY.holding(-1))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessage("phantom part body: concentration_kBq_per_mL: expected a number >= 0, found -1");
        assertThatThrownBy(() -> BODY.at(new Vector3(0, Double.NaN, 0))).hasMessageContaining("centre_mm[1]");
        assertThatThrownBy(() -> new PhantomDescription("empty", List.of()))
                .hasMessage("phantom empty: parts: expected at least one part, source or volume, found none");
        assertThatThrownBy(() -> phantom(BODY, BODY))
                .hasMessage("phantom trial: parts[1].name: expected a new name, found body a second time");
    }
}
