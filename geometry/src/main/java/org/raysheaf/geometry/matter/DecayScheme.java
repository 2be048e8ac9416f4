package org.raysheaf.geometry.matter;

import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Set;
import org.raysheaf.geometry.settings.Problems;

/**
 * What a radionuclide emits, as far as a scan of annihilation photons or single gamma rays sees it. The library, {@code nuclides.csv},
 * has evaluated data with their sources. Lines are taken as independent of each other; true cascades are not followed. A line that follows some
 * positron branches only stands twice, one entry after the other, once with either timing, so that it comes with a positron as often as it does
 * in nature; both entries together are one line, and a decay sends out at most one photon of it.
 *
 * @param nuclide name, half-life and positrons per decay
 * @param positrons the branches of the positron decay; their shares are of the positrons, adding up to 1; empty without any
 * @param gammas gamma rays other than annihilation photons, and X-rays where they matter
 */
public record DecayScheme(Nuclide nuclide, List<PositronBranch> positrons, List<GammaLine> gammas) {
    /** Departure of a sum of shares from 1 that is rounding in the last digit of a double, many times over. */
    private static final double ROUNDING = 1e-9;

    private static final Map<String, DecayScheme> LIBRARY = read();

    public DecayScheme {
        positrons = List.copyOf(positrons);
        gammas = List.copyOf(gammas);
        Problems problems = new Problems("decay scheme of " + nuclide.name());
        double shares = 0;
        for (int i = 0; i < positrons.size(); i++) {
            problems.above("positrons[" + i + "].endpoint_keV", positrons.get(i).endpointKeV(), 0)
                    .within("positrons[" + i + "].share", positrons.get(i).share(), 0, 1);
            shares += positrons.get(i).share();
        }
        problems.rule(
                positrons.isEmpty() || Math.abs(shares - 1) <= ROUNDING,
                "positrons",
                "expected shares that add up to 1, found " + shares);
        problems.rule(
                positrons.isEmpty() == (nuclide.positronBranching() == 0),
                "positrons",
                "expected branches if there are positrons and none if not, found " + positrons.size() + " with "
                        + nuclide.positronBranching() + " positrons per decay");
        for (int i = 0; i < gammas.size(); i++) {
            GammaLine line = gammas.get(i);
            // Lines without positron must find room in the decays that emit none.
            double most = line.timing() == Timing.WITHOUT_POSITRON ? 1 - nuclide.positronBranching() : 1;
            problems.above("gammas[" + i + "].energy_keV", line.energyKeV(), 0)
                    .within("gammas[" + i + "].per_decay", line.perDecay(), 0, most);
        }
        problems.orThrow();
    }

    /**
     * One branch.
     *
     * @param endpointKeV largest kinetic energy of its positrons (keV)
     * @param share its share of all positrons
     */
    public record PositronBranch(double endpointKeV, double share) {}

    /**
     * One gamma line.
     *
     * @param energyKeV energy (keV)
     * @param perDecay photons per decay
     * @param timing how it is related to a positron of the same decay
     */
    public record GammaLine(double energyKeV, double perDecay, Timing timing) {}

    /** How a gamma ray is related in time to the positron. */
    public enum Timing {
        /** At the same time, as often with a positron as without. */
        TOGETHER,
        /** Only in decays by electron capture, without a positron; so at most as often as there are such decays. */
        WITHOUT_POSITRON,
        /** Later, from a level that lives so long that it is in time with nothing. */
        LATER
    }

    /**
     * Names of all nuclides of the library, like {@code F-18}.
     *
     * @return an unmodifiable set
     */
    public static Set<String> names() {
        return LIBRARY.keySet();
    }

    /**
     * Looks up a nuclide.
     *
     * @param name its name
     * @return its decay, or empty if the library has none of that name
     */
    public static Optional<DecayScheme> find(String name) {
        return Optional.ofNullable(LIBRARY.get(name));
    }

    private static Map<String, DecayScheme> read() {
        Map<String, DecayScheme> library = new LinkedHashMap<>();
        for (List<String> row : Table.rows(DecayScheme.class, "nuclides.csv", 5)) {
            double perDecay = Double.parseDouble(row.get(2));
            Nuclide nuclide = new Nuclide(row.get(0), Double.parseDouble(row.get(1)), perDecay);
            List<List<String>> branches = Table.pairs(row.get(3));
            double sum = branches.stream()
                    .mapToDouble(branch -> Double.parseDouble(branch.get(1)))
                    .sum();
            List<PositronBranch> positrons = branches.stream()
                    .map(branch -> new PositronBranch(
                            Double.parseDouble(branch.get(0)), Double.parseDouble(branch.get(1)) / sum))
                    .toList();
            List<GammaLine> gammas = Table.pairs(row.get(4)).stream()
                    .map(line -> new GammaLine(
                            Double.parseDouble(line.get(0)), Double.parseDouble(line.get(1)), timing(line)))
                    .toList();
            library.put(nuclide.name(), new DecayScheme(nuclide, positrons, gammas));
        }
        return Collections.unmodifiableMap(library);
    }

    private static Timing timing(List<String> line) {
        if (line.size() < 3) {
            return Timing.TOGETHER;
        }
        return switch (line.get(2)) {
            case "c" -> Timing.WITHOUT_POSITRON;
            case "l" -> Timing.LATER;
            default -> throw new IllegalStateException("unknown timing " + line);
        };
    }
}
