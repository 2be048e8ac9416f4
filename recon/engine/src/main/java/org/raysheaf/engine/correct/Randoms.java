package org.raysheaf.engine.correct;

import java.io.IOException;
import java.util.Arrays;
import java.util.EnumSet;
import java.util.List;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.event.PairingTally;

/**
 * Random coincidences expected in each pair of elements over the whole acquisition, as a product r_a · r_b of rates of the two, which
 * independent photons obey. Immutable, safe for use by several threads.
 */
public final class Randoms {
    private static final int BLOCK = 1 << 16;
    private static final int MOST_ROUNDS = 200;
    private static final double SETTLED = 1e-7;

    /**
     * Strength of the prior that holds an element near the mean of its block, in delayed events: without it elements of few delayed events
     * would jump between nothing and far too much.
     */
    private static final double PRIOR = 4;

    private final DetectorSystem system;
    private final double[] rates;
    private final double total;
    private final double relativeError;

    private Randoms(DetectorSystem system, double[] rates, double total, double relativeError) {
        this.system = system;
        this.rates = rates;
        this.total = total;
        this.relativeError = relativeError;
    }

    /**
     * From delayed pairs: the rates that make their numbers in each element most likely, each element's with a gamma prior about the mean
     * of its block (a Poisson likelihood of a product model, by fixed-point iteration), times what {@link #promptShare} says. Far less
     * noisy than delayed pairs themselves, since a rate gathers the pairs of an element with all others.
     *
     * @param list the list
     * @param system its system
     * @return the randoms
     * @throws IOException if the list cannot be read or has no delayed pairs
     */
    public static Randoms fromDelayed(EventSource list, DetectorSystem system) throws IOException {
        if (!list.attributes().contains(Attribute.DELAYED)) {
            throw new IOException(
                    "the list has no column delayed: expected delayed pairs to estimate randoms from, found"
                            + " none; take randoms: singles or none, or record a delayed window");
        }
        double[] fans = new double[system.elements()];
        long delayed = 0;
        EventBlock block =
                new EventBlock(EnumSet.of(Attribute.ELEMENT_A, Attribute.ELEMENT_B, Attribute.DELAYED), BLOCK);
        try (EventSource.Cursor cursor = list.open()) {
            while (cursor.next(block)) {
                for (int i = 0; i < block.size(); i++) {
                    int a = block.ints(Attribute.ELEMENT_A)[i];
                    int b = block.ints(Attribute.ELEMENT_B)[i];
                    if (block.bytes(Attribute.DELAYED)[i] != 0 && system.admits(a, b)) {
                        fans[a]++;
                        fans[b]++;
                        delayed++;
                    }
                }
            }
        }
        if (delayed == 0) {
            return new Randoms(system, new double[system.elements()], 0, 0);
        }
        double[] rates = mostLikely(system, fans);
        double share = promptShare(list.header().pairing());
        return scaledTo(system, rates, share * delayed, 1 / Math.sqrt((double) delayed));
    }

    /**
     * From singles: 2τ · S_a · S_b · T with the one-sided window τ and the time T, times the share that the rule for crowds leaves (see {@link
     * #promptShare}).
     *
     * @param list the list, whose header tells the singles of each element
     * @param system its system
     * @return the randoms
     * @throws IOException if the header does not tell
     */
    public static Randoms fromSingles(EventSource list, DetectorSystem system) throws IOException {
        PairingRecord pairing = list.header().pairing();
        if (pairing == null || pairing.singles().size() != system.elements()) {
            throw new IOException("the list does not tell the singles of each element: expected " + system.elements()
                    + " numbers in its dataset singles; take randoms: delayed or none");
        }
        double[] singles =
                pairing.singles().stream().mapToDouble(Long::doubleValue).toArray();
        double durationS = list.header().durationS();
        double sum = pairSum(system, singles);
        double windowS = 1e-9 * pairing.settings().windowNs();
        double expected = 2 * windowS * sum / durationS * rateSpread(list, durationS) * singlesShare(pairing);
        return scaledTo(system, singles, expected, 0);
    }

    /** ⟨rate²⟩ / ⟨rate⟩² of a decaying source: randoms go with the square of the activity. */
    private static double rateSpread(EventSource list, double durationS) {
        var nuclide = list.header().nuclide();
        if (nuclide == null) {
            return 1;
        }
        double x = Math.log(2) / nuclide.halfLifeS() * durationS;
        double mean = -Math.expm1(-x) / x;
        double square = -Math.expm1(-2 * x) / (2 * x);
        return square / (mean * mean);
    }

    /**
     * Prompt random pairs for each delayed one. A random pair of two decays is lost or spoilt where a third photon, the partner of one of
     * the two, is in the window too. With the share q of decays that gave two accepted photons among those that gave any, and so 1 + q photons per
     * decay: prompt groups of two decays come as (1−q)² of two photons, 2q(1−q) of three and q² of four, and every opened delayed window
     * as (1+q) times (1−q) of one and q of two. Which of them make random pairs is up to the rule for crowds.
     *
     * @param pairing how the pairs were made; null gives 1
     * @return the ratio
     */
    public static double promptShare(@Nullable PairingRecord pairing) {
        if (pairing == null) {
            return 1;
        }
        double q = pairShare(pairing);
        double delayed = switch (pairing.settings().crowds()) {
            case DISCARD -> (1 + q) * (1 - q);
            case EVERY_PAIR -> (1 + q) * (1 + q);
            case FIRST_TWO, STRONGEST_TWO -> 1 + q;
        };
        return randomPairs(pairing.settings().crowds(), q) / delayed;
    }

    /** Random pairs for every two decays that share a window. */
    private static double randomPairs(Pairing.Crowds crowds, double q) {
        double lone = 1 - q;
        return switch (crowds) {
            case DISCARD -> lone * lone;
            case EVERY_PAIR -> (1 + q) * (1 + q);
            case FIRST_TWO -> lone;
            // of three photons, two of which belong together, two of three pairs are random; of four, four of six
            case STRONGEST_TWO -> lone * lone + 2 * q * lone * 2 / 3 + q * q * 2 / 3;
        };
    }

    /** Random pairs for each one that 2τ S_a S_b counts, which takes all photons. */
    private static double singlesShare(PairingRecord pairing) {
        double q = pairShare(pairing);
        return randomPairs(pairing.settings().crowds(), q) / ((1 + q) * (1 + q));
    }

    /** Decays that gave two accepted photons, among those that gave any: from the numbers of singles and of true pairs. */
    private static double pairShare(PairingRecord pairing) {
        PairingTally tally = pairing.tally();
        double singles = tally.alone() + tally.crowded() + tally.tooClose() + tally.paired();
        if (!(singles > 0)) {
            return 0;
        }
        // Randoms among the prompts by their delayed number, good enough here.
        double twice = Math.max(0, 0.5 * (tally.paired() + tally.tooClose()) - tally.delayed());
        return Math.min(0.99, twice / (singles - twice));
    }

    /**
     * Share of true pairs that no third photon spoilt: with crowds discarded, exp(−2τ · decays per second that gave an accepted photon),
     * since such a decay must neither fall into the window nor have opened it. Other rules for crowds keep nearly all.
     *
     * @param pairing how the pairs were made; null gives 1
     * @param durationS length of the acquisition (s)
     * @return the share
     */
    public static double survival(@Nullable PairingRecord pairing, double durationS) {
        if (pairing == null || pairing.settings().crowds() != Pairing.Crowds.DISCARD) {
            return 1;
        }
        PairingTally tally = pairing.tally();
        double singles = tally.alone() + tally.crowded() + tally.tooClose() + tally.paired();
        double decays = singles / (1 + pairShare(pairing));
        return Math.exp(-2e-9 * pairing.settings().windowNs() * decays / durationS);
    }

    private static double[] mostLikely(DetectorSystem system, double[] fans) {
        double[] rates = new double[fans.length];
        double all = 0;
        for (double fan : fans) {
            all += fan;
        }
        Arrays.fill(rates, Math.sqrt(all) / fans.length);
        for (int round = 0; round < MOST_ROUNDS; round++) {
            double[] partners = partners(system, rates);
            double change = 0;
            for (PlacedBlock block : system.blocks()) {
                double mean = 0;
                int from = block.firstElement();
                int to = from + block.kind().elements();
                for (int e = from; e < to; e++) {
                    mean += rates[e] / (to - from);
                }
                for (int e = from; e < to; e++) {
                    double wanted = (fans[e] + PRIOR) / (partners[e] + PRIOR / Math.max(mean, 1e-30));
                    double next = Math.sqrt(rates[e] * wanted); // half a step: whole ones swing
                    change = Math.max(change, Math.abs(next - rates[e]) / Math.max(next, 1e-30));
                    rates[e] = next;
                }
            }
            if (change < SETTLED) {
                break;
            }
        }
        return rates;
    }

    /** For each element the sum over the elements that it may pair with. */
    private static double[] partners(DetectorSystem system, double[] rates) {
        List<PlacedBlock> blocks = system.blocks();
        double[] sums = new double[blocks.size()];
        for (PlacedBlock block : blocks) {
            for (int e = 0; e < block.kind().elements(); e++) {
                sums[block.index()] += rates[block.firstElement() + e];
            }
        }
        double[] partners = new double[rates.length];
        for (PlacedBlock a : blocks) {
            double sum = 0;
            for (PlacedBlock b : blocks) {
                sum += a.index() != b.index() && system.pairs().admits(a, b) ? sums[b.index()] : 0;
            }
            for (int e = 0; e < a.kind().elements(); e++) {
                partners[a.firstElement() + e] = sum;
            }
        }
        return partners;
    }

    private static double pairSum(DetectorSystem system, double[] rates) {
        double[] partners = partners(system, rates);
        double sum = 0;
        for (int e = 0; e < rates.length; e++) {
            sum += 0.5 * rates[e] * partners[e];
        }
        return sum;
    }

    private static Randoms scaledTo(DetectorSystem system, double[] rates, double total, double relativeError) {
        double sum = pairSum(system, rates);
        double scale = sum > 0 ? Math.sqrt(total / sum) : 0;
        double[] scaled = rates.clone();
        for (int e = 0; e < scaled.length; e++) {
            scaled[e] *= scale;
        }
        return new Randoms(system, scaled, sum > 0 ? total : 0, relativeError);
    }

    /**
     * Expected random pairs of two elements over the acquisition.
     *
     * @param a one element
     * @param b the other
     * @return the number
     */
    public double of(int a, int b) {
        return rates[a] * rates[b];
    }

    /**
     * Expected random pairs of all pairs of elements that may pair.
     *
     * @return the number
     */
    public double total() {
        return total;
    }

    /**
     * Statistical error of the total.
     *
     * @return relative standard error; 0 if it is negligible
     */
    public double relativeError() {
        return relativeError;
    }

    /**
     * The system whose pairs these are.
     *
     * @return the system
     */
    public DetectorSystem system() {
        return system;
    }
}
