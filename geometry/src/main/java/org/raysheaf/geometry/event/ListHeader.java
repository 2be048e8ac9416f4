package org.raysheaf.geometry.event;

import java.time.Instant;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.matter.Nuclide;
import org.raysheaf.geometry.settings.Problems;

/**
 * What a list says about itself as a whole.
 *
 * @param systemDescription the text of the system description that the elements refer to, exactly as it was written
 * @param durationS length of the acquisition by the clock (s), greater than 0
 * @param liveTimeS time in which events could be recorded (s), greater than 0, at most the duration
 * @param start when the acquisition began; the reference time of all activities
 * @param nuclide what decayed, or null if it is not known (then nothing is corrected for decay or branching)
 * @param pairing how its pairs were made of singles, or null if that is not known or the list holds singles
 */
public record ListHeader(
        String systemDescription,
        double durationS,
        double liveTimeS,
        Instant start,
        @Nullable Nuclide nuclide,
        @Nullable PairingRecord pairing) {
    private static final double BQ_PER_BQ_PER_ML_AND_MM3 = 1e-3;

    public ListHeader {
        new Problems("list")
                .above("duration_s", durationS, 0)
                .above("live_time_s", liveTimeS, 0)
                .rule(
                        !(liveTimeS > durationS * (1 + 1e-9)),
                        "live_time_s",
                        "expected at most duration_s = " + durationS + ", found " + liveTimeS)
                .orThrow();
    }

    /**
     * A header that does not say how pairs were made.
     *
     * @param systemDescription the text of the system description
     * @param durationS length of the acquisition by the clock (s)
     * @param liveTimeS time in which events could be recorded (s)
     * @param start when the acquisition began
     * @param nuclide what decayed, or null
     */
    public ListHeader(
            String systemDescription, double durationS, double liveTimeS, Instant start, @Nullable Nuclide nuclide) {
        this(systemDescription, durationS, liveTimeS, start, nuclide, null);
    }

    /**
     * Pairs of annihilation photons emitted, while events could be recorded, per becquerel at the start: branching · ∫ exp(−λt) dt ·
     * live time / duration. Without a nuclide every count is taken as one pair and decay is ignored.
     *
     * @return the number (s)
     */
    public double pairsPerBecquerel() {
        double liveFraction = liveTimeS / durationS;
        if (nuclide == null) {
            return liveTimeS;
        }
        return nuclide.positronBranching() * nuclide.effectiveTimeS(durationS) * liveFraction;
    }

    /**
     * The same in the unit of images: pairs emitted, while events could be recorded, by 1 Bq/mL in 1 mm³, which is 10⁻³ Bq.
     *
     * @return the number (mL / (Bq mm³))
     */
    public double pairsPerBqPerMlAndMm3() {
        return BQ_PER_BQ_PER_ML_AND_MM3 * pairsPerBecquerel();
    }
}
