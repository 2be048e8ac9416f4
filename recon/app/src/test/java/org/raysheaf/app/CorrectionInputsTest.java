package org.raysheaf.app;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.stream.Stream;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.app.Calls.Outcome;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.io.efficiency.EfficiencyFile;
import org.raysheaf.io.hdf5.ColumnWriter;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.hdf5.ElementType;
import org.raysheaf.io.hdf5.Hdf5Writer;
import org.raysheaf.io.volume.VolumeFile;

/** What corrections take from files, and what they say of files that do not fit. A small system of ideal crystals, so that nothing takes long. */
class CorrectionInputsTest {
    private static final String SYSTEM = """
            raysheaf: system/1
            name: four
            field_of_view: {radius_mm: 10, length_mm: 24}
            materials: [{name: dense, attenuation_length_mm: 5}]
            blocks:
              - {kind: crystal_block, name: tile, columns: 8, rows: 8, pitch_mm: [3, 3, 10], crystal_mm: [2.8, 2.8, 10], material: dense}
            placements:
              - {kind: single, block: tile, centre_mm: [20, 0, 0], facing: [-1, 0, 0]}
              - {kind: single, block: tile, centre_mm: [-20, 0, 0], facing: [1, 0, 0]}
              - {kind: single, block: tile, centre_mm: [0, 20, 0], facing: [0, -1, 0]}
              - {kind: single, block: tile, centre_mm: [0, -20, 0], facing: [0, 1, 0]}
            """;
    private static final int ELEMENTS = 256;

    @TempDir
    private static Path folder;

    @BeforeAll
    static void recordACylinder() throws IOException {
        write("four.yaml", SYSTEM);
        write("cylinder.yaml", """
                raysheaf: phantom/1
                name: cylinder
                parts:
                  - {name: body, shape: {kind: cylinder, radius_mm: 7, length_mm: 20}, material: vacuum, concentration_kBq_per_mL: 20}
                """);
        Path acquisition = write("run.yaml", """
                raysheaf: acquisition/1
                system: four.yaml
                phantom: cylinder.yaml
                nuclide: F-18
                start: 2026-12-01T09:00:00Z
                duration_s: 600
                max_events: 60000
                physics: {positron_range: false, acollinearity_fwhm_deg: 0, surroundings: vacuum}
                """);
        Outcome outcome = Calls.work(folder.resolve("cache"), "simulate", acquisition, "--out", at("list.h5"));
        assertThat(outcome.exit()).as(outcome.err()).isZero();
    }

    private static Path at(String name) {
        return folder.resolve(name);
    }

    private static Path write(String name, String text) throws IOException {
        return Files.writeString(at(name), text);
    }

    private static Outcome reconstruct(String corrections, Object... more) throws IOException {
        return reconstructList("list.h5", corrections, more);
    }

    private static Outcome reconstructList(String list, String corrections, Object... more) throws IOException {
        Path plan = write("plan.yaml", """
                raysheaf: reconstruction/1
                list: %s
                grid: {voxel_mm: 2}
                estimation: {passes: 5}
                corrections: {%s}
                """.formatted(list, corrections));
        Object[] arguments = Stream.concat(
                        Stream.of("reconstruct", plan, "--out", at("out"), "--replace", "--json"), Stream.of(more))
                .toArray();
        return Calls.work(folder.resolve("cache"), arguments);
    }

    private static JsonNode found(Outcome outcome) throws IOException {
        assertThat(outcome.err()).isEmpty();
        assertThat(outcome.exit()).isZero();
        return new ObjectMapper().readTree(outcome.out());
    }

    private static void refused(Outcome outcome, String... parts) {
        assertThat(outcome.exit()).isEqualTo(1);
        assertThat(outcome.err()).contains(parts).doesNotContain("our mistake");
    }

    /** A volume of one value in 1/cm, 2 mm voxels. */
    private static void volume(String name, int nx, Vector3 centre, float perCm) throws IOException {
        Image mu = Image.filled(new Grid(nx, 12, 14, 2, 2, 2, Pose.shift(centre)), perCm);
        VolumeFile.write(mu, "1/cm", at(name), true);
    }

    @Test
    void aVolumeOfAttenuationMustCoverTheActivity() throws IOException {
        volume("whole.nii", 12, Vector3.ZERO, 0);
        volume("half.nii", 6, new Vector3(-6, 0, 0), 0);
        volume("gone.nii", 12, new Vector3(80, 0, 0), 0);
        JsonNode whole = found(reconstruct("attenuation: {volume: whole.nii}"));
        assertThat(whole.at("/corrections/applied/share_of_activity_outside_the_attenuation_volume")
                        .asDouble())
                .isZero();
        refused(
                reconstruct("attenuation: {volume: half.nii}"),
                at("half.nii") + ": expected a volume that covers the object, found 5", // half of it, and some
                " % of the activity outside it; look at its origin and axes");
        refused(
                reconstruct("attenuation: {volume: gone.nii}"),
                at("gone.nii")
                        + ": expected a volume that covers the object, found none of its voxels in the field of view"
                        + " (10.0 mm round the axis, 24.0 mm long)");
    }

    /** e^(−µ · 20 mm) at 0.1 /cm, the volume over all of the object: everything counts for 1/0.8 and more. */
    @Test
    void aVolumeOfAttenuationIsIn1PerCm() throws IOException {
        volume("water.nii", 12, Vector3.ZERO, 0.1f);
        double without = found(reconstruct("")).at("/activity/total_kBq").asDouble();
        JsonNode with = found(reconstruct("attenuation: {volume: water.nii}"));
        // lines that cross 24 mm straight or at up to 45 degrees
        assertThat(with.at("/activity/total_kBq").asDouble() / without)
                .isBetween(Math.exp(0.1 * 2.4), Math.exp(0.1 * 2.4 * Math.sqrt(2)));
    }

    @Test
    void refusesNegativeAttenuation() throws IOException {
        volume("negative.nii", 12, Vector3.ZERO, -0.1f);
        refused(
                reconstruct("attenuation: {volume: negative.nii}"),
                at("negative.nii")
                        + ": expected attenuation coefficients at 511 keV in 1/cm, from 0 to 50; found -0.1 in voxel 0");
    }

    @Test
    void refusesEfficienciesOfAnotherSystem() throws IOException {
        double[] ones = new double[ELEMENTS];
        Arrays.fill(ones, 1);
        EfficiencyFile.write(at("moved.h5"), SYSTEM.replace("[20, 0, 0]", "[21, 0, 0]"), ones, ones, null, true);
        refused(
                reconstruct("efficiencies: moved.h5"),
                at("moved.h5")
                        + ": expected the efficiencies of the list's own system, found those of another description");
        EfficiencyFile.write(at("fewer.h5"), "", new double[4], new double[4], null, true);
        refused(
                reconstruct("efficiencies: fewer.h5"),
                at("fewer.h5") + ": expected efficiencies of 256 elements, found 4; it belongs to another system");
        EfficiencyFile.Geometry strange = new EfficiencyFile.Geometry(new double[7], new double[1], new double[1]);
        EfficiencyFile.write(at("strange.h5"), SYSTEM, ones, ones, strange, true);
        refused(
                reconstruct("efficiencies: strange.h5"),
                at("strange.h5") + ": its factors of block geometry do not fit the system",
                "found 7; make the file again with: raysheaf normalize");
    }

    /** A file of before the geometry factors, and one with: the pairs of all blocks by 4 give a fourth of the activity. */
    @Test
    void efficienciesAndGeometryCount() throws IOException {
        double[] ones = new double[ELEMENTS];
        Arrays.fill(ones, 1);
        double bare = found(reconstruct("")).at("/activity/total_kBq").asDouble();
        EfficiencyFile.write(at("old.h5"), SYSTEM, ones, ones, null, true);
        assertThat(found(reconstruct("efficiencies: old.h5"))
                        .at("/activity/total_kBq")
                        .asDouble())
                .isCloseTo(bare, within(1e-6 * bare));
        Outcome normalized = Calls.work(
                folder.resolve("cache"),
                "normalize",
                at("list.h5"),
                "--source",
                at("cylinder.yaml"),
                "--out",
                at("new.h5"),
                "--replace");
        assertThat(normalized.exit()).as(normalized.err()).isZero();
        assertThat(normalized.out())
                .contains("chi square per degree of freedom of pairs of blocks", "columns towards partner blocks");
        assertThat(at("new-residuals.png")).isNotEmptyFile();
        EfficiencyFile.Geometry found =
                EfficiencyFile.read(at("new.h5")).geometry().orElseThrow();
        double[] four = found.pair();
        Arrays.fill(four, 4);
        double[] columns = found.column();
        Arrays.fill(columns, 1);
        double[] rows = found.row();
        Arrays.fill(rows, 1);
        EfficiencyFile.write(at("four.h5"), SYSTEM, ones, ones, new EfficiencyFile.Geometry(four, columns, rows), true);
        assertThat(found(reconstruct("efficiencies: four.h5"))
                        .at("/activity/total_kBq")
                        .asDouble())
                .isCloseTo(bare / 4, within(1e-4 * bare));
    }

    @Test
    void refusesDelayedRandomsWithoutDelayedEvents() throws IOException {
        refused(
                reconstruct("randoms: delayed"),
                "the list has no column delayed: expected delayed pairs to estimate randoms from, found none; take randoms:"
                        + " singles or none");
    }

    @Test
    void refusesNegativeLiveTime() throws IOException {
        try (Hdf5Writer writer = Hdf5Writer.create(at("negative.h5"), true)) {
            writer.root().attribute("raysheaf", "list/1");
            writer.root().attribute("live_time_s", -60.0);
            writer.root().text("system", SYSTEM);
            for (String name : new String[] {"element_a", "element_b"}) {
                ColumnWriter column = writer.root().column(name, ElementType.UINT32, 1 << 10, Compression.NONE);
                column.append(new int[] {name.endsWith("a") ? 0 : 64}, 0, 1);
            }
            writer.commit();
        }
        refused(reconstructList("negative.h5", ""), "live_time_s: expected a number > 0, found -60");
    }

    @Test
    void refusesACalibrationOfAnotherSystem() throws IOException {
        write("other.yaml", "raysheaf: calibration/1\nfactor: 1.1\nrelative_error: 0.01\nsystem: five\n");
        refused(
                reconstruct("calibration: other.yaml"),
                "other.yaml: expected a calibration of four, found one of five");
    }

    /** The reference measures a factor; with it the reference itself comes out as the phantom says, and every other image by as much larger. */
    @Test
    void aReferenceGivesAFactorThatLaterImagesTake() throws IOException {
        JsonNode first = found(reconstruct("", "--reference", at("cylinder.yaml")));
        double factor = first.at("/calibration/factor").asDouble();
        // four small blocks on faces of a box: the model of a pair is right within some per cent
        assertThat(factor).isCloseTo(1, within(0.1));
        assertThat(first.at("/calibration/relative_error").asDouble()).isBetween(1e-4, 0.05);
        Files.copy(at("out").resolve("calibration.yaml"), at("factor.yaml"));

        JsonNode second = found(reconstruct("calibration: factor.yaml", "--reference", at("cylinder.yaml")));

        assertThat(second.at("/corrections/applied/calibration/factor").asDouble())
                .isCloseTo(factor, within(1e-9));
        assertThat(second.at("/activity/total_kBq").asDouble())
                .isCloseTo(factor * first.at("/activity/total_kBq").asDouble(), within(1e-4 * 62));
        assertThat(second.at("/calibration/factor").asDouble()).isCloseTo(1, within(1e-4));
    }

    @Test
    void aReferenceTooSmallToMeasureIsRefused() throws IOException {
        Path point = write("thin.yaml", """
                raysheaf: phantom/1
                name: thin
                parts:
                  - {name: rod, shape: {kind: cylinder, radius_mm: 2, length_mm: 20}, material: vacuum, concentration_kBq_per_mL: 20}
                """);
        refused(
                reconstruct("", "--reference", point),
                "the reference phantom thin: expected a radioactive part that reaches 3.0 mm around some voxels in at least 4"
                        + " slices, found fewer");
    }
}
