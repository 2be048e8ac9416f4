package org.raysheaf.transport;

import java.util.Arrays;
import java.util.List;
import org.apache.commons.rng.UniformRandomProvider;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.frame.Vector3;

/**
 * The radioactivity of crystals with lutetium, evenly spread in them: a beta ray that stops where it is, and the three gamma rays of 88, 202
 * and 307 keV, each by its own chance (intensities from memory). The beta spectrum is that of an allowed decay with endpoint 593 keV and
 * daughter charge 72: N(T) ∝ p W F (Q − T)², with the non-relativistic Fermi function F = x/(1 − e^(−x)), x = 2παZW/p. Immutable.
 */
final class Lutetium {
    private static final double ENDPOINT_KEV = 593;
    private static final double[] GAMMA_KEV = {88, 202, 307};
    private static final double[] GAMMAS_PER_DECAY = {0.145, 0.78, 0.936};
    private static final int CELLS = 1024;
    private static final double[] BETA_KEV = inverseSpectrum();

    private final PlacedBlock[] blocks;
    private final double[] activityUpTo;

    Lutetium(List<PlacedBlock> all) {
        blocks = all.stream()
                .filter(block ->
                        block.kind().readout().lutetium() && block.material().lutetiumBqPerMm3() > 0)
                .toArray(PlacedBlock[]::new);
        activityUpTo = new double[blocks.length];
        double sum = 0;
        for (int i = 0; i < blocks.length; i++) {
            Vector3 crystal = blocks[i].kind().lattice().crystalMm();
            sum += blocks[i].material().lutetiumBqPerMm3()
                    * blocks[i].kind().elements()
                    * crystal.x()
                    * crystal.y()
                    * crystal.z();
            activityUpTo[i] = sum;
        }
    }

    /** Activity of all crystals (Bq). */
    double activityBq() {
        return blocks.length == 0 ? 0 : activityUpTo[blocks.length - 1];
    }

    /** Lets a decay happen in some crystal; the point receives its place. */
    void decay(double[] point, UniformRandomProvider random, Deposits deposits, Emission emission, Flight flight) {
        int at = Arrays.binarySearch(activityUpTo, random.nextDouble() * activityBq());
        PlacedBlock block = blocks[Math.min(blocks.length - 1, at >= 0 ? at + 1 : -at - 1)];
        CrystalBlock lattice = block.kind().lattice();
        int crystal = random.nextInt(block.kind().elements());
        Vector3 size = lattice.crystalMm();
        Vector3 place = block.pose()
                .apply(new Vector3(
                        lattice.centreU(crystal) + (random.nextDouble() - 0.5) * size.x(),
                        lattice.centreV(crystal) + (random.nextDouble() - 0.5) * size.y(),
                        lattice.centreW(crystal) + (random.nextDouble() - 0.5) * size.z()));
        point[0] = place.x();
        point[1] = place.y();
        point[2] = place.z();
        Photon beta = new Photon();
        beta.emit(point, drawBetaKeV(random), Photon.OTHER);
        deposits.add(block.firstElement() + crystal, beta, beta.energyKeV);
        for (int i = 0; i < GAMMA_KEV.length; i++) {
            if (random.nextDouble() < GAMMAS_PER_DECAY[i]) {
                emission.gamma(point, GAMMA_KEV[i], flight);
            }
        }
    }

    static double drawBetaKeV(UniformRandomProvider random) {
        double place = random.nextDouble() * CELLS;
        int i = (int) place;
        return BETA_KEV[i] + (place - i) * (BETA_KEV[i + 1] - BETA_KEV[i]);
    }

    private static double[] inverseSpectrum() {
        int steps = 20_000;
        double[] upTo = new double[steps + 1];
        for (int i = 1; i <= steps; i++) {
            upTo[i] = upTo[i - 1] + density((i - 0.5) / steps * ENDPOINT_KEV);
        }
        double[] inverse = new double[CELLS + 1];
        int i = 0;
        for (int c = 0; c <= CELLS; c++) {
            while (i < steps && upTo[i] < upTo[steps] * c / CELLS) {
                i++;
            }
            inverse[c] = i * ENDPOINT_KEV / steps;
        }
        return inverse;
    }

    private static double density(double kineticKeV) {
        double total = 1 + kineticKeV / 510.99895;
        double momentum = Math.sqrt(total * total - 1);
        double x = 2 * Math.PI * 72 / 137.035999 * total / momentum;
        double fermi = x / -Math.expm1(-x);
        double rest = (ENDPOINT_KEV - kineticKeV) / 510.99895;
        return momentum * total * fermi * rest * rest;
    }
}
