package org.raysheaf.io.overview;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Instant;
import java.util.EnumSet;
import java.util.List;
import java.util.Random;
import java.util.Set;
import java.util.function.LongUnaryOperator;
import javax.imageio.ImageIO;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.io.description.DescriptionReader;

class OverviewTest {
    private static final Set<Attribute> COLUMNS = EnumSet.of(Attribute.ELEMENT, Attribute.TIME, Attribute.ENERGY);
    private static final int EVENTS = 100_000;

    /** 2048 elements. */
    private static final DetectorSystem SYSTEM = system();

    @TempDir
    Path folder;

    private static DetectorSystem system() {
        String text = """
                raysheaf: system/1
                name: finch
                field_of_view: {radius_mm: 10, length_mm: 20}
                blocks:
                  - kind: crystal_block
                    name: tile
                    columns: 16
                    rows: 16
                    pitch_mm: [1, 1, 10]
                    crystal_mm: [0.9, 0.9, 10]
                    material: lyso
                placements:
                  - {kind: panel, block: tile, columns: 2, rows: 2, pitch_mm: [17, 17, 0], centre_mm: [0, 30, 0], facing: [0, -1, 0]}
                  - {kind: panel, block: tile, columns: 2, rows: 2, pitch_mm: [17, 17, 0], centre_mm: [0, -30, 0], facing: [0, 1, 0]}
                """;
        try {
            return new DetectorSystem(DescriptionReader.readText(text, "finch", "system", SystemDescription.class));
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    /** What a good list looks like, before something is done to it. */
    private static final class Good {
        final Random random = new Random(4);
        final EventBlock block = new EventBlock(COLUMNS, EVENTS);
        double liveTimeS = 10;
        double durationS = 10;

        Good() {
            for (int i = 0; i < EVENTS; i++) {
                block.ints(Attribute.ELEMENT)[i] = random.nextInt(SYSTEM.elements());
                block.longs(Attribute.TIME)[i] = 100_000_000L * i;
                double energy =
                        random.nextInt(3) > 0 ? 511 + 28 * random.nextGaussian() : 20 + 320 * random.nextDouble();
                block.floats(Attribute.ENERGY)[i] = (float) energy;
            }
            block.resize(EVENTS);
        }

        Good times(LongUnaryOperator change) {
            long[] times = block.longs(Attribute.TIME);
            for (int i = 0; i < EVENTS; i++) {
                times[i] = change.applyAsLong(times[i]);
            }
            return this;
        }

        Good energies(double factor) {
            float[] energies = block.floats(Attribute.ENERGY);
            for (int i = 0; i < EVENTS; i++) {
                energies[i] *= (float) factor;
            }
            return this;
        }

        List<String> warnings() {
            return ListWarnings.of(figures(), new ListHeader("", durationS, liveTimeS, Instant.EPOCH, null));
        }

        ListFigures figures() {
            ListOverview overview = new ListOverview(SYSTEM, COLUMNS);
            overview.accept(block);
            return overview.figures();
        }
    }

    @Test
    void aGoodListIsGood() {
        Good good = new Good();
        assertThat(good.warnings()).isEmpty();
        ListFigures figures = good.figures();
        assertThat(figures.events()).isEqualTo(EVENTS);
        ListFigures.Energy energy = figures.energy();
        assertThat(energy).isNotNull();
        Photopeak peak = energy.photopeak();
        assertThat(peak).isNotNull();
        // Five standard errors of the mean of the Gaussian's 66,667 counts, and half as much for the foot on its left.
        assertThat(peak.position()).isCloseTo(511, within(1.5 * 5 * 28 / Math.sqrt(66_667)));
        assertThat(peak.fwhm()).isCloseTo(28 * 2.3548, within(2.0));
    }

    @ParameterizedTest
    @ValueSource(doubles = {0.5, 1, 2, 7, 10})
    void energiesInStepsHaveTheSamePhotopeak(double stepKeV) {
        Good good = new Good();
        float[] energies = good.block.floats(Attribute.ENERGY);
        for (int i = 0; i < EVENTS; i++) {
            energies[i] = (float) (stepKeV * Math.rint(energies[i] / stepKeV));
        }
        ListFigures.Energy energy = good.figures().energy();
        assertThat(energy).isNotNull();
        assertThat(energy.photopeak()).isNotNull();
        assertThat(energy.photopeak().position())
                .isCloseTo(511, within(1.5)); // steps of 10 keV shift it by a tenth of their size
    }

    @Test
    void aWrongUnitOfEnergiesIsNamed() {
        assertThat(new Good().energies(1e-3).warnings())
                .singleElement()
                .asString()
                .contains("look like MeV", "unit: MeV");
        assertThat(new Good().energies(1e3).warnings())
                .singleElement()
                .asString()
                .contains("look like eV");
        assertThat(new Good().energies(1.4).warnings())
                .singleElement()
                .asString()
                .contains("photopeak is at 716 keV", "gain is off by a factor 0.71", "run calibrate");
    }

    @Test
    void aWrongUnitOfTimesIsNamed() {
        assertThat(new Good().times(t -> t / 1000).warnings())
                .singleElement()
                .asString()
                .contains(
                        "live time of 10.0000 s is longer than the 0.00999990 s",
                        "factor near 1e+03",
                        "a larger one (unit:");
        assertThat(new Good().times(t -> t * 1000).warnings())
                .anyMatch(w -> w.contains("after the end of the acquisition") && w.contains("a smaller one (unit:"));
    }

    @Test
    void swappedBytesAreNamed() {
        Good times = new Good().times(t -> Long.reverseBytes(t) >>> 1);
        assertThat(times.warnings()).anyMatch(w -> w.contains("these numbers are hardly times; the byte order"));
        Good energies = new Good();
        float[] values = energies.block.floats(Attribute.ENERGY);
        for (int i = 0; i < EVENTS; i++) {
            float swapped = Float.intBitsToFloat(Integer.reverseBytes(Float.floatToRawIntBits(values[i])));
            values[i] = Float.isFinite(swapped) ? Math.abs(swapped) : 0;
        }
        assertThat(energies.warnings())
                .anyMatch(w -> w.contains("make sense only with their bytes in the other order"));
        Good elements = new Good();
        int[] numbers = elements.block.ints(Attribute.ELEMENT);
        for (int i = 0; i < EVENTS; i++) {
            numbers[i] = Short.reverseBytes((short) (numbers[i] % 8)) & 0xffff; // what survives the check of elements
        }
        assertThat(elements.warnings()).anyMatch(w -> w.contains("bytes of the element (or channel) look swapped"));
    }

    @Test
    void silentAndNoisyElementsAreNamed() {
        Good silent = new Good();
        int[] elements = silent.block.ints(Attribute.ELEMENT);
        for (int i = 0; i < EVENTS; i++) {
            elements[i] = (elements[i] >= 300 && elements[i] < 310) || elements[i] == 7 ? 1000 : elements[i];
        }
        assertThat(silent.warnings())
                .singleElement()
                .asString()
                .contains("11 of 2048 elements have no counts (7, 300-309)", "check the table");
        for (int i = 0; i < EVENTS; i += 3) {
            elements[i] = 1000;
        }
        assertThat(silent.warnings()).anyMatch(w -> w.contains("element 1000 has") && w.contains("noisy channel"));
    }

    @Test
    void disorderAndPausesAreNamed() {
        Good disorder = new Good().times(t -> t % 7_000_000_000L == 0 ? Math.max(0, t - 150_000_000) : t);
        assertThat(disorder.warnings())
                .singleElement()
                .asString()
                .contains("events are earlier than the one before, by up to 50,000 ns: set order_ns");
        Good pause = new Good().times(t -> t > 5_000_000_000_000L ? t + 3_000_000_000_000L : t);
        pause.durationS = 13;
        assertThat(pause.warnings())
                .singleElement()
                .asString()
                .contains("no event for 3.00 s from 5.00000 s on", "live_time_s");
    }

    @Test
    void anEmptyListIsNamed() {
        ListOverview overview = new ListOverview(SYSTEM, COLUMNS);
        assertThat(ListWarnings.of(overview.figures(), new ListHeader("", 1, 1, Instant.EPOCH, null)))
                .singleElement()
                .asString()
                .startsWith("no events");
    }

    @Test
    void thePageIsDrawnWhateverTheFigures() throws IOException {
        Path page = folder.resolve("page.png");
        OverviewPage.write("good", new Good().figures(), List.of("a note"), List.of("a warning"), page, false);
        assertThat(ImageIO.read(page.toFile()).getWidth()).isGreaterThan(1000);
        OverviewPage.write("empty", new ListOverview(SYSTEM, COLUMNS).figures(), List.of(), List.of(), page, true);
        assertThat(Files.size(page)).isPositive();
    }

    @Test
    void wildValuesDoNotSpoilASpectrum() {
        Spectrum spectrum = new Spectrum(100, true);
        for (int i = 0; i < 200_000; i++) {
            spectrum.add(i % 1000 == 0 ? 1e30 : i % 500);
        }
        assertThat(spectrum.low()).isZero();
        assertThat(spectrum.step() * 100).isBetween(500.0, 650.0);
        assertThat(spectrum.above()).isEqualTo(200);
        assertThat(spectrum.total()).isEqualTo(200_000);
        assertThat(spectrum.median()).isCloseTo(250, within(2.0));
    }
}
