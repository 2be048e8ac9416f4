package org.raysheaf.app;

import java.io.IOException;
import java.util.LinkedHashMap;
import java.util.Locale;
import java.util.Map;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.correct.Attenuation;
import org.raysheaf.engine.correct.PileUp;
import org.raysheaf.engine.correct.Randoms;
import org.raysheaf.engine.correct.Scatter;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.ElementResponse;
import org.raysheaf.geometry.response.FlightTimes;
import org.raysheaf.geometry.response.Positions;
import org.raysheaf.geometry.response.WindowShares;

/**
 * What a list, its system and its surroundings say of its pairs before there is any image: the same for reconstructing and for normalizing.
 *
 * @param response effective areas, in the energy window if that is counted with
 * @param window the energy window, or null if it is not counted with
 * @param attenuation attenuation in the object, or null
 * @param randoms random coincidences, or null
 * @param pairsPerUnit pairs emitted that may have been recorded, per Bq/mL and mm³
 */
record PairModel(
        ElementResponse response,
        @Nullable WindowShares window,
        @Nullable Attenuation attenuation,
        @Nullable Randoms randoms,
        double pairsPerUnit) {
    private static final int SCATTER_POINTS = 500;

    static PairModel of(
            EventSource list,
            Systems systems,
            Corrections corrections,
            @Nullable Attenuation attenuation,
            Applied applied)
            throws IOException {
        ListHeader header = list.header();
        applied.add("live_fraction", header.liveTimeS() / header.durationS());
        if (header.nuclide() != null) {
            applied.add("branching", header.nuclide().positronBranching());
            applied.add("decay_mean_factor", header.nuclide().effectiveTimeS(header.durationS()) / header.durationS());
        } else {
            applied.leave("decay");
            applied.leave("branching");
        }
        ElementResponse first = systems.response();
        WindowShares window = window(header, systems, first, corrections, applied);
        if (attenuation == null) {
            applied.leave("attenuation");
        }
        double kept = survival(header, systems, window, corrections, applied);
        return new PairModel(
                window == null ? first : first.within(window),
                window,
                attenuation,
                randoms(list, systems, corrections, applied),
                header.pairsPerBqPerMlAndMm3() * kept);
    }

    /** The pairs, with so many rays and what else is measured of their ends, attenuated if that is counted with. */
    CoincidenceSheaves sheaves(Positions positions) {
        CoincidenceSheaves sheaves = new CoincidenceSheaves(response).locating(positions);
        return attenuation == null ? sheaves : sheaves.with(attenuation);
    }

    /** Scatter of an activity, by time where times are used, or null if attenuation or window are not known. */
    @Nullable
    Scatter scatter(Image activityBqPerMl, @Nullable FlightTimes times, ForkJoinPool pool) {
        return attenuation == null || window == null
                ? null
                : Scatter.of(response, window, activityBqPerMl, attenuation.muPerMm(), SCATTER_POINTS, times, pool);
    }

    private static @Nullable WindowShares window(
            ListHeader header, Systems systems, ElementResponse response, Corrections corrections, Applied applied) {
        if (systems.system().blocks().stream()
                .allMatch(block -> block.material().ideal())) {
            return null; // every first interaction is recorded
        }
        if (!corrections.window()) {
            applied.leave("energy window and scatter between crystals");
            return null;
        }
        PairingRecord pairing = header.pairing();
        Double low = corrections.lowestKeV();
        Double high = corrections.highestKeV();
        if (low == null && pairing != null) {
            low = pairing.settings().lowestKeV();
        }
        if (high == null && pairing != null) {
            high = pairing.settings().highestKeV();
        }
        double lowest = low == null ? 0 : low;
        double highest = high == null ? Double.POSITIVE_INFINITY : high;
        WindowShares shares = systems.window(response, lowest, highest);
        Map<String, Object> row = new LinkedHashMap<>();
        row.put("lowest_keV", lowest);
        row.put("highest_keV", Double.isInfinite(highest) ? "none" : highest);
        row.put("signals_per_first_interaction", shares.mean());
        row.put("relative_error_of_an_element", shares.relativeError());
        row.put("deeper_than_first_interaction_mm", shares.deeperMm());
        applied.add("window", row);
        return shares;
    }

    /** Share of pairs that neither third photons nor pile-up spoilt. */
    private static double survival(
            ListHeader header,
            Systems systems,
            @Nullable WindowShares window,
            Corrections corrections,
            Applied applied) {
        PairingRecord pairing = header.pairing();
        if (!corrections.losses() || pairing == null) {
            applied.leave("losses in pairing and by pile-up");
            return 1;
        }
        double unspoilt = Randoms.survival(pairing, header.durationS());
        double piled = window == null ? 1 : PileUp.pairShare(systems.system(), header, pairing, window.pileUpShare());
        applied.add("share_of_pairs_not_spoilt_by_a_third_photon", unspoilt);
        applied.add("share_of_pairs_left_by_pile_up", piled);
        return unspoilt * piled;
    }

    private static @Nullable Randoms randoms(
            EventSource list, Systems systems, Corrections corrections, Applied applied) throws IOException {
        Corrections.RandomsFrom from = corrections.randoms();
        PairingRecord pairing = list.header().pairing();
        if (from == Corrections.RandomsFrom.AUTO) {
            boolean singles = pairing != null && !pairing.singles().isEmpty();
            from = list.attributes().contains(Attribute.DELAYED)
                    ? Corrections.RandomsFrom.DELAYED
                    : singles ? Corrections.RandomsFrom.SINGLES : Corrections.RandomsFrom.NONE;
        }
        if (from == Corrections.RandomsFrom.NONE) {
            applied.leave("randoms");
            return null;
        }
        Randoms randoms = from == Corrections.RandomsFrom.DELAYED
                ? Randoms.fromDelayed(list, systems.system())
                : Randoms.fromSingles(list, systems.system());
        applied.add(
                "randoms",
                Map.of(
                        "from", from.name().toLowerCase(Locale.ROOT),
                        "all_pairs", randoms.total(),
                        "prompt_randoms_per_delayed_pair", Randoms.promptShare(pairing)));
        return randoms;
    }
}
