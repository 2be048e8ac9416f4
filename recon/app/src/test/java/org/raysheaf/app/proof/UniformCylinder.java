package org.raysheaf.app.proof;

import java.io.IOException;
import java.time.Instant;
import java.util.List;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.engine.EstimationSettings;
import org.raysheaf.engine.Estimator;
import org.raysheaf.engine.FieldOfView;
import org.raysheaf.engine.PassListener;
import org.raysheaf.engine.SampledSensitivity;
import org.raysheaf.engine.Sensitivity;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.MonolithicBlock;
import org.raysheaf.geometry.detector.PairRule;
import org.raysheaf.geometry.detector.Placement;
import org.raysheaf.geometry.detector.Readout;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.Material;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.geometry.phantom.PhantomPart;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.ElementResponse;
import org.raysheaf.geometry.response.Positions;
import org.raysheaf.geometry.solid.Cylinder;
import org.raysheaf.transport.Acquisition;
import org.raysheaf.transport.Physics;
import org.raysheaf.transport.Simulation;

/** A uniform cylinder of F-18 in heron-12: an ideal list of it, and the image that comes back, with no scale factor anywhere. */
final class UniformCylinder {
    static final double RADIUS_MM = 18;
    static final double LENGTH_MM = 44;
    /** Fits into the field of view of slabs(). */
    static final double SHORT_MM = 32;

    static final double TRUTH_BQ_PER_ML = 500;

    private final DetectorSystem system;
    private final ForkJoinPool pool;
    private final double viewRadiusMm;
    private final double lengthMm;
    private final Image sensitivity;
    private final CoincidenceSheaves sheaves;

    /** The system of the sample data: three rings of 12 blocks of 11 × 11 crystals. */
    static UniformCylinder heron12(double attenuationLengthMm, double depthMm, ForkJoinPool pool) {
        CrystalBlock tile = new CrystalBlock(
                "tile", 11, 11, 1, new Vector3(1.85, 1.85, depthMm), new Vector3(1.7, 1.7, depthMm), "crystal");
        return new UniformCylinder(
                rings(attenuationLengthMm, tile), LENGTH_MM, Positions.ONE_RAY, Grid.centred(63, 63, 67, 0.925), pool);
    }

    /** The same rings with a tenth of the crystals, for a quick look. */
    static UniformCylinder coarse(double attenuationLengthMm, double depthMm, ForkJoinPool pool) {
        CrystalBlock tile = new CrystalBlock(
                "tile", 4, 4, 1, new Vector3(5.1, 5.1, depthMm), new Vector3(4.8, 4.8, depthMm), "crystal");
        return new UniformCylinder(
                rings(attenuationLengthMm, tile), LENGTH_MM, Positions.ONE_RAY, Grid.centred(29, 29, 31, 2), pool);
    }

    /** The crystals of heron-12 with a measured depth. */
    static UniformCylinder withDepth(double depthFwhmMm, int rays, ForkJoinPool pool) {
        Readout ideal = Readout.IDEAL;
        CrystalBlock tile = new CrystalBlock(
                "tile",
                11,
                11,
                1,
                new Vector3(1.85, 1.85, 13),
                new Vector3(1.7, 1.7, 13),
                "crystal",
                new Readout(
                        ideal.channel(),
                        ideal.decoding(),
                        0,
                        depthFwhmMm,
                        0,
                        0.5,
                        0,
                        0,
                        1,
                        0,
                        0,
                        ideal.deadTime(),
                        0,
                        null,
                        false));
        return new UniformCylinder(
                rings(12.2, tile), LENGTH_MM, new Positions(rays, true, true), Grid.centred(63, 63, 67, 0.925), pool);
    }

    /** A ring of eight blocks of one piece, like owl-slabs of the sample data, in cells of some size. */
    static UniformCylinder slabs(Vector3 cellMm, int rays, Grid grid, long mostSheaves, ForkJoinPool pool) {
        MonolithicBlock slab = new MonolithicBlock(
                "slab", new Vector3(30, 48, 12), cellMm, "crystal", new Vector3(0.6, 0.6, 1.2), Readout.IDEAL);
        DetectorSystem system = new DetectorSystem(new SystemDescription(
                "slabs",
                new org.raysheaf.geometry.detector.FieldOfView(25, 40),
                new PairRule(2),
                List.of(new Material("crystal", 12.2)),
                List.of(slab),
                List.of(new Placement.Rings("slab", 8, 38, 0, List.of(0.0)))));
        return new UniformCylinder(system, SHORT_MM, new Positions(rays, true, true), grid, mostSheaves, pool);
    }

    private static DetectorSystem rings(double attenuationLengthMm, CrystalBlock tile) {
        return new DetectorSystem(new SystemDescription(
                "rings",
                new org.raysheaf.geometry.detector.FieldOfView(29, 62),
                new PairRule(3),
                List.of(new Material("crystal", attenuationLengthMm)),
                List.of(tile),
                List.of(new Placement.Rings("tile", 12, 42, 0, List.of(-20.8, 0.0, 20.8)))));
    }

    private UniformCylinder(DetectorSystem system, double lengthMm, Positions positions, Grid grid, ForkJoinPool pool) {
        this(system, lengthMm, positions, grid, Long.MAX_VALUE, pool);
    }

    private UniformCylinder(
            DetectorSystem system,
            double lengthMm,
            Positions positions,
            Grid grid,
            long mostSheaves,
            ForkJoinPool pool) {
        this.pool = pool;
        this.system = system;
        this.lengthMm = lengthMm;
        viewRadiusMm = system.fieldOfView().radiusMm();
        sheaves = new CoincidenceSheaves(ElementResponse.tabulate(system, pool, Progress.SILENT)).locating(positions);
        sensitivity = sheaves.continuous()
                ? sampled(grid, mostSheaves)
                : Sensitivity.of(sheaves, grid, pool, Progress.SILENT);
    }

    private Image sampled(Grid grid, long mostSheaves) {
        SampledSensitivity.Stop stop = new SampledSensitivity.Stop(0.01, mostSheaves);
        return SampledSensitivity.of(sheaves.sampler(1, 0), grid, system.fieldOfView(), stop, pool, Progress.SILENT)
                .mean();
    }

    ListInMemory record(int events) throws IOException {
        PhantomPart cylinder = new PhantomPart(
                "cylinder",
                new Cylinder(RADIUS_MM, lengthMm),
                Vector3.ZERO,
                Vector3.ZERO,
                "vacuum",
                TRUTH_BQ_PER_ML / 1000);
        // So weak that randoms are one in several thousand: 2 · 1 ns · (30,000 singles per second)².
        Acquisition acquisition = new Acquisition(
                "",
                "",
                "F-18",
                36_000,
                Instant.EPOCH,
                20,
                (long) events,
                ListKind.PAIRS,
                false,
                false,
                false,
                Physics.STRAIGHT,
                Pairing.within(1));
        Simulation simulation = new Simulation(
                acquisition, new Phantom(new PhantomDescription("cylinder", List.of(cylinder))), system, "");
        ListInMemory list = new ListInMemory();
        list.complete(simulation.run(list, pool, Progress.SILENT).header());
        return list;
    }

    /** The image, divided by the true concentration. */
    Image reconstruct(ListInMemory list, int passes) throws IOException {
        ListHeader header = list.header();
        Image counts = sensitivity.copy();
        for (int j = 0; j < counts.values().length; j++) {
            counts.values()[j] *= (float) header.pairsPerBqPerMlAndMm3();
        }
        Image support = FieldOfView.support(counts, FieldOfView.cylinder(viewRadiusMm));
        EventStore store = EventLoader.load(
                list, sheaves, support, EventSelection.ALL, 1, EventBackground.NONE, pool, Progress.SILENT);
        Image image = new Estimator(store, counts, EstimationSettings.mlem(passes), pool)
                .run(PassListener.SILENT, Progress.SILENT)
                .image();
        for (int j = 0; j < image.values().length; j++) {
            image.values()[j] /= (float) TRUTH_BQ_PER_ML;
        }
        return image;
    }

    /** Mean over the voxels whose centres lie between two radii and below a height, and its standard error from their scatter. */
    static double[] mean(Image image, double fromMm, double toMm, double lowMm, double highMm) {
        Grid grid = image.grid();
        double sum = 0;
        double squares = 0;
        int n = 0;
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    Vector3 p = grid.centre(x, y, z);
                    double r = Math.hypot(p.x(), p.y());
                    if (r >= fromMm && r < toMm && p.z() >= lowMm && p.z() < highMm) {
                        double value = image.at(x, y, z);
                        sum += value;
                        squares += value * value;
                        n++;
                    }
                }
            }
        }
        double mean = sum / n;
        return new double[] {mean, Math.sqrt((squares / n - mean * mean) / n)};
    }
}
