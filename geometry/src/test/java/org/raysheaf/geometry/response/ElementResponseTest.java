package org.raysheaf.geometry.response;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.Random;
import java.util.concurrent.ForkJoinPool;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.Placement;
import org.raysheaf.geometry.detector.Systems;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.port.Progress;

class ElementResponseTest {
    /** A ring of small blocks: every effect of the large one (gaps, edges, the next block) at a fraction of the cost. */
    private static DetectorSystem smallRing() {
        CrystalBlock tile = new CrystalBlock(
                "tile", 4, 4, 1, new Vector3(1.85, 1.85, 13), new Vector3(1.7, 1.7, 13), "scintillator");
        return Systems.system(
                new FieldOfView(8, 10),
                3,
                12.2,
                List.of(tile),
                List.of(new Placement.Rings("tile", 9, 12, 0, List.of(-4.2, 4.2))));
    }

    private static final DetectorSystem SYSTEM = smallRing();
    private static final ElementResponse RESPONSE =
            ElementResponse.tabulate(SYSTEM, ForkJoinPool.commonPool(), Progress.SILENT);

    @Test
    void crystalsThatSeeTheSameShareATable() {
        ElementClasses classes = new ElementClasses(SYSTEM);
        // Two rings are mirror images, and so are the left and right halves of a block: 4 rows x 2 columns remain.
        assertThat(classes.classes()).isEqualTo(8);
        assertThat(classes.classOf(0)).isEqualTo(classes.classOf(3)).isEqualTo(classes.classOf(16));
        assertThat(classes.classOf(0)).isNotEqualTo(classes.classOf(12));
        assertThat(classes.classOf(0)).isEqualTo(classes.classOf(9 * 16 + 12));
    }

    /** Mirrored crystals must come out as if computed for themselves: this also tests the signs of the flips. */
    @Test
    void interpolatesBetweenDirections() {
        Random random = new Random(5);
        ResponseIntegral direct = new ResponseIntegral(SYSTEM, 4);
        Response expected = new Response();
        Response found = new Response();
        int directions = 400;
        double squares = 0;
        double bias = 0;
        for (int i = 0; i < directions; i++) {
            int a = random.nextInt(SYSTEM.elements());
            int b = random.nextInt(SYSTEM.elements());
            Vector3 s = SYSTEM.centre(b).minus(SYSTEM.centre(a));
            if (!SYSTEM.admits(a, b) || s.norm() < 20) {
                continue;
            }
            Vector3 local = SYSTEM.blockOf(b).pose().inverse().turn(s.unit());
            direct.evaluate(b, local.x(), local.y(), local.z(), expected);
            RESPONSE.lookUp(b, local.x(), local.y(), local.z(), found);
            double relative = found.areaMm2() / expected.areaMm2() - 1;
            squares += relative * relative / directions;
            bias += relative / directions;
            assertThat(relative).isCloseTo(0, within(0.02));
            assertThat(found.u()).isCloseTo(expected.u(), within(0.1));
            assertThat(found.v()).isCloseTo(expected.v(), within(0.1));
            assertThat(found.w()).isCloseTo(expected.w(), within(0.15));
            assertThat(found.varianceMm2()).isCloseTo(expected.varianceMm2(), within(0.6));
        }
        // Design: interpolation error below 0.2 %; here with the quadrature error of the nodes on top.
        assertThat(Math.sqrt(squares)).isLessThan(0.003);
        assertThat(bias).isCloseTo(0, within(0.001));
    }

    @Test
    void facesAnswerWithTheirProjectedArea() {
        ElementResponse faces = ElementResponse.ofFaces(SYSTEM);
        Response response = new Response();
        faces.lookUp(7, 0.6, 0, 0.8, response);
        assertThat(response.areaMm2()).isCloseTo(1.7 * 1.7 * 0.8, within(1e-6));
        faces.lookUp(7, 0, 0, -1, response);
        assertThat(response.areaMm2()).isZero();
    }

    @Test
    void tablesCanBeKeptAndRestored() {
        ElementResponse again = ElementResponse.restore(SYSTEM, RESPONSE.tables());
        assertThat(again.tables()).isEqualTo(RESPONSE.tables());
        assertThatThrownBy(() -> ElementResponse.restore(SYSTEM, new float[3]))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageEndingWith("found 3; make the tables again");
    }

    @Test
    void resultDoesNotDependOnThreadCount() {
        float[] one = ElementResponse.tabulate(SYSTEM, new ForkJoinPool(1), Progress.SILENT)
                .tables();
        assertThat(one).isEqualTo(RESPONSE.tables());
    }
}
