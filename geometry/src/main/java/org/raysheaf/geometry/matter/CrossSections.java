package org.raysheaf.geometry.matter;

import java.io.BufferedReader;
import java.io.IOException;
import java.io.InputStream;
import java.io.InputStreamReader;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import java.util.Set;

/**
 * Photon cross sections of the elements from {@value #LOWEST_KEV} keV to {@value #HIGHEST_KEV} keV, from NIST XCOM (SRD 8); the resource
 * says more. Read once. Immutable, safe for use by several threads.
 */
final class CrossSections {
    /** Where the tables begin (keV). */
    static final double LOWEST_KEV = 10;

    /** Where the tables end (keV). */
    static final double HIGHEST_KEV = 3000;

    private static final String RESOURCE = "photon-cross-sections.csv";
    private static final CrossSections TABLE = read();

    private final Map<String, Element> elements;

    /** One element: its relative atomic mass and a curve for each process. */
    private record Element(int z, double weight, Map<Interaction, EnergyCurve> curves) {}

    private CrossSections(Map<String, Element> elements) {
        this.elements = elements;
    }

    static Set<String> symbols() {
        return TABLE.elements.keySet();
    }

    static int atomicNumber(String symbol) {
        return element(symbol).z;
    }

    static double atomicWeight(String symbol) {
        return element(symbol).weight;
    }

    /**
     * Cross section (barn per atom) at an energy (keV); energies outside the table are taken as its ends.
     *
     * @throws IllegalArgumentException if the energy is not above 0
     */
    static double barn(String symbol, Interaction process, double energyKeV) {
        if (!(energyKeV > 0)) {
            throw new IllegalArgumentException("photon energy: expected more than 0 keV, found " + energyKeV);
        }
        double inside = Math.max(LOWEST_KEV, Math.min(HIGHEST_KEV, energyKeV));
        return Objects.requireNonNull(element(symbol).curves.get(process)).at(inside);
    }

    private static Element element(String symbol) {
        Element element = TABLE.elements.get(symbol);
        if (element == null) {
            throw new IllegalArgumentException("no cross sections of " + symbol + ", only of " + symbols());
        }
        return element;
    }

    private static CrossSections read() {
        Map<String, List<String[]>> rows = new LinkedHashMap<>();
        try (InputStream stream = CrossSections.class.getResourceAsStream(RESOURCE);
                BufferedReader lines = new BufferedReader(
                        new InputStreamReader(Objects.requireNonNull(stream, RESOURCE), StandardCharsets.UTF_8))) {
            for (String line = lines.readLine(); line != null; line = lines.readLine()) {
                if (!line.startsWith("#") && !line.startsWith("symbol,")) {
                    String[] cells = line.split(",", -1);
                    rows.computeIfAbsent(cells[0], symbol -> new ArrayList<>()).add(cells);
                }
            }
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
        Map<String, Element> elements = new LinkedHashMap<>();
        rows.forEach((symbol, cells) -> elements.put(symbol, element(cells)));
        return new CrossSections(elements);
    }

    private static Element element(List<String[]> rows) {
        double[] energies = column(rows, 3);
        Map<Interaction, EnergyCurve> curves = new EnumMap<>(Interaction.class);
        curves.put(Interaction.COHERENT, EnergyCurve.of(energies, column(rows, 4)));
        curves.put(Interaction.COMPTON, EnergyCurve.of(energies, column(rows, 5)));
        curves.put(Interaction.PHOTOELECTRIC, EnergyCurve.of(energies, column(rows, 6)));
        double[] pairs = column(rows, 7);
        double[] triplets = column(rows, 8);
        for (int i = 0; i < pairs.length; i++) {
            pairs[i] += triplets[i];
        }
        curves.put(Interaction.PAIR, EnergyCurve.ofPairProduction(energies, pairs));
        return new Element(Integer.parseInt(rows.get(0)[1]), Double.parseDouble(rows.get(0)[2]), curves);
    }

    private static double[] column(List<String[]> rows, int column) {
        return rows.stream()
                .mapToDouble(cells -> Double.parseDouble(cells[column]))
                .toArray();
    }
}
