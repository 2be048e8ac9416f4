package org.raysheaf.transport;

import java.util.List;
import java.util.Locale;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.IntStream;
import org.apache.commons.math3.linear.Array2DRowRealMatrix;
import org.apache.commons.math3.linear.ArrayRealVector;
import org.apache.commons.math3.linear.LUDecomposition;
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
import org.raysheaf.geometry.response.WindowShares;

/**
 * What the electronics make of a photon on a line: the probability that it is accepted by the energy window and assigned to a crystal, for
 * every first interaction in that crystal. Most first interactions do not end in the window; some photons that first interact in one
 * crystal are assigned to another. Found by sending single photons from all over the field of view through the whole detector, block
 * by block with its readout, without dead time: in each class of crystals and bin of directions, signals in the window over the expected
 * number of first interactions, which is known exactly along each photon's line. A quadratic polynomial in the direction is fitted to
 * the bins of a class.
 *
 * <p>Photons of lower energy, as they come from scatter in an object, are sent as well: their acceptance over all crystals, relative to that
 * of 511 keV.
 */
public final class WindowResponse {
    private static final int PHOTONS_PER_CHUNK = 1 << 16;
    private static final int BINS = 10;
    private static final int TERMS = WindowShares.TERMS;

    /** Bins with fewer expected first interactions are not fitted. */
    private static final double LEAST = 50;

    /** Spacing of the energies below 511 keV (keV). */
    private static final double STEP_KEV = 25;

    private final DetectorSystem system;
    private final ElementResponse response;
    private final double lowestKeV;
    private final double highestKeV;
    private final ReadoutPlan readout;
    private final World world;
    private final long seed;

    /** Counts of one class and bin, or of all: signals, expected first interactions, and these times direction. */
    private static final class Counts {
        final double[] signals;
        final double[] expected;
        final double[] expectedU;
        final double[] expectedV;

        Counts(int size) {
            signals = new double[size];
            expected = new double[size];
            expectedU = new double[size];
            expectedV = new double[size];
        }

        Counts plus(Counts other) {
            for (int i = 0; i < signals.length; i++) {
                signals[i] += other.signals[i];
                expected[i] += other.expected[i];
                expectedU[i] += other.expectedU[i];
                expectedV[i] += other.expectedV[i];
            }
            return this;
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
        Counts counts = work.send(KleinNishina.ELECTRON_KEV, 0, chunks, pool, progress);
        double all = work.ratio(counts);
        double[] relative = new double[energies];
        relative[energies - 1] = 1;
        for (int i = 0; i < energies - 1; i++) {
            Counts lower = work.send(work.energyKeV(i), chunks + i * each, each, pool, progress);
            relative[i] = work.ratio(lower) / all;
        }
        WindowShares shares = work.fit(counts, all, relative);
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

    private double ratio(Counts counts) {
        double signals = 0;
        double expected = 0;
        for (int i = 0; i < counts.signals.length; i++) {
            signals += counts.signals[i];
            expected += counts.expected[i];
        }
        return signals / expected;
    }

    private Counts send(double energyKeV, int firstChunk, int chunks, ForkJoinPool pool, Progress progress) {
        // A fixed number of partial sums, each over every so-manieth chunk in order: the same bits on any number of
        // threads.
        int parts = 16;
        Counts[] sums = new Counts[parts];
        pool.submit(() -> IntStream.range(0, parts).parallel().forEach(part -> {
                    sums[part] = new Counts(response.classes() * BINS * BINS);
                    for (int chunk = part; chunk < chunks; chunk += parts) {
                        new Chunk(energyKeV, firstChunk + chunk, sums[part]).run();
                        progress.advance(PHOTONS_PER_CHUNK);
                    }
                }))
                .join();
        for (int part = 1; part < parts; part++) {
            sums[0].plus(sums[part]);
        }
        return sums[0];
    }

    /** The work of one chunk. */
    private final class Chunk {
        private final double energyKeV;
        private final Counts counts;
        private final UniformRandomProvider random;
        private final Deposits deposits = new Deposits();
        private final Pulses pulses = new Pulses(16);
        private final Flight flight;
        private final PulseMaker maker;
        private final Decoder decoder = new Decoder();
        private final RayPath path = new RayPath();
        private final Photon photon = new Photon();
        private final double[] point = new double[3];

        Chunk(double energyKeV, long number, Counts counts) {
            this.energyKeV = energyKeV;
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
                int bin = bin(path.element(i), dx, dy, dz);
                if (bin >= 0) {
                    double share = left * (1 - through);
                    counts.expected[bin] += share;
                    counts.expectedU[bin] += share * lastU;
                    counts.expectedV[bin] += share * lastV;
                }
                left *= through;
            }
        }

        private void signal(double dx, double dy, double dz) {
            pulses.clear();
            maker.make(deposits, 0, 0, point, false);
            for (int row = 0; row < pulses.size(); row++) {
                ReadoutPlan.Block block = readout.blockOfChannel(pulses.channel[row]);
                double keV = Decoder.energyKeV(block, pulses, row);
                boolean seen = keV >= block.lowestKeV && keV <= block.highestKeV;
                if (seen && keV >= lowestKeV && keV <= highestKeV) {
                    decoder.decode(block, pulses, row);
                    int bin = bin(decoder.element, dx, dy, dz);
                    if (bin >= 0) {
                        counts.signals[bin]++;
                    }
                }
            }
        }

        private double lastU;
        private double lastV;

        /** The class of a crystal and the bin of a direction in its frame, mirrored like the class; −1 from behind. */
        private int bin(int element, double dx, double dy, double dz) {
            ReadoutPlan.Block block = readout.blockOf(element);
            if (!(block.along(2, dx, dy, dz) > 0)) {
                return -1;
            }
            lastU = response.flipsU(element) ? -block.along(0, dx, dy, dz) : block.along(0, dx, dy, dz);
            lastV = response.flipsV(element) ? -block.along(1, dx, dy, dz) : block.along(1, dx, dy, dz);
            int u = (int) Math.min(BINS - 1, 0.5 * BINS * (lastU + 1));
            int v = (int) Math.min(BINS - 1, 0.5 * BINS * (lastV + 1));
            return (response.classOf(element) * BINS + u) * BINS + v;
        }
    }

    /** Weighted least squares over the bins of each class; a class with too little to fit takes the mean share. */
    private WindowShares fit(Counts counts, double all, double[] relative) {
        double[] coefficients = new double[response.classes() * TERMS];
        double errors = 0;
        double squares = 0;
        double bins = 0;
        for (int c = 0; c < response.classes(); c++) {
            double[][] normal = new double[TERMS][TERMS];
            double[] right = new double[TERMS];
            double[] row = new double[TERMS];
            double expected = 0;
            int used = 0;
            for (int b = c * BINS * BINS; b < (c + 1) * BINS * BINS; b++) {
                double e = counts.expected[b];
                if (e < LEAST) {
                    continue;
                }
                WindowShares.terms(counts.expectedU[b] / e, counts.expectedV[b] / e, row);
                double weight = e / all; // 1/variance of signals / expected
                for (int i = 0; i < TERMS; i++) {
                    right[i] += weight * row[i] * counts.signals[b] / e;
                    for (int j = 0; j < TERMS; j++) {
                        normal[i][j] += weight * row[i] * row[j];
                    }
                }
                expected += e;
                used++;
            }
            if (used < 2 * TERMS) {
                coefficients[c * TERMS] = all;
                continue;
            }
            double[] solved = new LUDecomposition(new Array2DRowRealMatrix(normal, false))
                    .getSolver()
                    .solve(new ArrayRealVector(right, false))
                    .toArray();
            System.arraycopy(solved, 0, coefficients, c * TERMS, TERMS);
            errors += TERMS / (expected * all); // squared relative error of a fitted share, averaged over the bins
            for (int b = c * BINS * BINS; b < (c + 1) * BINS * BINS; b++) {
                double e = counts.expected[b];
                if (e >= LEAST) {
                    WindowShares.terms(counts.expectedU[b] / e, counts.expectedV[b] / e, row);
                    double fitted = 0;
                    for (int i = 0; i < TERMS; i++) {
                        fitted += coefficients[c * TERMS + i] * row[i];
                    }
                    double pull = (counts.signals[b] / e - fitted) / Math.sqrt(Math.max(fitted, 0.01) / e);
                    squares += pull * pull;
                    bins++;
                }
            }
            bins -= TERMS;
        }
        double[] energies = new double[relative.length];
        for (int i = 0; i < energies.length; i++) {
            energies[i] = energyKeV(i);
        }
        return new WindowShares(
                coefficients,
                energies,
                relative,
                all,
                Math.sqrt(errors / Math.max(1, response.classes())),
                bins > 0 ? squares / bins : Double.NaN);
    }
}
