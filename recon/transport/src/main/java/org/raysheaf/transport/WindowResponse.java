package org.raysheaf.transport;

import java.util.Arrays;
import java.util.List;
import java.util.Locale;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.IntStream;
import org.apache.commons.rng.UniformRandomProvider;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.RayPath;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.KleinNishina;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.geometry.phantom.Source;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.ElementResponse;
import org.raysheaf.geometry.response.Response;
import org.raysheaf.geometry.response.WindowShares;

/**
 * What the electronics make of a photon on a line: the probability that it is accepted by the energy window and assigned to a crystal, for
 * every first interaction in that crystal. Most first interactions do not end in the window; some photons that first interact in one
 * crystal are assigned to another. Found by sending single photons from all over the field of view through the whole detector, block
 * by block with its readout, without dead time, and comparing signals in the window with the expected number of first interactions, which
 * is known exactly along each photon's line. The share is a product of two:
 *
 * <ul>
 *   <li>a share over direction, common to all elements: of photons that <em>first interact</em> with that direction, those that end in the window
 *       anywhere. So every line keeps its number of accepted photons, whatever crystal they are assigned to;
 *   <li>a factor for each class of elements: signals <em>assigned</em> to the class over what the first share lets expect there.
 * </ul>
 *
 * <p>A share of assigned signals by element and direction would count more than there is: photons move on along their direction before they are
 * assigned, and in a beam that spreads from the object fewer of them come from the neighbour than in the parallel beam that a
 * direction stands for. (It was tried: 4 % too much in the middle of heron-12.)
 *
 * <p>Photons of lower energy, as they come from scatter in an object, are sent as well: their acceptance over all crystals, relative to that
 * of 511 keV.
 */
public final class WindowResponse {
    private static final int PHOTONS_PER_CHUNK = 1 << 16;
    private static final int SHAPE = WindowShares.SHAPE;

    /** Bins of the energy spectrum, and their width (keV). */
    private static final int SPECTRUM = 300;

    private static final double SPECTRUM_KEV = 5;

    /** Expected signals below which a bin or class is drawn toward the mean. */
    private static final double LEAST = 50;

    /** Only lines less steep than this against a block's axis tell how deep its signals are (slope). */
    private static final double NEARLY_STRAIGHT = 0.3;

    /** Signals named farther from their line than this are mistakes of another kind (mm). */
    private static final double FAR_MM = 8;

    /** Spacing of the energies below 511 keV (keV). */
    private static final double STEP_KEV = 25;

    private final DetectorSystem system;
    private final ElementResponse response;
    private final double lowestKeV;
    private final double highestKeV;
    private final ReadoutPlan readout;
    private final World world;
    private final long seed;

    /** Counts: by class, signals and what is expected of them; by direction, accepted photons and first interactions. */
    private static final class Counts {
        final double[] signals;
        final double[] expected;
        final double[] shapeSignals = new double[SHAPE * SHAPE];
        final double[] shapeExpected = new double[SHAPE * SHAPE];
        final double[] spectrum = new double[SPECTRUM];
        double offsetTimesSlope;
        double slopeSquared;

        Counts(int classes) {
            signals = new double[classes];
            expected = new double[classes];
        }

        void add(Counts other) {
            for (int c = 0; c < signals.length; c++) {
                signals[c] += other.signals[c];
                expected[c] += other.expected[c];
            }
            for (int i = 0; i < shapeSignals.length; i++) {
                shapeSignals[i] += other.shapeSignals[i];
                shapeExpected[i] += other.shapeExpected[i];
            }
            for (int i = 0; i < SPECTRUM; i++) {
                spectrum[i] += other.spectrum[i];
            }
            offsetTimesSlope += other.offsetTimesSlope;
            slopeSquared += other.slopeSquared;
        }
    }

    private WindowResponse(ElementResponse response, double lowestKeV, double highestKeV, long seed) {
        this.response = response;
        this.system = response.system();
        this.lowestKeV = lowestKeV;
        this.highestKeV = highestKeV;
        this.seed = seed;
        this.readout = new ReadoutPlan(system);
        Source nowhere = new Source.Point("nowhere", Vector3.ZERO, 1);
        Phantom empty = new Phantom(new PhantomDescription("empty", List.of(), null, List.of(), List.of(nowhere)));
        this.world = new World(system, empty, new Physics(false, 0, false, false, "air"));
    }

    /**
     * Finds the shares of a system for a window.
     *
     * @param response where photons first interact
     * @param lowestKeV lower end of the energy window (keV)
     * @param highestKeV upper end (keV), infinity for none
     * @param photons photons of 511 keV to send; the error of a crystal's share falls as 1/√photons
     * @param seed start of all random numbers
     * @param pool does the work; the result does not depend on its size
     * @param progress hears of it, in photons
     * @return shares with their errors
     */
    public static WindowShares of(
            ElementResponse response,
            double lowestKeV,
            double highestKeV,
            long photons,
            long seed,
            ForkJoinPool pool,
            Progress progress) {
        WindowResponse work = new WindowResponse(response, lowestKeV, highestKeV, seed);
        int chunks = (int) Math.max(1, photons / PHOTONS_PER_CHUNK);
        int energies = work.energies();
        int each = Math.max(1, chunks / 20);
        progress.begin("window response", (long) (chunks + each * (energies - 1)) * PHOTONS_PER_CHUNK, "photons");
        double[] flat = new double[SHAPE * SHAPE];
        Arrays.fill(flat, 1);
        int first = Math.max(1, chunks / 3);
        Counts common = work.send(KleinNishina.ELECTRON_KEV, flat, 0, first, pool, progress);
        double all = ratio(common);
        double[] shape = shape(common, all);
        Counts counts = work.send(KleinNishina.ELECTRON_KEV, shape, first, chunks - first, pool, progress);
        double[] relative = new double[energies];
        relative[energies - 1] = 1;
        for (int i = 0; i < energies - 1; i++) {
            Counts lower = work.send(work.energyKeV(i), flat, chunks + i * each, each, pool, progress);
            relative[i] = ratio(lower) / all;
        }
        WindowShares shares = work.shares(counts, shape, all, relative);
        progress.end(String.format(Locale.ROOT, "%.1f %% of first interactions end in the window", 100 * all));
        return shares;
    }

    /** From the lowest energy that could pass, in steps up to 511 keV. */
    private int energies() {
        double lowest = Math.max(100, lowestKeV - 100);
        return 1 + (int) Math.max(1, Math.ceil((KleinNishina.ELECTRON_KEV - lowest) / STEP_KEV));
    }

    private double energyKeV(int i) {
        return KleinNishina.ELECTRON_KEV - (energies() - 1 - i) * STEP_KEV;
    }

    private static double ratio(Counts counts) {
        return Arrays.stream(counts.shapeSignals).sum()
                / Arrays.stream(counts.shapeExpected).sum();
    }

    private Counts send(
            double energyKeV, double[] shape, int firstChunk, int chunks, ForkJoinPool pool, Progress progress) {
        // A fixed number of partial sums, each over every sixteenth chunk in order: the same bits on any number of
        // threads.
        int parts = 16;
        Counts[] sums = new Counts[parts];
        pool.submit(() -> IntStream.range(0, parts).parallel().forEach(part -> {
                    sums[part] = new Counts(response.classes());
                    for (int chunk = part; chunk < chunks; chunk += parts) {
                        new Chunk(energyKeV, shape, firstChunk + chunk, sums[part]).run();
                        progress.advance(PHOTONS_PER_CHUNK);
                    }
                }))
                .join();
        for (int part = 1; part < parts; part++) {
            sums[0].add(sums[part]);
        }
        return sums[0];
    }

    /** The work of one chunk. */
    private final class Chunk {
        private final double energyKeV;
        private final double[] shape;
        private final Counts counts;
        private final UniformRandomProvider random;
        private final Deposits deposits = new Deposits();
        private final Pulses pulses = new Pulses(16);
        private final Flight flight;
        private final PulseMaker maker;
        private final Decoder decoder = new Decoder();
        private final RayPath path = new RayPath();
        private final Response found = new Response();
        private final Photon photon = new Photon();
        private final double[] point = new double[3];

        Chunk(double energyKeV, double[] shape, long number, Counts counts) {
            this.energyKeV = energyKeV;
            this.shape = shape;
            this.counts = counts;
            random = RandomStreams.stream(seed, number);
            flight = new Flight(world, deposits, random);
            maker = new PulseMaker(readout, pulses, random);
        }

        void run() {
            FieldOfView view = system.fieldOfView();
            for (int i = 0; i < PHOTONS_PER_CHUNK; i++) {
                double r = view.radiusMm() * Math.sqrt(random.nextDouble());
                double angle = 2 * Math.PI * random.nextDouble();
                point[0] = r * Math.cos(angle);
                point[1] = r * Math.sin(angle);
                point[2] = view.lengthMm() * (random.nextDouble() - 0.5);
                photon.emit(point, energyKeV, Photon.ANNIHILATION);
                photon.aimAnywhere(random);
                double dx = photon.dx;
                double dy = photon.dy;
                double dz = photon.dz;
                expect(dx, dy, dz);
                deposits.clear();
                flight.follow(photon);
                if (deposits.size() > 0) {
                    signal(dx, dy, dz);
                }
            }
        }

        /** First interactions of a photon of 511 keV on this line, which is what effective areas are made of. */
        private void expect(double dx, double dy, double dz) {
            system.trace(point[0], point[1], point[2], dx, dy, dz, path);
            double left = 1;
            for (int i = 0; i < path.size() && left > 1e-6; i++) {
                double through = Math.exp(-(path.leave(i) - path.enter(i)) / path.attenuationLength(i));
                double share = left * (1 - through);
                int node = node(path.element(i), dx, dy, dz);
                counts.shapeExpected[node] += share;
                counts.expected[response.classOf(path.element(i))] += share * shape[node];
                left *= through;
            }
        }

        private void signal(double dx, double dy, double dz) {
            pulses.clear();
            maker.make(deposits, 0, 0, point, false);
            int node = node(deposits.element[0], dx, dy, dz);
            for (int row = 0; row < pulses.size(); row++) {
                ReadoutPlan.Block block = readout.blockOfChannel(pulses.channel[row]);
                double keV = Decoder.energyKeV(block, pulses, row);
                counts.spectrum[(int) Math.min(SPECTRUM - 1, keV / SPECTRUM_KEV)]++;
                boolean seen = keV >= block.lowestKeV && keV <= block.highestKeV;
                if (seen && keV >= lowestKeV && keV <= highestKeV) {
                    decoder.decode(block, pulses, row);
                    counts.signals[response.classOf(decoder.element)]++;
                    counts.shapeSignals[node]++;
                    place(block, dx, dy, dz);
                }
            }
        }

        /** The node of a direction in the frame of the block that holds an element. */
        private int node(int element, double dx, double dy, double dz) {
            ReadoutPlan.Block block = readout.blockOf(element);
            return WindowShares.shapeNode(block.along(0, dx, dy, dz)) * SHAPE
                    + WindowShares.shapeNode(block.along(1, dx, dy, dz));
        }

        /**
         * Where the line lies beside the element that was named, at the mean depth of first interactions. On average it is behind, since photons
         * go on before they leave most of their energy: the element stands where the line is somewhat deeper.
         */
        private void place(ReadoutPlan.Block block, double dx, double dy, double dz) {
            double su = block.along(0, dx, dy, dz);
            double sv = block.along(1, dx, dy, dz);
            double sw = block.along(2, dx, dy, dz);
            if (!(sw > 0)) {
                return;
            }
            response.lookUp(decoder.element, su, sv, sw, found);
            int crystal = decoder.element - block.placed.firstElement();
            double depth = block.lattice.centreW(crystal) + found.w() - block.local(2, point[0], point[1], point[2]);
            double slopeU = su / sw;
            double slopeV = sv / sw;
            if (!(slopeU * slopeU + slopeV * slopeV < NEARLY_STRAIGHT * NEARLY_STRAIGHT)) {
                return;
            }
            double u = block.local(0, point[0], point[1], point[2])
                    + depth * slopeU
                    - block.lattice.centreU(crystal)
                    - found.u();
            double v = block.local(1, point[0], point[1], point[2])
                    + depth * slopeV
                    - block.lattice.centreV(crystal)
                    - found.v();
            if (u * u + v * v < FAR_MM * FAR_MM) {
                counts.offsetTimesSlope += u * slopeU + v * slopeV;
                counts.slopeSquared += slopeU * slopeU + slopeV * slopeV;
            }
        }
    }

    /** The common share by direction; where hardly anything comes from, the mean. */
    private static double[] shape(Counts counts, double all) {
        double[] shape = new double[SHAPE * SHAPE];
        for (int i = 0; i < shape.length; i++) {
            // a few photons of the mean tame the empty corners
            shape[i] = (counts.shapeSignals[i] + LEAST * all) / (counts.shapeExpected[i] + LEAST);
        }
        return shape;
    }

    /**
     * What pile-up leaves: signals in the window when the energy of another pulse of the same spectrum is added, over those without. The
     * first pulse must have been noticed at all.
     */
    private double pileUpShare(double[] spectrum) {
        double all = Arrays.stream(spectrum).sum();
        double least = system.blocks().stream()
                .mapToDouble(block -> block.kind().readout().lowestKeV())
                .min()
                .orElse(0);
        double clean = 0;
        double piled = 0;
        for (int i = 0; i < SPECTRUM; i++) {
            double first = (i + 0.5) * SPECTRUM_KEV;
            clean += first >= lowestKeV && first <= highestKeV ? spectrum[i] : 0;
            for (int j = 0; first >= least && j < SPECTRUM; j++) {
                double sum = first + (j + 0.5) * SPECTRUM_KEV;
                piled += sum >= lowestKeV && sum <= highestKeV ? spectrum[i] * spectrum[j] / all : 0;
            }
        }
        return clean > 0 ? piled / clean : 1;
    }

    private WindowShares shares(Counts counts, double[] shape, double all, double[] relative) {
        double[] factors = new double[response.classes()];
        double squares = 0;
        for (int c = 0; c < factors.length; c++) {
            factors[c] = (counts.signals[c] + LEAST) / (counts.expected[c] + LEAST);
            squares += 1 / (counts.signals[c] + LEAST);
        }
        double[] energies = new double[relative.length];
        for (int i = 0; i < energies.length; i++) {
            energies[i] = energyKeV(i);
        }
        double deeper = counts.slopeSquared > 0 ? -counts.offsetTimesSlope / counts.slopeSquared : 0;
        return new WindowShares(
                deeper,
                pileUpShare(counts.spectrum),
                shape,
                factors,
                energies,
                relative,
                all,
                Math.sqrt(squares / factors.length));
    }
}
